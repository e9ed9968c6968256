import { FormatError } from '../errors.ts'
import { BLOCK_SIZE, CARD_SIZE, parseCard, parseNumber } from './card.ts'
import type { CardBreach } from './card.ts'
import { textOf } from './text.ts'
import type { ByteSource, Card, FitsNote, Header } from './types.ts'

/** Cards above which a header is taken for damage: the longest headers met hold some thousands. */
const MOST_CARDS = 144_000
const FIRST_BLOCKS = 4

/** A header read from a file: its cards, the bytes it fills, and what was noticed. */
export interface HeaderRead {
  readonly header: Header
  readonly size: number
  readonly notes: readonly FitsNote[]
}

/** The header over cards: `get` gives the first card of a keyword. */
export function headerOf(cards: readonly Card[]): Header {
  let index: Map<string, Card> | undefined
  return {
    cards,
    get(keyword) {
      if (!index) {
        index = new Map()
        for (const card of cards) if (!index.has(card.keyword)) index.set(card.keyword, card)
      }
      return index.get(keyword)
    },
  }
}

/**
 * The header that begins at a byte, read block by block up to its END card. CONTINUE cards are joined to the text
 * they continue. Bytes outside printable ASCII are kept as '?' (NUL as a blank), each kind noted once.
 *
 * @throws FormatError 'truncated-header' when the file ends before END, 'header-without-end' when END never comes
 */
export function readHeader(source: ByteSource, start: number, hdu: number): HeaderRead {
  const cards: Card[] = []
  const seen = new Map<string, string>()
  const note = (code: string, text: string): void => void (seen.has(code) || seen.set(code, text))
  let at = start
  let blocks = FIRST_BLOCKS
  for (;;) {
    const length = Math.min(blocks * BLOCK_SIZE, source.size - at)
    const whole = length - (length % CARD_SIZE)
    if (whole <= 0) throw truncated(source, start, hdu)
    const bytes = source.read(at, whole)
    const end = endCard(bytes)
    const used =
      end < 0
        ? whole
        : Math.min(whole, Math.ceil((at + end + CARD_SIZE - start) / BLOCK_SIZE) * BLOCK_SIZE + start - at)
    const text = cleanText(bytes.subarray(0, used), at, note)
    const stop = end < 0 ? whole : end
    for (let i = 0; i < stop; i += CARD_SIZE) {
      const { card, breach } = parseCard(text.slice(i, i + CARD_SIZE), at + i)
      if (breach) note(breach, breachText(breach, card))
      cards.push(card)
    }
    if (end >= 0) {
      const size = Math.ceil((at + end + CARD_SIZE - start) / BLOCK_SIZE) * BLOCK_SIZE
      return { header: headerOf(joinContinued(cards)), size, notes: notesOf(seen, cards) }
    }
    if (cards.length > MOST_CARDS) {
      const message = `header requires an END card within ${MOST_CARDS} cards, got none`
      throw new FormatError('header-without-end', message, { hdu, byte: start })
    }
    if (whole < length || at + whole >= source.size) throw truncated(source, start, hdu)
    at += whole
    blocks = Math.min(blocks * 2, 256)
  }
}

const [LETTER_E, LETTER_N, LETTER_D] = [69, 78, 68]

/** Where the END card begins among whole cards, or -1. */
function endCard(bytes: Uint8Array): number {
  for (let i = 0; i < bytes.length; i += CARD_SIZE) {
    if (bytes[i] !== LETTER_E || bytes[i + 1] !== LETTER_N || bytes[i + 2] !== LETTER_D) continue
    if (bytes.subarray(i + 3, i + 8).every((byte) => byte === 32 || byte === 0)) return i
  }
  return -1
}

function truncated(source: ByteSource, start: number, hdu: number): FormatError {
  const message = `header requires an END card, got the end of the file after ${source.size - start} bytes`
  return new FormatError('truncated-header', message, { hdu, byte: source.size })
}

