import { angleDegrees, packedSexagesimal, rightAscension } from './angle.ts'
import type { JudgedAngle } from './angle.ts'
import { cardNumber } from './cards.ts'
import type { Headers } from './cards.ts'
import { cardValue, factCards, factNumber, factText, factTexts, impossible } from './factCards.ts'
import type { FactCard } from './factCards.ts'
import { eastLongitude, geodetic, knownSite } from './site.ts'
import type { KeywordTable } from '../tables/types.ts'
import type { Note } from '../findings/types.ts'
import type { Site } from './types.ts'

/** Direction of the star as the headers give it [degrees; Julian year]. */
export interface HeaderDirection {
  readonly ra?: number
  readonly dec?: number
  readonly equinox?: number
}

/** Right ascension and declination from the first pair of cards that is possible; others are noted. */
export function headerDirection(headers: Headers, keywords: KeywordTable, notes: Note[]): HeaderDirection {
  const ras = factCards(headers, keywords, 'ra')
  const decs = factCards(headers, keywords, 'dec')
  for (const ra of ras) {
    const rank = keywords.facts.ra.indexOf(ra.synonym)
    const dec = decs.find((found) => keywords.facts.dec.indexOf(found.synonym) === rank && found.header === ra.header)
    if (!dec) continue
    const found = pair(ra, dec, headers, notes)
    if (!found) continue
    const equinox = headerEquinox(headers, keywords)
    return { ...found, ...(equinox === undefined ? {} : { equinox }) }
  }
  return {}
}

function pair(
  ra: FactCard,
  dec: FactCard,
  headers: Headers,
  notes: Note[],
): { readonly ra: number; readonly dec: number } | undefined {
  const alpha = ra.synonym.form === 'packed' ? packed(headers, ra, 15) : rightAscension(ra.card.value, ra.card.comment)
  const delta = dec.synonym.form === 'packed' ? packed(headers, dec, 1) : angleDegrees(dec.card.value, dec.card.comment)
  const badRa = !alpha || !(alpha.degrees >= 0 && alpha.degrees <= 360)
  const badDec = !delta || !(Math.abs(delta.degrees) <= 90)
  if (badRa) notes.push(impossible(ra.card.keyword, String(ra.card.value), 'right ascension'))
  if (badDec) notes.push(impossible(dec.card.keyword, String(dec.card.value), 'declination'))
  if (badRa || badDec) return undefined
  if (alpha.degrees === 0 && delta.degrees === 0) {
    notes.push({
      code: 'placeholder-position',
      text: `${ra.card.keyword} and ${dec.card.keyword} are both 0, which stands for a missing position; they are left out`,
    })
    return undefined
  }
  for (const [judged, { card }] of [
    [alpha, ra],
    [delta, dec],
  ] as const)
    if (judged.judged !== undefined)
      notes.push({
        code: 'angle-judged',
        text: `${card.keyword} = ${String(card.value)} is taken for ${judged.judged}`,
      })
  return { ra: alpha.degrees % 360, dec: delta.degrees }
}

function packed(headers: Headers, found: FactCard, scale: number): JudgedAngle | undefined {
  const value = cardValue(headers, found)
  const size = value === undefined ? undefined : packedSexagesimal(value)
  return size === undefined ? undefined : { degrees: size * scale }
}

function headerEquinox(headers: Headers, keywords: KeywordTable): number | undefined {
  for (const found of factCards(headers, keywords, 'equinox')) {
    const text = String(found.card.value).trim()
    const year = Number(/^[JB]?\s*(\d{4}(?:\.\d*)?)/i.exec(text)?.[1] ?? NaN)
    if (year >= 1800 && year <= 2100) return year
  }
  const system = factText(headers, keywords, 'coordinateSystem')
  if (system === undefined) return undefined
  return /^FK4/i.test(system) ? 1950 : /^(FK5|ICRS)/i.test(system) ? 2000 : undefined
}

/** Where the telescope stands, from the header or, where it names a known telescope only, from the table of those. */
export function headerSite(headers: Headers, keywords: KeywordTable, notes: Note[]): Site | undefined {
  const words = [
    ...factTexts(headers, keywords, 'telescope'),
    ...factTexts(headers, keywords, 'site'),
    ...factTexts(headers, keywords, 'instrument'),
  ]
  const known = knownSite(keywords.sites, words)
  const name = factText(headers, keywords, 'site') ?? known?.name
  const named = name === undefined ? {} : { name }
  const [x, y, z] = ['X', 'Y', 'Z'].map((axis) => cardNumber(headers, `OBSGEO-${axis}`))
  const fromCentre = x !== undefined && y !== undefined && z !== undefined ? geodetic(x, y, z) : undefined
  if (fromCentre) return { ...fromCentre, ...named }
  const latitude = angleFact(headers, keywords, { fact: 'latitude', most: 90 }, notes)
  const longitude = angleFact(headers, keywords, { fact: 'longitude', most: 360 }, notes)
  if (latitude && longitude && !(latitude.degrees === 0 && longitude.degrees === 0)) {
    const isWest =
      longitude.found.synonym.form === 'west' ||
      /\bwest\b/i.test(longitude.found.card.comment.replace(/\(?[+-]?\s*=?\s*east[^)]*\)?/i, ''))
    const east = eastLongitude(longitude.degrees, { isWest, known, latitude: latitude.degrees })
    if (east.judged !== undefined)
      notes.push({
        code: 'longitude-judged',
        text: `${longitude.found.card.keyword} = ${String(longitude.found.card.value)} is taken for ${east.judged}`,
      })
    const height =
      factNumber(headers, keywords, { fact: 'height', range: [-450, 9000], words: 'height' }, notes)?.value ??
      known?.height ??
      0
    return { longitude: east.longitude, latitude: latitude.degrees, height, ...named }
  }
  if (!known) return undefined
  notes.push({
    code: 'site-guessed',
    text: `the header gives no place; that of ${known.name} is taken for the telescope it names`,
  })
  return { longitude: known.longitude, latitude: known.latitude, height: known.height, name: known.name }
}

function angleFact(
  headers: Headers,
  keywords: KeywordTable,
  { fact, most }: { readonly fact: 'longitude' | 'latitude'; readonly most: number },
  notes: Note[],
): { readonly degrees: number; readonly found: FactCard } | undefined {
  for (const found of factCards(headers, keywords, fact)) {
    const angle = angleDegrees(found.card.value, found.card.comment)
    if (!angle) continue
    if (Math.abs(angle.degrees) <= most) return { degrees: angle.degrees, found }
    notes.push(impossible(found.card.keyword, String(found.card.value), fact))
  }
  return undefined
}
