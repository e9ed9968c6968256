import type { Finding } from '../findings/types.ts'
import { finding } from '../findings/rules.ts'
import { TYPING_RULES } from '../findings/typing.ts'
import type { Measurement } from '../features/types.ts'
import type { Calibration } from '../tables/types.ts'
import { typeSpectrum } from './typeSpectrum.ts'
import type { TypingInput } from './typingInput.ts'
import type { TypePosterior } from './types.ts'

/**
 * Å: error that every spectrum's features have besides noise (flat field, continuum, wavelength scale), so that one very
 * bright spectrum does not outweigh all others; half of what the same star gave at two telescopes.
 */
const COMMON_ERROR = 0.1

/**
 * The type of several spectra of one target together: each feature is averaged, weighted by its errors, and the average
 * is typed once. The posteriors are not multiplied, since the star's own deviations and the calibration's errors are
 * common to all.
 */
export function combineTypes(inputs: readonly TypingInput[], calibration: Calibration): TypePosterior {
  if (inputs.length === 0) throw new RangeError('combineTypes requires a spectrum, got none')
  return typeSpectrum(inputs.length === 1 ? inputs[0] : combinedInput(inputs), calibration)
}

/** The typing input that several spectra of one star give together. */
export function combinedInput(inputs: readonly TypingInput[]): TypingInput {
  const features = new Map<string, Measurement[]>()
  for (const { measurements } of inputs)
    for (const one of measurements) {
      const known = features.get(one.feature)
      if (known) known.push(one)
      else features.set(one.feature, [one])
    }
  const errors = inputs.flatMap(({ velocityError }) => (velocityError === undefined ? [] : [velocityError]))
  return {
    measurements: [...features.values()].map(averaged),
    isRestTrusted: inputs.some(({ isRestTrusted }) => isRestTrusted),
    ...(errors.length ? { velocityError: Math.min(...errors) } : {}),
    samples: Math.max(...inputs.map(({ samples }) => samples)),
  }
}

function averaged(all: readonly Measurement[]): Measurement {
  const good = all.flatMap((one) =>
    one.ew === undefined || one.ewErr === undefined ? [] : [{ ...one, ew: one.ew, ewErr: one.ewErr }],
  )
  if (good.length === 0) return all[0]
  let weights = 0
  let sum = 0
  let variance = 0
  for (const { ew, ewErr, unit } of good) {
    const common = unit === 'Å' ? COMMON_ERROR : COMMON_ERROR / 20
    const weight = 1 / (ewErr * ewErr + common * common)
    weights += weight
    sum += weight * ew
    variance += (weight * ewErr) ** 2
  }
  const { feature, species, wavelengthRest, unit, method } = good[0]
  const ew = sum / weights
  const ewErr = Math.sqrt(variance) / weights
  const base = { feature, species, wavelengthRest, unit, method, ew, ewErr }
  return Math.abs(ew) >= 3 * ewErr
    ? { ...base, status: 'measured' }
    : { ...base, status: 'absent', reason: 'weaker than three standard errors', limit3sigma: 3 * ewErr }
}

/** Types of one target that differ by more than this many of their joint errors disagree. */
const DISAGREE = 3

/**
 * A finding where two spectra of one target differ in type by more than three times their joint 68 % errors; undefined where
 * they agree or fewer than two are typed.
 */
export function disagreement(posteriors: readonly TypePosterior[]): Finding | undefined {
  let worst: { sigma: number; a: TypePosterior; b: TypePosterior } | undefined
  for (let i = 0; i < posteriors.length; i++)
    for (let j = 0; j < i; j++) {
      const a = posteriors[j]
      const b = posteriors[i]
      if (a.typeNumber === undefined || b.typeNumber === undefined) continue
      const sigma = Math.abs(a.typeNumber - b.typeNumber) / Math.hypot(a.typeNumberErr ?? 1, b.typeNumberErr ?? 1, 0.5)
      if (worst === undefined || sigma > worst.sigma) worst = { sigma, a, b }
    }
  if (!worst || worst.sigma <= DISAGREE) return undefined
  const { a, b, sigma } = worst
  return finding(
    TYPING_RULES,
    'types-disagree',
    `spectra of this target are typed ${a.spectralType ?? '?'} and ${b.spectralType ?? '?'}, ${sigma.toFixed(1)} times their joint error apart`,
    { value: sigma, limit: DISAGREE },
  )
}
