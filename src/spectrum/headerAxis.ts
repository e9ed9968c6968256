import { refuse, wavelengthFault } from './axis.ts'
import type { AxisAnswer } from './axis.ts'
import { cardNumber, cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import { coefficientPart, linearPart } from './linearPart.ts'
import { plainAxis } from './plainAxis.ts'
import { SPECTRAL_CODES } from './spectralCode.ts'
import { standardAxis } from './standardAxis.ts'
import { attributeText, attributes } from './watCards.ts'

/** Words of CTYPE that say an axis is no spectral one. */
const OTHER_AXIS =
  /^(RA|DEC|GLON|GLAT|ELON|ELAT|[XY]LON|[XY]LAT|TLON|TLAT|SLON|SLAT|HPLN|HPLT|CUBEFACE|STOKES|COMPLEX|TIME|UTC|TAI|ANGLE|DISTANCE|OFFSET|POSITION|SPATIAL|SLIT|COLUMN|ROW|XI|ETA|LATITUDE|LONGITUDE|PHASE|BJD|MJD|JD)\b|^(RA|DEC|GLON|GLAT|ELON|ELAT)-/
const PIXEL_AXIS = /^(PIXELS?|PIX|CCD|COORD|INDEX|CHANNELS?)\b/

/** True when the CTYPE of an axis says that it is spatial, temporal or otherwise no spectral axis. */
export function isOtherAxis(headers: Headers, number: number): boolean {
  const type = (cardText(headers, `CTYPE${number}`) ?? '').toUpperCase()
  return OTHER_AXIS.test(type)
}

/**
 * The wavelengths that the cards of an image axis give, or why there are none.
 *
 * @param number  axis, from 1
 * @param length  number of samples along it
 */
export function headerAxis(headers: Headers, number: number, length: number): AxisAnswer {
  const type = (cardText(headers, `CTYPE${number}`) ?? '').trim()
  const upper = type.toUpperCase()
  const key = `CTYPE${number}`
  if (OTHER_AXIS.test(upper))
    return refuse('no-wavelength-axis', `${key} requires a spectral axis, got ${type}`, 2, key)
  const wat = attributes(attributeText(headers[0], number))
  const label = (wat.get('label') ?? '').toLowerCase()
  if (PIXEL_AXIS.test(upper) || (label === 'pixel' && !wat.has('units')))
    return refuse('pixel-axis', `${key} requires a wavelength solution, got an axis that counts pixels`, 5, key)

  const linear = linearPart(headers, number) ?? coefficientPart(headers)
  if (!linear) {
    const odd = notANumber(headers, [`CRVAL${number}`, `CDELT${number}`, `CD${number}_${number}`, `CRPIX${number}`])
    if (odd) return refuse('no-wavelength-axis', `${odd.keyword} requires a number, got ${odd.text}`, 6, odd.keyword)
    const rule = `axis ${number} requires CRVAL${number} with a step`
    return refuse('no-wavelength-axis', `${rule}, a wavelength column or a wavelength array, got none`, 1)
  }
  if (linear.step === 0) return refuse('zero-step', `CDELT${number} requires a step other than zero, got 0`, 9)
  const code = /^([A-Z]{4})(?:-(LOG|GRI|GRA|TAB|[FWAV]2[FWAV]))?\s*$/.exec(upper)
  const known = code ? SPECTRAL_CODES[code[1]] : undefined
  const isLegacyLog = code?.[2] === 'LOG' && linear.reference < 6 && known?.quantity === 'wavelength'
  const answer =
    known && code && !isLegacyLog
      ? standardAxis(headers, { number, length, linear, code: code[1], algorithm: code[2] ?? '', known, wat })
      : plainAxis(headers, { number, length, linear, type, wat })
  if ('refusal' in answer) return answer
  return wavelengthFault(answer.axis.wavelength, `axis ${number}`) ?? answer
}

/** The first of the keywords that stands in a header with a value that is no number. */
function notANumber(
  headers: Headers,
  keywords: readonly string[],
): { readonly keyword: string; readonly text: string } | undefined {
  for (const keyword of keywords) {
    const text = cardText(headers, keyword)
    if (text !== undefined && cardNumber(headers, keyword) === undefined) return { keyword, text }
  }
  return undefined
}

/**
 * As `headerAxis`, for the first alternate description (CTYPE1A, CRVAL1A ...; FITS 4.0, section 8.2.1) whose type is a
 * code of Paper III; undefined when there is none.
 */
export function alternateAxis(headers: Headers, number: number, length: number): AxisAnswer | undefined {
  for (const letter of 'ABCDEFGHIJKLMNOPQRSTUVWXYZ') {
    const type = cardText([headers[0]], `CTYPE${number}${letter}`)
    if (type === undefined || SPECTRAL_CODES[type.slice(0, 4).toUpperCase()] === undefined) continue
    const shifted = headers.map((header) => ({
      cards: header.cards,
      get: (keyword: string) => header.get(keyword + letter),
    }))
    const answer = headerAxis(shifted, number, length)
    if ('axis' in answer)
      return { axis: { ...answer.axis, words: `${answer.axis.words} of the alternate description ${letter}` } }
  }
  return undefined
}
