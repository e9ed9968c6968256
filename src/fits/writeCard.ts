import { CARD_SIZE } from './card.ts'

/**
 * A header card to write. COMMENT and HISTORY take their text from `comment`. A keyword of more than 8 characters or
 * with blanks is written as HIERARCH; text of more than 68 characters is continued.
 */
export interface FitsCardInput {
  readonly keyword: string
  readonly value?: string | number | bigint | boolean
  readonly comment?: string
}

const LONGEST_TEXT = 68
const KEYWORD = /^[A-Z0-9_-]{1,8}$/
const LONG_KEYWORD = /^[A-Z0-9_-]+( [A-Z0-9_-]+)*$/

/**
 * The 80-character cards that write one keyword: one, or several where text is continued or a comment is long
 * (FITS 4.0, sections 4.2.1.2 and 4.4.2.4). A comment that finds no room is cut.
 *
 * @throws RangeError when the keyword, a character or a number cannot be written
 */
export function cardsOf({ keyword, value, comment = '' }: FitsCardInput): readonly string[] {
  requirePrintable(keyword, comment)
  if (keyword === 'COMMENT' || keyword === 'HISTORY' || keyword === '') {
    const pieces = comment.match(/.{1,72}/g) ?? ['']
    return pieces.map((piece) => (keyword.padEnd(8) + piece).padEnd(CARD_SIZE))
  }
  const short = KEYWORD.test(keyword)
  if (!short && !LONG_KEYWORD.test(keyword)) {
    throw new RangeError(`keyword requires A-Z, 0-9, hyphen and underscore, got ${keyword}`)
  }
  const start = short ? `${keyword.padEnd(8)}= ` : `HIERARCH ${keyword} = `
  if (typeof value === 'string') return textCards(keyword, start, value, comment)
  const text = value === undefined ? '' : plainText(keyword, value)
  if (start.length + text.length > CARD_SIZE)
    throw new RangeError(`${keyword} requires a card of 80 characters, got more`)
  return [withComment(start + (short ? text.padStart(20) : text), comment)]
}

function requirePrintable(keyword: string, text: string): void {
  if (!/^[\x20-\x7e]*$/.test(text)) {
    throw new RangeError(`${keyword} requires printable ASCII, got ${JSON.stringify(text)}`)
  }
}

function plainText(keyword: string, value: number | bigint | boolean): string {
  if (typeof value === 'boolean') return value ? 'T' : 'F'
  if (typeof value === 'number' && !Number.isFinite(value)) {
    throw new RangeError(`${keyword} requires a finite number, got ${value}`)
  }
  if (typeof value === 'bigint' || Number.isSafeInteger(value)) return String(Object.is(value, -0) ? 0 : value)
  const [mantissa = '', exponent] = String(value).split('e')
  const pointed = mantissa.includes('.') ? mantissa : `${mantissa}.0`
  return exponent === undefined ? pointed : `${pointed}E${exponent}`
}

function withComment(text: string, comment: string): string {
  if (comment === '' || text.length + 4 > CARD_SIZE) return text.padEnd(CARD_SIZE)
  return `${text} / ${comment}`.slice(0, CARD_SIZE).padEnd(CARD_SIZE)
}

function textCards(keyword: string, start: string, value: string, comment: string): readonly string[] {
  requirePrintable(keyword, value)
  const quoted = value.trimEnd().replaceAll("'", "''")
  if (start.length + quoted.length + 2 <= CARD_SIZE) {
    const closed = `${start}'${quoted.padEnd(8)}'`
    return [withComment(closed.length > CARD_SIZE ? `${start}'${quoted}'` : closed.padEnd(30), comment)]
  }
  if (start.length > 10)
    throw new RangeError(`${keyword} requires text that fits its card, got ${value.length} characters`)
  const pieces = splitText(quoted, LONGEST_TEXT - 1)
  return pieces.map((piece, i) => {
    const last = i === pieces.length - 1
    const head = i === 0 ? start : 'CONTINUE  '
    const text = `${head}'${piece}${last ? '' : '&'}'`
    return last ? withComment(text, comment) : text.padEnd(CARD_SIZE)
  })
}

/** Pieces of at most that length; a doubled quote is never split. */
function splitText(quoted: string, length: number): readonly string[] {
  const pieces: string[] = []
  let rest = quoted
  while (rest.length > length) {
    let cut = length
    const quotes = /'*$/.exec(rest.slice(0, cut))?.[0].length ?? 0
    if (quotes % 2 === 1) cut--
    pieces.push(rest.slice(0, cut))
    rest = rest.slice(cut)
  }
  return [...pieces, rest]
}
