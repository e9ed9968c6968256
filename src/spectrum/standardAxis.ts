import { airToVacuum, vacuumToAir } from './air.ts'
import { refuse } from './axis.ts'
import type { AxisAnswer } from './axis.ts'
import { cardNumber, cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import { grismOf, grismWavelength } from './grism.ts'
import type { AxisInput } from './linearPart.ts'
import { SAMPLING } from './spectralCode.ts'
import type { SpectralCode } from './spectralCode.ts'
import type { Note } from '../findings/types.ts'
import { guessedWavelengthUnit, spectralUnit } from './unit.ts'
import { guessNote } from './unitGuess.ts'

/** An axis of a standard code with its algorithm ('LOG', 'F2W', 'GRI' ... or ''). */
interface StandardInput extends AxisInput {
  readonly code: string
  readonly algorithm: string
  readonly known: SpectralCode
}

/** The wavelengths of an axis whose CTYPE is a code of FITS WCS Paper III, with its algorithm if any. */
export function standardAxis(headers: Headers, input: StandardInput): AxisAnswer {
  const { number, length, linear, code, algorithm, known } = input
  const notes = [...linear.notes]
  const unit = standardUnit(headers, input)
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
  // The usual axes of wavelength need no way through the vacuum.
  const isPlain = known.quantity === 'wavelength' && (algorithm === '' || algorithm === 'LOG')
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
    if (isPlain) {
      wavelength[i] = algorithm === '' ? reference + step : reference * Math.exp(step / reference)
      continue
    }
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
  { number, known, linear, length, wat }: StandardInput,
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

/** Rest wavelength in vacuum [Å] from RESTWAV [m] or RESTFRQ [Hz] and their older spellings; undefined without. */
function restWavelength(headers: Headers): number | undefined {
  const wave = cardNumber(headers, 'RESTWAV') ?? cardNumber(headers, 'RESTWAVE')
  if (wave !== undefined && wave > 0) return wave < 1 ? wave * 1e10 : wave
  const frequency = cardNumber(headers, 'RESTFRQ') ?? cardNumber(headers, 'RESTFREQ')
  return frequency !== undefined && frequency > 0 ? 2.99792458e18 / frequency : undefined
}
