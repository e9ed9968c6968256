import type { Calibration } from '../tables/types.ts'

/** A calibration with its packed figures as arrays in the features' own units. */
export interface DecodedCalibration {
  readonly features: readonly string[]
  readonly types: Float64Array
  readonly classes: Float64Array
  /** shape (t × c × f) [unit of the feature]. */
  readonly mean: Float64Array
  /** shape (t × c × f) [unit²]: for want of stars. */
  readonly meanVariance: (type: number, luminosity: number, feature: number) => number
  readonly zones: readonly DecodedZone[]
  /** shape (t × f) [unit]: change of a dwarf's features to those of published metal-weak stars; 0 outside A5 to K8. */
  readonly metalWeak: Float64Array
  /** shape (t × f) [unit]: the same for stars of the halo, whose weaker lines are gone. */
  readonly halo: Float64Array
}

/** The scatter of features about their expected values in one zone of temperature. */
export interface DecodedZone {
  readonly type: number
  /** shape (f × f) [unit²]. */
  readonly covariance: Float64Array
  readonly tempering: number
  readonly fitQuantiles: readonly number[]
}

const decoded = new WeakMap<Calibration, DecodedCalibration>()

/** The calibration's figures as arrays; unpacked once for each calibration. */
export function decodeCalibration(calibration: Calibration): DecodedCalibration {
  const known = decoded.get(calibration)
  if (known) return known
  const fresh = unpack(calibration)
  decoded.set(calibration, fresh)
  return fresh
}

function unpack(calibration: Calibration): DecodedCalibration {
  const { features, scale, firstType, types, classes, mean, meanVariance } = calibration
  const f = features.length
  const cells = types * classes.length
  if (mean.length !== cells || meanVariance.length !== cells || mean.some((row) => row.length !== f))
    throw new RangeError(`calibration requires ${cells} rows of ${f} means, got ${mean.length}`)
  const means = new Float64Array(cells * f)
  mean.forEach((row, i) => row.forEach((value, k) => (means[i * f + k] = (value * scale[k]) / 1000)))
  return {
    features,
    types: Float64Array.from({ length: types }, (_, i) => firstType + i),
    classes: Float64Array.from(classes),
    mean: means,
    meanVariance: (type, luminosity, feature) => meanVariance[type * classes.length + luminosity] * scale[feature] ** 2,
    metalWeak: metalWeakChange(calibration, means, (part) => part),
    halo: metalWeakChange(calibration, means, haloPart),
    zones: calibration.zones.map(({ type, covariance, tempering, fitQuantiles }) => {
      const square = new Float64Array(f * f)
      for (let i = 0, at = 0; i < f; i++)
        for (let j = 0; j <= i; j++, at++)
          square[i * f + j] = square[j * f + i] = covariance[at] * 1e-6 * scale[i] * scale[j]
      return {
        type,
        covariance: square,
        tempering,
        fitQuantiles,
      }
    }),
  }
}

/** Type numbers between which stars with weak metals are known, and the type that shows no metals. */
const METAL_WEAK_TYPES = { first: 22, last: 58, metalFree: 20 } as const

/** Lines weaken this many times as far in halo stars as in the published metal-weak means. */
export const HALO_STEPS = 6

/** Part of the way to no metals after several steps that each take the same part of what is left. */
function haloPart(part: number): number {
  return 1 - (1 - Math.min(0.9, Math.max(0, part))) ** HALO_STEPS
}

function metalWeakChange(
  calibration: Calibration,
  means: Float64Array,
  partOf: (part: number) => number,
): Float64Array {
  const { features, types, firstType, classes, metalWeak } = calibration
  const f = features.length
  const row = (type: number): number => ((type - firstType) * classes.length + classes.length - 1) * f
  const change = new Float64Array(types * f)
  const free = row(METAL_WEAK_TYPES.metalFree)
  for (let i = 0; i < types; i++) {
    const type = firstType + i
    if (type < METAL_WEAK_TYPES.first || type > METAL_WEAK_TYPES.last) continue
    for (let k = 0; k < f; k++)
      change[i * f + k] = partOf((metalWeak[k] ?? 0) / 1000) * (means[free + k] - means[row(type) + k])
  }
  return change
}