function cleanText(bytes: Uint8Array, at: number, note: (code: string, text: string) => void): string {
  let clean = true
  for (let i = 0; i < bytes.length; i++) {
    const c = bytes[i] as number
    if (c < 32 || c > 126) {
      clean = false
      if (c === 0) note('nul-in-header', `header holds NUL bytes, the first at byte ${at + i}, read as blanks`)
      else note('non-ascii-header', `header holds a byte outside printable ASCII (0x${hex(c)}) at byte ${at + i}`)
    }
  }
  const text = textOf(bytes)
  return clean ? text : text.replaceAll('\0', ' ').replace(/[^\x20-\x7e]/g, '?')
}

function hex(byte: number): string {
  return byte.toString(16).padStart(2, '0')
}

function breachText(breach: CardBreach, card: Card): string {
  const where = `${card.keyword} at byte ${card.byte}`
  if (breach === 'lower-case-keyword') return `keyword in lower case, read as ${where}`
  if (breach === 'value-indicator') return `card lacks "= " in columns 9 and 10, read as ${where}`
  if (breach === 'unclosed-text') return `text without a closing quote, read to the end of the card: ${where}`
  return `value is neither a number, a logical nor quoted text, read as text: ${where}`
}

function joinContinued(cards: readonly Card[]): readonly Card[] {
  if (!cards.some((card) => card.keyword === 'CONTINUE')) return cards
  const joined: Card[] = []
  for (const card of cards) {
    const last = joined.at(-1)
    const open = last && typeof last.value === 'string' && last.value.endsWith('&') && card.keyword === 'CONTINUE'
    if (open && typeof card.value === 'string') {
      const comment = [last.comment, card.comment].filter((part) => part !== '').join(' ')
      joined[joined.length - 1] = { ...last, value: (last.value as string).slice(0, -1) + card.value, comment }
    } else joined.push(card)
  }
  return joined
}

function notesOf(seen: ReadonlyMap<string, string>, cards: readonly Card[]): readonly FitsNote[] {
  const notes = [...seen].map(([code, text]) => ({ code, text }))
  const first = new Map<string, Card>()
  for (const card of cards) {
    if (card.value === undefined || card.keyword === 'CONTINUE') continue
    const earlier = first.get(card.keyword)
    if (!earlier) first.set(card.keyword, card)
    else if (!sameValue(earlier, card)) {
      const text = `${card.keyword} is given twice (${valueText(earlier)}, then ${valueText(card)} at byte ${card.byte})`
      notes.push({ code: 'duplicate-keyword', text: `${text}; the first is used` })
    }
  }
  return notes
}

function sameValue(a: Card, b: Card): boolean {
  return a.value === b.value || valueText(a) === valueText(b)
}

function valueText({ value }: Card): string {
  return typeof value === 'object' ? `(${value.re}, ${value.im})` : String(value)
}

/** The text of a keyword without trailing blanks; undefined when it is absent or no text. */
export function textValue(header: Header, keyword: string): string | undefined {
  const value = header.get(keyword)?.value
  return typeof value === 'string' ? value : undefined
}

/**
 * The number of a keyword; undefined when it is absent, no number, or not finite. A number that was written between
 * quotes, as some observatories do, counts as that number; text that only begins with digits does not.
 */
export function numberValue(header: Header, keyword: string): number | undefined {
  const value = header.get(keyword)?.value
  if (typeof value === 'number') return Number.isFinite(value) ? value : undefined
  if (typeof value === 'bigint') return Number(value)
  if (typeof value !== 'string') return undefined
  const number = parseNumber(value.trim())
  return number === undefined || !Number.isFinite(Number(number)) ? undefined : Number(number)
}

/** The integer of a keyword (also written as 3.0 or between quotes); undefined when it is absent or none. */
export function integerValue(header: Header, keyword: string): number | undefined {
  const value = numberValue(header, keyword)
  return value !== undefined && Number.isSafeInteger(value) ? value : undefined
}

/** The logical of a keyword; undefined when it is absent or none. Text and numbers are never taken for logicals. */
export function booleanValue(header: Header, keyword: string): boolean | undefined {
  const value = header.get(keyword)?.value
  return typeof value === 'boolean' ? value : undefined
}
