import type { Headers } from './cards.ts'
import { cardText } from './cards.ts'
import { factCards, factNumber, impossible, valueText } from './factCards.ts'
import { parseDate, secondsOfDay } from './time.ts'
import type { FactName, KeywordTable } from '../tables/types.ts'
import type { Note } from '../findings/types.ts'

/** When the exposure was, as the headers say: MJD and seconds. */
export interface HeaderTime {
  readonly dateObs?: string
  readonly mjdStart?: number
  readonly mjdMid?: number
  readonly mjdEnd?: number
  readonly exposure?: number
}

/** MJD of 1900 and 2100: no digital spectrum is older, none younger. */
const MJD_RANGE = [15020, 88069] as const
/** Longest single exposure [s] taken for possible: ten days, for stacked ones. */
const LONGEST = 864_000
/** Difference [days] of two statements of one time that is noted: one minute. */
const SAME_TIME = 1 / 1440

/** Start, middle and end of the exposure from dates, times and MJDs in all their spellings; contradictions are noted. */
export function headerTime(headers: Headers, keywords: KeywordTable, notes: Note[]): HeaderTime {
  const exposure = factNumber(
    headers,
    keywords,
    { fact: 'exposure', range: [0, LONGEST], words: 'exposure' },
    notes,
  )?.value
  const start = calendar(headers, keywords, { date: 'dateObs', time: 'timeObs' }, notes)
  const end = calendar(
    headers,
    keywords,
    { date: 'dateEnd', time: 'timeEnd', ...(start ? { day: start.mjd } : {}) },
    notes,
  )
  const mjd = (fact: FactName): number | undefined =>
    factNumber(headers, keywords, { fact, range: MJD_RANGE, words: 'modified Julian date' }, notes)?.value
  const givenStart = mjdStartOf(headers, keywords, notes)
  const givenMid = mjd('mjdMid')
  const givenEnd = mjd('mjdEnd')
  const length = exposure === undefined ? undefined : exposure / 86400
  const isMiddle =
    start !== undefined &&
    length !== undefined &&
    givenStart !== undefined &&
    Math.abs(start.mjd + length / 2 - givenStart) < SAME_TIME
  if (start?.hasTime && givenStart !== undefined && !isMiddle && Math.abs(start.mjd - givenStart) > SAME_TIME)
    notes.push({
      code: 'times-disagree',
      text: `the date means MJD ${start.mjd.toFixed(5)} and another card gives ${givenStart.toFixed(5)}; the date is used`,
    })
  const scale = cardText(headers, 'TIMESYS')
  if (scale !== undefined && !/^UTC?$/i.test(scale) && (start ?? givenStart) !== undefined)
    notes.push({
      code: 'time-scale',
      text: `times are in ${scale}, not UTC; they are used as they stand, about a minute off at most`,
    })
  const mjdStart = start?.hasTime ? start.mjd : (givenStart ?? start?.mjd)
  const mjdEnd = givenEnd ?? (end?.hasTime ? end.mjd : undefined)
  let mjdMid = givenMid
  if (mjdMid !== undefined && mjdStart !== undefined && Math.abs(mjdMid - mjdStart) > Math.max(length ?? 0, 1)) {
    notes.push({
      code: 'times-disagree',
      text: `the middle of the exposure, MJD ${mjdMid.toFixed(5)}, is far from its start, ${mjdStart.toFixed(5)}; the start is used`,
    })
    mjdMid = undefined
  }
  const isExact = start?.hasTime === true || givenStart !== undefined
  if (mjdMid === undefined && isExact && mjdStart !== undefined) {
    if (length !== undefined) mjdMid = mjdStart + length / 2
    else if (mjdEnd !== undefined && mjdEnd > mjdStart && mjdEnd - mjdStart < 1) mjdMid = (mjdStart + mjdEnd) / 2
  }
  return {
    ...(start ? { dateObs: isoText(start) } : {}),
    ...(mjdStart === undefined || !isExact ? {} : { mjdStart }),
    ...(mjdMid === undefined ? {} : { mjdMid }),
    ...(mjdEnd === undefined ? {} : { mjdEnd }),
    ...(exposure === undefined ? {} : { exposure }),
  }
}

/** MJD of the start; whole numbers, which only name the night, are passed over. */
function mjdStartOf(headers: Headers, keywords: KeywordTable, notes: Note[]): number | undefined {
  const own: Note[] = []
  let table = keywords
  for (;;) {
    const answer = factNumber(
      headers,
      table,
      { fact: 'mjdStart', range: MJD_RANGE, words: 'modified Julian date' },
      own,
    )
    if (!answer || answer.value % 1 !== 0) {
      notes.push(...own)
      return answer?.value
    }
    const rest = table.facts.mjdStart.filter((synonym) => synonym !== answer.found.synonym)
    table = { ...table, facts: { ...table.facts, mjdStart: rest } }
  }
}

/** The date as the file has it where that is ISO 8601, else turned into it. */
function isoText({ text, mjd, hasTime }: CalendarTime): string {
  if (/^\d{4}-\d\d-\d\d(T\d\d:\d\d(:\d\d(\.\d*)?)?)?$/.test(text)) return text
  const iso = new Date(Math.round((mjd - 40587) * 86_400_000)).toISOString()
  return hasTime ? iso.slice(0, 23).replace(/\.?0+$/, '') : iso.slice(0, 10)
}

interface CalendarTime {
  readonly mjd: number
  readonly hasTime: boolean
  readonly text: string
}

function calendar(
  headers: Headers,
  keywords: KeywordTable,
  { date, time, day }: { readonly date: FactName; readonly time: FactName; readonly day?: number },
  notes: Note[],
): CalendarTime | undefined {
  let whole: CalendarTime | undefined
  for (const { card } of factCards(headers, keywords, date)) {
    const text = valueText(card)
    if (text === undefined) continue
    const parsed = parseDate(text)
    if (!parsed) {
      if (/^\d{2,4}[-/:]\d/.test(text) && secondsOfDay(text) === undefined)
        notes.push(impossible(card.keyword, `'${text}'`, 'date'))
      continue
    }
    if (parsed.hasTime) return { ...parsed, text }
    whole ??= { ...parsed, text }
  }
  const base = whole?.mjd ?? (day === undefined ? undefined : Math.floor(day))
  if (base === undefined) return undefined
  for (const { card } of factCards(headers, keywords, time)) {
    const { value } = card
    const seconds = typeof value === 'string' || typeof value === 'number' ? secondsOfDay(value) : undefined
    if (seconds === undefined || (seconds === 0 && typeof value === 'number')) continue
    const mjd = Math.floor(base) + seconds / 86400
    // An end earlier in the day than the start falls on the next day.
    const next = day !== undefined && mjd < day ? mjd + 1 : mjd
    return { mjd: next, hasTime: true, text: whole ? `${whole.text} ${String(value)}` : String(value) }
  }
  return whole
}
