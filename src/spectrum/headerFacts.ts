import { sexagesimal } from './angle.ts'
import type { Headers } from './cards.ts'
import { factCards, factNumber, factText, factTexts, valueText } from './factCards.ts'
import { headerDirection, headerSite } from './headerPlace.ts'
import { headerTime } from './headerTime.ts'
import type { FactName, KeywordTable } from '../tables/types.ts'
import type { Header } from '../fits/types.ts'
import type { Note } from '../findings/types.ts'
import type { HeaderFacts } from './types.ts'

/** Words that stand in OBJECT for no object at all; another keyword is tried first. */
const GENERIC_OBJECT =
  /^(object|science|target|star|test|std|standard|spectrum|image|exposure|.*_science(_.*)?|empty image.*|0)$/i
/** Words of a filter wheel that mean no filter. */
const NO_FILTER = /^(free|clear|open|none|empty|out|air|notpresent|no filter|0)$/i

/**
 * What the headers say of the observation, by a table of synonyms: the first synonym with a possible value wins, the
 * first header before the later ones. Impossible values are left out and noted, contradictions are noted.
 *
 * @param headers  in order of precedence, such as an extension's and the primary one
 */
export function readHeaderFacts(
  headers: readonly Header[],
  keywords: KeywordTable,
): { readonly facts: HeaderFacts; readonly notes: readonly Note[] } {
  const notes: Note[] = []
  const text = (fact: FactName): string | undefined => factText(headers, keywords, fact)
  const number = (fact: FactName, range: readonly [number, number], words: string): number | undefined =>
    factNumber(headers, keywords, { fact, range, words }, notes)?.value
  const joined = (fact: FactName, wanted: (word: string) => boolean = () => true): string | undefined => {
    const words = factTexts(headers, keywords, fact).filter(wanted)
    return words.length === 0 ? undefined : words.join('; ')
  }
  const facts = {
    object: objectOf(headers, keywords),
    ...headerDirection(headers, keywords, notes),
    ...headerTime(headers, keywords, notes),
    airmass: airmassOf(headers, keywords, notes),
    hourAngle: hourAngleOf(headers, keywords),
    site: headerSite(headers, keywords, notes),
    telescope: text('telescope'),
    instrument: text('instrument'),
    detector: text('detector'),
    observer: text('observer'),
    frameWords: joined('frameWords'),
    lamp: joined('lamp', (word) => !/^(off|none|no|0|out)$/i.test(word)),
    grating: text('grating'),
    gratingTilt: number('gratingTilt', [-1e6, 1e6], 'grating tilt'),
    filter: joined('filter', (word) => !NO_FILTER.test(word)),
    slit: factTexts(headers, keywords, 'slit').find((word) => !/^(out|free|open|0)$/i.test(word)),
    binning: binningOf(headers, keywords),
    window: text('window'),
    gain: number('gain', [1e-3, 1e3], 'gain'),
    readNoise: number('readNoise', [0, 1e4], 'read noise'),
    saturation: number('saturation', [100, 1e9], 'saturation level'),
    resolutionFwhm: number('resolutionFwhm', [1e-3, 1e3], 'resolution'),
    resolvingPower: number('resolvingPower', [10, 1e6], 'resolving power'),
    spectralType: text('spectralType'),
    focus: number('focus', [-1e6, 1e6], 'focus'),
  }
  const known = Object.fromEntries(Object.entries(facts).filter(([, value]) => value !== undefined))
  return { facts: known as HeaderFacts, notes: uniqueNotes(notes) }
}

function uniqueNotes(notes: readonly Note[]): readonly Note[] {
  return notes.filter((note, i) => notes.findIndex(({ text }) => text === note.text) === i)
}

function objectOf(headers: Headers, keywords: KeywordTable): string | undefined {
  const texts = factTexts(headers, keywords, 'object')
  return texts.find((word) => !GENERIC_OBJECT.test(word)) ?? texts.find((word) => word !== '0')
}

/** Airmass: the middle one, or the mean of start and end, or the secant of the zenith distance (noted). */
function airmassOf(headers: Headers, keywords: KeywordTable, notes: Note[]): number | undefined {
  const range = [1, 40] as const
  const find = (fact: FactName): number | undefined =>
    factNumber(headers, keywords, { fact, range, words: 'airmass' }, notes)?.value
  const middle = find('airmass')
  if (middle !== undefined) return middle
  const start = find('airmassStart')
  const end = find('airmassEnd')
  if (start !== undefined) return end === undefined ? start : (start + end) / 2
  const zenith = factNumber(
    headers,
    keywords,
    { fact: 'zenithDistance', range: [0, 88], words: 'zenith distance' },
    notes,
  )
  if (!zenith) return undefined
  notes.push({
    code: 'airmass-derived',
    text: `airmass is the secant of ${zenith.found.card.keyword} = ${zenith.value} degrees`,
  })
  return 1 / Math.cos((zenith.value * Math.PI) / 180)
}

/** Hour angle in degrees: sexagesimal text is in hours; a number is in degrees unless its comment says hours. */
function hourAngleOf(headers: Headers, keywords: KeywordTable): number | undefined {
  for (const { card } of factCards(headers, keywords, 'hourAngle')) {
    const text = typeof card.value === 'string' ? sexagesimal(card.value) : undefined
    if (text !== undefined) return Math.abs(text) <= 12 ? text * 15 : undefined
    const plain = valueText(card)
    const value = plain === undefined ? NaN : Number(plain)
    const degrees = /hour|hrs?\b|\[h/i.test(card.comment) && Math.abs(value) <= 12 ? value * 15 : value
    if (Math.abs(degrees) <= 360) return degrees
  }
  return undefined
}

/** Binning as '2x2' from one card with both ('2 2', '2x2', '2,2') or two cards. */
function binningOf(headers: Headers, keywords: KeywordTable): string | undefined {
  for (const { card } of factCards(headers, keywords, 'binning')) {
    const both = /^\s*\(?(\d+)\s*[ x,X*]\s*(\d+)\)?\s*$/.exec(String(card.value))
    if (both) return `${both[1]}x${both[2]}`
  }
  const notes: Note[] = []
  const one = (fact: FactName): number | undefined =>
    factNumber(headers, keywords, { fact, range: [1, 64], words: 'binning' }, notes)?.value
  const x = one('binningX')
  const y = one('binningY')
  return x === undefined && y === undefined ? undefined : `${x ?? 1}x${y ?? 1}`
}
