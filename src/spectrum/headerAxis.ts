import { airToVacuum, vacuumToAir } from './air.ts'
import { figure, refuse, wavelengthFault } from './axis.ts'
import type { AxisAnswer } from './axis.ts'
import { cardNumber, cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import { grismOf, grismWavelength } from './grism.ts'
import { SAMPLING, SPECTRAL_CODES } from './spectralCode.ts'
import type { SpectralCode } from './spectralCode.ts'
import type { Note } from '../findings/types.ts'
import { guessedWavelengthUnit, spectralUnit, toAngstrom } from './unit.ts'
import type { SpectralUnit } from './unit.ts'
import { attributeText, attributes } from './watCards.ts'

/** The linear part of an axis: value = reference + step × (pixel − reference pixel). */
export interface LinearPart {
  readonly reference: number
  readonly step: number
  readonly pixel: number
  readonly notes: readonly Note[]
}

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
 * The linear part of axis `number` from CRVAL, CRPIX and CDi_i, or CDELT × PC; undefined without CRVAL and step.
 * A missing CRPIX counts as 1 where the file follows no written standard, noted.
 */
export function linearPart(headers: Headers, number: number): LinearPart | undefined {
  const notes: Note[] = []
  const reference = cardNumber(headers, `CRVAL${number}`)
  const cd = cardNumber(headers, `CD${number}_${number}`)
  const delta = cardNumber(headers, `CDELT${number}`)
  const pc = cardNumber(headers, `PC${number}_${number}`) ?? 1
  const step = cd ?? (delta === undefined ? undefined : delta * pc)
  if (reference === undefined || step === undefined) return undefined
  if (cd !== undefined && delta !== undefined && delta * pc !== cd && Math.abs(delta * pc - cd) > 1e-6 * Math.abs(cd))
    notes.push({
      code: 'step-disagrees',
      text: `CD${number}_${number} is ${figure(cd)} and CDELT${number} is ${figure(delta)}; the first is used`,
    })
  const pixel = cardNumber(headers, `CRPIX${number}`)
  if (pixel === undefined)
    notes.push({
      code: 'no-reference-pixel',
      text: `CRPIX${number} is absent; the first sample is taken for reference`,
    })
  return { reference, step, pixel: pixel ?? 1, notes }
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

/** COEFF0 and COEFF1: log10 of the first wavelength and step (surveys that give no CRVAL). */
function coefficientPart(headers: Headers): LinearPart | undefined {
  const reference = cardNumber(headers, 'COEFF0')
  const step = cardNumber(headers, 'COEFF1')
  return reference === undefined || step === undefined ? undefined : { reference, step, pixel: 1, notes: [] }
}

interface AxisInput {
  readonly number: number
  readonly length: number
  readonly linear: LinearPart
  readonly wat: ReadonlyMap<string, string>
}

function standardAxis(
  headers: Headers,
  input: AxisInput & { readonly code: string; readonly algorithm: string; readonly known: SpectralCode },
): AxisAnswer {
  const { number, length, linear, code, algorithm, known, wat } = input
  const notes = [...linear.notes]
  const unit = standardUnit(headers, number, known, linear, length, wat)
  if (!unit)
    return refuse(
      'unit-unknown',
      `CUNIT${number} requires a unit of ${known.quantity}, got '${cardText(headers, `CUNIT${number}`) ?? ''}'`,
      9,
      `CUNIT${number}`,
    )
  notes.push(...unit.notes)
  let rest = NaN
  if (known.needsRest || algorithm.includes('V')) {
    const found = restWavelength(headers)
    if (!found)
      return refuse(
        'no-rest-wavelength',
        `CTYPE${number} = ${code} requires RESTWAV or RESTFRQ, got neither`,
        7,
        `CTYPE${number}`,
      )
    rest = found
  }
  const reference = linear.reference * unit.scale
  const isAir = code === 'AWAV'
  const wavelength = new Float64Array(length)
  const sampling = /^[FWAV]2/.test(algorithm) ? SAMPLING[algorithm[0]] : undefined
  const vacuumReference = known.toVacuum(reference, rest)
  const vacuumSlope = known.slope(reference, rest)
  const inAir = algorithm === 'GRA'
  const grism = /^GR[IA]$/.test(algorithm)
    ? {
        of: grismOf((i) => cardNumber(headers, `PV${number}_${i}`)),
        inAir,
        reference: inAir ? vacuumToAir(vacuumReference) : vacuumReference,
        slope: vacuumSlope * (inAir ? SAMPLING.A.slope(vacuumReference, rest) : 1),
      }
    : undefined
  if (grism && grism.of.ruling * grism.of.order === 0)
    return refuse(
      'grism-incomplete',
      `PV${number}_0 and PV${number}_1 require a ruling and an order other than 0, got 0`,
      8,
    )
  for (let i = 0; i < length; i++) {
    const step = linear.step * unit.scale * (i + 1 - linear.pixel)
    if (algorithm === 'LOG') wavelength[i] = known.toVacuum(reference * Math.exp(step / reference), rest)
    else if (sampling) {
      const start = sampling.of(vacuumReference, rest)
      wavelength[i] = sampling.toVacuum(start + step * vacuumSlope * sampling.slope(vacuumReference, rest), rest)
    } else if (grism) {
      const bent = grismWavelength(grism.of, grism.reference, step * grism.slope)
      wavelength[i] = grism.inAir ? airToVacuum(bent) : bent
    } else wavelength[i] = known.toVacuum(reference + step, rest)
    if (code === 'AWAV') wavelength[i] = vacuumToAir(wavelength[i])
  }
  const how =
    algorithm === '' ? '' : algorithm === 'LOG' ? ', logarithmic' : grism ? ', grism' : `, even in ${sampling?.words}`
  return {
    axis: {
      wavelength,
      medium: isAir ? 'air' : 'vacuum',
      mediumFrom: `CTYPE${number} = ${code}${algorithm && `-${algorithm}`}`,
      words: known.words + how,
      notes,
    },
  }
}

/** Scale of the standard unit to Å, Hz, eV, cm⁻¹, km/s; SI where CUNIT is absent, unless that is absurd. */
function standardUnit(
  headers: Headers,
  number: number,
  known: SpectralCode,
  linear: LinearPart,
  length: number,
  wat: ReadonlyMap<string, string>,
): { readonly scale: number; readonly notes: readonly Note[] } | undefined {
  if (known.quantity === 'ratio') return { scale: 1, notes: [] }
  const text = cardText(headers, `CUNIT${number}`) ?? wat.get('units')
  const unit = text === undefined ? undefined : spectralUnit(text)
  if (unit) return unit.quantity === known.quantity ? { scale: unit.scale, notes: [] } : undefined
  if (text !== undefined && known.quantity !== 'wavelength') return undefined
  if (known.quantity === 'frequency') return { scale: 1, notes: [] }
  if (known.quantity === 'energy') return { scale: 1 / 1.602176634e-19, notes: [] }
  if (known.quantity === 'wavenumber') return { scale: 0.01, notes: [] }
  if (known.quantity === 'velocity') return { scale: 1e-3, notes: [] }
  const ends = [1, length].map((pixel) => linear.reference + linear.step * (pixel - linear.pixel))
  const guess = guessedWavelengthUnit(Math.min(...ends), Math.max(...ends))
  const scale = guess === undefined ? undefined : spectralUnit(guess)?.scale
  if (guess === undefined || scale === undefined) return undefined
  return { scale, notes: guess === 'm' ? [] : [guessNote(guess, text, ends)] }
}

function guessNote(unit: string, text: string | undefined, ends: readonly number[]): Note {
  const why = text === undefined || text === '' ? 'no unit is given' : `the unit given, '${text}', is no spectral one`
  return {
    code: 'unit-guessed',
    text: `${why}; the values ${figure(ends[0])} to ${figure(ends[ends.length - 1])} are taken for ${unit}`,
  }
}

/** Rest wavelength in vacuum [Å] from RESTWAV [m] or RESTFRQ [Hz] and their older spellings; undefined without. */
function restWavelength(headers: Headers): number | undefined {
  const wave = cardNumber(headers, 'RESTWAV') ?? cardNumber(headers, 'RESTWAVE')
  if (wave !== undefined && wave > 0) return wave < 1 ? wave * 1e10 : wave
  const frequency = cardNumber(headers, 'RESTFRQ') ?? cardNumber(headers, 'RESTFREQ')
  return frequency !== undefined && frequency > 0 ? 2.99792458e18 / frequency : undefined
}

function plainAxis(headers: Headers, input: AxisInput & { readonly type: string }): AxisAnswer {
  const { number, length, linear, type, wat } = input
  const notes = [...linear.notes]
  const values = new Float64Array(length)
  for (let i = 0; i < length; i++) values[i] = linear.reference + linear.step * (i + 1 - linear.pixel)
  const label = `${type} ${wat.get('label') ?? ''}`
  const flag = cardNumber(headers, 'DC-FLAG')
  const isNatural = /(^|[^a-z])ln\b/i.test(type)
  const isLogWord = /log/i.test(type) && !/catalog/i.test(type)
  const isCoefficients = cardNumber(headers, 'COEFF0') === linear.reference && linear.reference < 6
  const isLog = isNatural || isLogWord || flag === 1 || isCoefficients
  const unitTexts = [cardText(headers, `CUNIT${number}`), wat.get('units'), /[[(]([^)\]]+)[\])]/.exec(type)?.[1]]
  let unit: SpectralUnit | undefined
  let unknown: string | undefined
  for (const text of unitTexts) {
    if (text === undefined) continue
    const found = spectralUnit(text)
    if (found && !unit) unit = found
    if (!found && !/^(deg|degrees?|pixels?|pix|arcsec|none|linear|unitless|wavelength|lambda|wave|)$/i.test(text))
      unknown ??= text
  }
  const isWavenumber = /wave ?num/i.test(label) || /kayser/i.test(wat.get('units') ?? '')
  if (isWavenumber && (!unit || unit.quantity === 'wavelength')) {
    const given = wat.get('units') ?? cardText(headers, `CUNIT${number}`) ?? ''
    unit = { quantity: 'wavenumber', scale: 1 }
    if (!spectralUnit(given))
      notes.push({ code: 'unit-guessed', text: `a wavenumber axis in '${given}' is taken for cm-1 by its values` })
    unknown = undefined
  }
  if (unit?.quantity === 'velocity')
    return refuse('no-rest-wavelength', `axis ${number} requires a rest wavelength for velocities, got none`, 7)
  if (!unit && unknown !== undefined)
    return refuse('unit-unknown', `CUNIT${number} requires a spectral unit, got '${unknown}'`, 8, `CUNIT${number}`)
  const ends = [values[0], values[length - 1]]
  // log10 of 1000 to 100000 Å lies between 3 and 5: no optical axis in Å does, and none of this length in µm.
  const isAngstrom = !unit || (unit.quantity === 'wavelength' && unit.scale === 1)
  const looksLog = isAngstrom && Math.min(...ends) >= 3 && Math.max(...ends) <= 5
  if (looksLog && !isLog && unit?.log === undefined)
    notes.push({
      code: 'log-guessed',
      text: `the values ${figure(ends[0])} to ${figure(ends[1])} are taken for log10 of wavelengths in Angstrom`,
    })
  const isSpectralLog = isLog || unit?.log !== undefined || looksLog
  const linearValues = isSpectralLog
    ? ends.map((value) => (isNatural || unit?.log === 'ln' ? Math.exp(value) : 10 ** value))
    : ends
  const low = Math.min(...linearValues)
  const high = Math.max(...linearValues)
  if (!unit) {
    if (isPixelCount(values, linear) && !isSpectralLog)
      return refuse('pixel-axis', `axis ${number} requires a wavelength solution, got pixels ${low} to ${high}`, 4)
    const guess = guessedWavelengthUnit(low, high)
    if (guess === undefined) {
      const rule = `axis ${number} requires a wavelength unit, or values that can be wavelengths in one`
      return refuse('unit-unknown', `${rule}, got no unit and ${figure(low)} to ${figure(high)}`, 3)
    }
    unit = spectralUnit(guess) as SpectralUnit
    notes.push(guessNote(guess, cardText(headers, `CUNIT${number}`), linearValues))
  }
  const log = isSpectralLog ? (isNatural ? 'ln' : (unit.log ?? 'log10')) : undefined
  const wavelength = values.map((value) => toAngstrom(value, { ...unit, log } as SpectralUnit))
  const isInverse = unit.quantity !== 'wavelength'
  const words = log ? `${log === 'ln' ? 'natural-log' : 'log10'} ${unit.quantity} axis` : `linear ${unit.quantity} axis`
  return {
    axis: {
      wavelength,
      ...(isInverse ? { medium: 'vacuum', mediumFrom: `axis of ${unit.quantity}` } : {}),
      words,
      notes,
    },
  }
}

/** True for values that only count samples: 1, 2, 3 ... or 0, 1, 2 ... */
function isPixelCount(values: Float64Array, { step }: LinearPart): boolean {
  return Math.abs(step) === 1 && (values[0] === 0 || values[0] === 1)
}
