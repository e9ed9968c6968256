/** Marks that stand on the letter before them, and joiners. */
const ZERO = /^[\p{M}\u200b-\u200f\u2060\ufe00-\ufe0f]$/u
/** Letters that fill two columns of a terminal (Unicode Standard Annex 11: wide and fullwidth), and pictographs. */
const WIDE =
  /^[\u1100-\u115f\u2e80-\u303e\u3041-\ua4cf\ua960-\ua97f\uac00-\ud7a3\uf900-\ufaff\ufe30-\ufe6f\uff00-\uff60\uffe0-\uffe6\u{1f300}-\u{1faff}\u{20000}-\u{3fffd}]$/u

const letterWidth = (letter: string): number => (ZERO.test(letter) ? 0 : WIDE.test(letter) ? 2 : 1)

/** Columns of a terminal that a text without control characters fills. */
export function columnWidth(text: string): number {
  let sum = 0
  for (const letter of text) sum += letterWidth(letter)
  return sum
}

/** The text cut to at most `width` columns, its last column '…' when something was cut; marks stay on their letter. */
export function cutToWidth(text: string, width: number): string {
  if (columnWidth(text) <= width) return text
  let out = ''
  let sum = 0
  for (const letter of text) {
    if (sum + letterWidth(letter) > width - 1) break
    out += letter
    sum += letterWidth(letter)
  }
  return width < 1 ? '' : `${out}…`
}

/** The text filled with spaces to `width` columns, at its end, or in front for numbers. */
export function padToWidth(text: string, width: number, side: 'left' | 'right' = 'left'): string {
  const space = ' '.repeat(Math.max(0, width - columnWidth(text)))
  return side === 'left' ? text + space : space + text
}

/** Lines of at most `width` columns, broken at spaces; a longer word is broken inside. */
export function wrapToWidth(text: string, width: number): string[] {
  const lines: string[] = []
  let line = ''
  for (const word of text.split(' ')) {
    if (line !== '' && columnWidth(line) + 1 + columnWidth(word) <= width) {
      line += ` ${word}`
      continue
    }
    if (line !== '') lines.push(line)
    line = ''
    for (const letter of word) {
      if (columnWidth(line) + letterWidth(letter) > width && line !== '') {
        lines.push(line)
        line = ''
      }
      line += letter
    }
  }
  return line === '' && lines.length ? lines : [...lines, line]
}
