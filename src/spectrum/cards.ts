import { numberValue } from '../fits/header.ts'
import type { Header } from '../fits/types.ts'

/** Headers in order of precedence: the HDU's own, then the primary header that it inherits from. */
export type Headers = readonly Header[]

/** Value of the first header that holds the keyword, as a number; undefined when absent or no number. */
export function cardNumber(headers: Headers, keyword: string): number | undefined {
  for (const header of headers) {
    if (header.get(keyword) === undefined) continue
    return numberValue(header, keyword)
  }
  return undefined
}

/** Value of the first header that holds the keyword with a value that is not blank, as trimmed text; else undefined. */
export function cardText(headers: Headers, keyword: string): string | undefined {
  for (const header of headers) {
    const value = header.get(keyword)?.value
    if (typeof value === 'string') {
      if (value.trim() !== '') return value.trim()
    } else if (typeof value === 'number' || typeof value === 'bigint') return String(value)
    else if (typeof value === 'boolean') return value ? 'T' : 'F'
  }
  return undefined
}

/** True or false as a flag card says it: T, F, 1, 0, 'yes', 'no', 'true', 'false'; undefined when absent or another word. */
export function cardTruth(headers: Headers, keyword: string): boolean | undefined {
  const text = cardText(headers, keyword)?.toLowerCase()
  if (text === undefined) return undefined
  if (/^(t|true|y|yes|1|1\.0|on)$/.test(text)) return true
  return /^(f|false|n|no|0|0\.0|off)$/.test(text) ? false : undefined
}

/** Text of all COMMENT and HISTORY cards of the headers, one line a card. */
export function remarks(headers: Headers): string {
  const lines: string[] = []
  for (const header of headers)
    for (const card of header.cards)
      if (card.keyword === 'COMMENT' || card.keyword === 'HISTORY')
        lines.push(typeof card.value === 'string' && card.value !== '' ? card.value : card.comment)
  return lines.join('\n')
}
