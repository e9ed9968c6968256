import type { Card, CardValue } from './types.ts'

/** Bytes of a header card and of a block (FITS 4.0, sections 3.1 and 3.3.1). */
export const CARD_SIZE = 80
export const BLOCK_SIZE = 2880

/** What a card's text broke, if anything, while it could still be understood. */
export type CardBreach = 'lower-case-keyword' | 'value-indicator' | 'unquoted-text' | 'unclosed-text'

/** A card as parsed, and the rule it breaks. */
export interface ParsedCard {
  readonly card: Card
  readonly breach?: CardBreach
}

const BLANK = 32
const QUOTE = 39
const SLASH = 47
const EQUALS = 61
const LARGEST_SAFE_DIGITS = 15

/**
 * The card that 80 characters hold (FITS 4.0, section 4.1). Keywords come out in upper case; the value is a string,
 * number (bigint beyond 2^53), logical or complex number. Free format, doubled quotes, D exponents and lower-case
 * exponents are understood. Text without quotes is kept as a string and named as a breach.
 *
 * @param text  the 80 characters, without control characters
 * @param byte  where the card begins in the file
 */
export function parseCard(text: string, byte: number): ParsedCard {
  if (text.startsWith('HIERARCH ')) {
    const equals = text.indexOf('=', 9)
    if (equals > 0) return withValue(text.slice(9, equals).trim().replace(/ +/g, ' '), text, equals + 1, byte)
  }
  const written = text.slice(0, 8).trimEnd()
  if (text.charCodeAt(8) === EQUALS && written !== '' && written !== 'COMMENT' && written !== 'HISTORY') {
    return withValue(written, text, 9, byte)
  }
  if (written === 'CONTINUE') return withValue(written, text, 8, byte)
  if (written !== '' && written !== 'COMMENT' && written !== 'HISTORY') {
    const equals = text.indexOf('=')
    const name = equals > 0 ? text.slice(0, equals).trim() : ''
    if (/^[A-Za-z0-9_-]{1,8}$/.test(name)) {
      const parsed = withValue(name, text, equals + 1, byte)
      return { card: parsed.card, breach: parsed.breach ?? 'value-indicator' }
    }
  }
  return { card: { keyword: written.toUpperCase(), value: undefined, comment: text.slice(8).trimEnd(), byte } }
}

function withValue(name: string, text: string, start: number, byte: number): ParsedCard {
  const keyword = name.toUpperCase()
  const { value, comment, breach } = parseValue(text, start)
  const indicator = text.charCodeAt(start) !== BLANK && start === 9 && value !== undefined
  const found =
    breach ?? (keyword !== name ? 'lower-case-keyword' : indicator ? ('value-indicator' as const) : undefined)
  const card = { keyword, value, comment, byte }
  return found === undefined ? { card } : { card, breach: found }
}

function parseValue(text: string, start: number): { value: CardValue; comment: string; breach?: CardBreach } {
  let at = start
  while (at < text.length && text.charCodeAt(at) === BLANK) at++
  if (at >= text.length) return { value: undefined, comment: '' }
  if (text.charCodeAt(at) === QUOTE) return parseText(text, at)
  const slash = text.indexOf('/', at)
  const end = slash < 0 ? text.length : slash
  const token = text.slice(at, end).trimEnd()
  const comment = slash < 0 ? '' : text.slice(slash + 1).trim()
  if (token === '') return { value: undefined, comment }
  if (token === 'T') return { value: true, comment }
  if (token === 'F') return { value: false, comment }
  const number = parseNumber(token)
  if (number !== undefined) return { value: number, comment }
  const complex = parseComplex(token)
  if (complex) return { value: complex, comment }
  // a slash belongs to text without quotes unless a blank stands before it
  const gap = text.indexOf(' /', at)
  const whole = (gap < 0 ? text.slice(at) : text.slice(at, gap)).trimEnd()
  return { value: whole, comment: gap < 0 ? '' : text.slice(gap + 2).trim(), breach: 'unquoted-text' }
}

function parseText(text: string, open: number): { value: string; comment: string; breach?: CardBreach } {
  let close = text.indexOf("'", open + 1)
  let doubled = false
  while (close >= 0 && text.charCodeAt(close + 1) === QUOTE) {
    doubled = true
    close = text.indexOf("'", close + 2)
  }
  if (close < 0) return { value: text.slice(open + 1).trimEnd(), comment: '', breach: 'unclosed-text' }
  const inner = text.slice(open + 1, close)
  const value = (doubled ? inner.replaceAll("''", "'") : inner).trimEnd()
  let at = close + 1
  while (at < text.length && text.charCodeAt(at) === BLANK) at++
  const comment = text.charCodeAt(at) === SLASH ? text.slice(at + 1).trim() : text.slice(at).trim()
  return { value, comment }
}

/**
 * The number that a header or an ASCII table writes, undefined when the text is no number: digits with at most one
 * point and an exponent of E or D in either case. An integer beyond 15 digits comes out as a bigint where it is
 * beyond 2^53.
 */
export function parseNumber(text: string): number | bigint | undefined {
  let digits = 0
  let whole = true
  for (let i = 0; i < text.length; i++) {
    const c = text.charCodeAt(i)
    if (c >= 48 && c <= 57) digits++
    else if (c === 43 || c === 45) {
      const before = i === 0 ? 69 : text.charCodeAt(i - 1) & 0xdf
      if (before !== 69 && before !== 68) return undefined
    } else if (c === 46) whole = false
    else {
      const letter = c & 0xdf
      if ((letter !== 69 && letter !== 68) || digits === 0) return undefined
      whole = false
    }
  }
  if (digits === 0) return undefined
  if (whole && digits > LARGEST_SAFE_DIGITS) {
    const exact = BigInt(text.charCodeAt(0) === 43 ? text.slice(1) : text)
    const near = Number(exact)
    return Number.isSafeInteger(near) ? near : exact
  }
  const value = Number(whole ? text : text.replace(/[Dd]/, 'E'))
  return Number.isNaN(value) ? undefined : value
}

function parseComplex(token: string): { re: number; im: number } | undefined {
  if (!token.startsWith('(') || !token.endsWith(')')) return undefined
  const parts = token.slice(1, -1).split(',')
  if (parts.length !== 2) return undefined
  const re = parseNumber((parts[0] ?? '').trim())
  const im = parseNumber((parts[1] ?? '').trim())
  return re === undefined || im === undefined ? undefined : { re: Number(re), im: Number(im) }
}
