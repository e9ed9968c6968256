import type { Card } from '../fits/types.ts'
import { numberValue, textValue } from '../fits/header.ts'
import { cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import type { FactName, KeywordSynonym, KeywordTable } from '../tables/types.ts'
import type { Note } from '../findings/types.ts'

/** A card that holds a value for a fact. */
export interface FactCard {
  readonly synonym: KeywordSynonym
  readonly card: Card
  readonly header: number
}

/** Cards of a fact in order of precedence: by synonym, then by header. */
export function factCards(headers: Headers, keywords: KeywordTable, fact: FactName): readonly FactCard[] {
  const found: FactCard[] = []
  for (const synonym of keywords.facts[fact]) {
    for (let i = 0; i < headers.length; i++) {
      const card = headers[i].get(synonym.keyword)
      if (
        card?.value === undefined ||
        card.value === '' ||
        (typeof card.value === 'string' && card.value.trim() === '')
      )
        continue
      if (!counts(headers, synonym)) continue
      found.push({ synonym, card, header: i })
    }
  }
  return found
}

function counts(headers: Headers, { when, whenAbsent }: KeywordSynonym): boolean {
  if (when === undefined) return true
  const text = cardText(headers, when)
  return text === undefined ? whenAbsent === 'counts' : /^(t|true|on|1|yes)$/i.test(text)
}

/** Words that stand in a header for "not known". */
const PLACEHOLDER = /^(unknown|unk|undefined|undef|none|n\/a|na|null|nan|indef|not set|-+|\?+|\.\.\.)$/i

/** The first text of a fact that is no placeholder; numbers as text. */
export function factText(headers: Headers, keywords: KeywordTable, fact: FactName): string | undefined {
  for (const { card } of factCards(headers, keywords, fact)) {
    const text = valueText(card)
    if (text !== undefined) return text
  }
  return undefined
}

/** All different texts of a fact, placeholders left out. */
export function factTexts(headers: Headers, keywords: KeywordTable, fact: FactName): readonly string[] {
  const texts = factCards(headers, keywords, fact).map(({ card }) => valueText(card))
  return [...new Set(texts.filter((text) => text !== undefined))]
}

/** The card's value as trimmed text; undefined for placeholders, logicals and what is blank. */
export function valueText({ value }: Card): string | undefined {
  if (typeof value === 'number' || typeof value === 'bigint') return String(value)
  if (typeof value !== 'string') return undefined
  const text = value.trim()
  return text === '' || PLACEHOLDER.test(text) ? undefined : text
}

/** The number of a card of a header, also when written as text. */
export function cardValue(headers: Headers, { card, header }: FactCard): number | undefined {
  return textValue(headers[header], card.keyword) === undefined
    ? numberValue(headers[header], card.keyword)
    : textNumber(String(card.value))
}

function textNumber(text: string): number | undefined {
  const match = /^\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)/i.exec(text)
  return match ? Number(match[1]) : undefined
}

/**
 * The first number of a fact that lies within its possible range; impossible ones are noted and passed over.
 *
 * @param range  least and most possible value, inclusive
 */
export function factNumber(
  headers: Headers,
  keywords: KeywordTable,
  { fact, range, words }: { fact: FactName; range: readonly [number, number]; words: string },
  notes: Note[],
): { readonly value: number; readonly found: FactCard } | undefined {
  for (const found of factCards(headers, keywords, fact)) {
    const raw = cardValue(headers, found)
    if (raw === undefined) continue
    const value = scaled(raw, found.synonym.form)
    if (value >= range[0] && value <= range[1]) return { value, found }
    notes.push(impossible(found.card.keyword, String(found.card.value), `${words} from ${range[0]} to ${range[1]}`))
  }
  return undefined
}

function scaled(value: number, form: KeywordSynonym['form']): number {
  if (form === 'minutes') return value * 60
  if (form === 'milliseconds') return value / 1000
  if (form === 'jd') return value - 2400000.5
  if (form === 'tai seconds') return value / 86400
  return value
}

/** The note of a value that cannot be. */
export function impossible(keyword: string, value: string, rule: string): Note {
  return { code: 'impossible-value', text: `${keyword} is ${value}, which is no ${rule}; it is left out` }
}
