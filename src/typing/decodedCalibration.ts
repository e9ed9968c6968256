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
}

export interface DecodedZone {
  readonly type: number
  /** shape (f × f) [unit²]. */
  readonly covariance: Float64Array
  readonly tempering: number
  /** shape (f) [unit per factor of ten in metals]; all zero where not known. */
  readonly metalWeak: Float64Array
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
    zones: calibration.zones.map(({ type, covariance, tempering, metalWeak, fitQuantiles }) => {
      const square = new Float64Array(f * f)
      for (let i = 0, at = 0; i < f; i++)
        for (let j = 0; j <= i; j++, at++)
          square[i * f + j] = square[j * f + i] = covariance[at] * 1e-6 * scale[i] * scale[j]
      return {
        type,
        covariance: square,
        tempering,
        metalWeak: Float64Array.from(scale, (s, k) => ((metalWeak[k] ?? 0) * s) / 1000),
        fitQuantiles,
      }
    }),
  }
}
