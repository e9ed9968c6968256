import type { Font } from 'fontkit'
import type { Anchor, LinkTarget, TextItem, Weight } from './drawing.ts'
import { PALETTE } from './palette.ts'
import { plainText } from './plainText.ts'

/** The two fonts of a page, parsed by fontkit. */
export type Fonts = Readonly<Record<Weight, Font>>

/** How to set one line of text. */
export interface TextStyle {
  readonly size?: number
  readonly weight?: Weight
  readonly colour?: string
  readonly anchor?: Anchor
  /** Longest width [points]; what does not fit is cut and ends in '…'. */
  readonly fit?: number
  /** Cut in the middle instead of the end (paths). */
  readonly middle?: boolean
  readonly upright?: true
  readonly link?: LinkTarget
}

/** Measures and sets text in the fonts given. Glyphs stand one by one, without kerning, so that widths add up. */
export interface Typeface {
  width(text: string, size: number, weight: Weight): number
  /** The text without control characters; characters that the font lacks become U+FFFD. */
  clean(text: string): string
  /** The longest beginning (or beginning and end) of a clean text that fits, with '…' for what was cut. */
  fit(text: string, width: number, style: { size: number; weight: Weight; middle?: boolean }): string
  text(x: number, y: number, text: string, style?: TextStyle): TextItem
  /** Lines of a clean text broken at spaces; a word longer than the width is broken inside. */
  wrap(text: string, width: number, style: { size: number; weight: Weight }): string[]
}

/** The typeface of two parsed fonts; keeps the advance widths it has met. */
export function makeTypeface(fonts: Fonts): Typeface {
  const advances: Readonly<Record<Weight, Map<number, number>>> = { regular: new Map(), bold: new Map() }

  function advance(point: number, weight: Weight): number {
    const known = advances[weight].get(point)
    if (known !== undefined) return known
    const font = fonts[weight]
    const value = font.hasGlyphForCodePoint(point) ? font.glyphForCodePoint(point).advanceWidth / font.unitsPerEm : -1
    advances[weight].set(point, value)
    return value
  }

  function width(text: string, size: number, weight: Weight): number {
    let sum = 0
    for (const letter of text) sum += Math.max(0, advance(letter.codePointAt(0) ?? 0, weight))
    return sum * size
  }

  function clean(text: string): string {
    let out = ''
    for (const letter of plainText(text)) {
      const point = letter.codePointAt(0) ?? 0
      out += advance(point, 'regular') < 0 || advance(point, 'bold') < 0 ? '\ufffd' : letter
    }
    return out
  }

  function fit(text: string, room: number, style: { size: number; weight: Weight; middle?: boolean }): string {
    const { size, weight, middle = false } = style
    if (width(text, size, weight) <= room) return text
    const letters = [...text]
    const cut = (kept: number): string => {
      if (!middle) return letters.slice(0, kept).join('').trimEnd() + '…'
      const front = Math.ceil(kept / 3)
      return letters.slice(0, front).join('') + '…' + letters.slice(letters.length - (kept - front)).join('')
    }
    let low = 0
    let high = letters.length - 1
    while (low < high) {
      const half = Math.ceil((low + high) / 2)
      if (width(cut(half), size, weight) <= room) low = half
      else high = half - 1
    }
    return low === 0 ? '…' : cut(low)
  }

  function text(x: number, y: number, given: string, style: TextStyle = {}): TextItem {
    const {
      size = 8,
      weight = 'regular',
      colour = PALETTE.ink,
      anchor = 'start',
      fit: room,
      middle,
      upright,
      link,
    } = style
    const whole = clean(given)
    const shown = room === undefined ? whole : fit(whole, room, { size, weight, ...(middle ? { middle } : {}) })
    return {
      draw: 'text',
      x,
      y,
      text: shown,
      size,
      weight,
      colour,
      anchor,
      width: width(shown, size, weight),
      ...(upright ? { upright } : {}),
      ...(link ? { link } : {}),
    }
  }

  function wrap(given: string, room: number, { size, weight }: { size: number; weight: Weight }): string[] {
    const lines: string[] = []
    let line = ''
    for (const word of given.split(' ')) {
      const longer = line === '' ? word : `${line} ${word}`
      if (width(longer, size, weight) <= room) {
        line = longer
        continue
      }
      if (line !== '') lines.push(line)
      line = ''
      for (const letter of word) {
        if (line !== '' && width(line + letter, size, weight) > room) {
          lines.push(line)
          line = ''
        }
        line += letter
      }
    }
    if (line !== '' || lines.length === 0) lines.push(line)
    return lines
  }

  return { width, clean, fit, text, wrap }
}
