import type { Calibration } from '../tables/types.ts'
import { decodeCalibration } from './decodedCalibration.ts'
import { expectedScatter } from './evidence.ts'

/** What a feature is for a type and class, and its scatter between such stars (1 σ) [unit of the feature]. */
export interface ExpectedFeature {
  readonly feature: string
  readonly value: number
  readonly scatter: number
}

/**
 * Expected strength of every feature at the calibration's common resolution, linear between the types and classes of its
 * grid, the ends' values beyond.
 *
 * @param typeNumber  O0 = 0 … M9 = 69
 * @param luminosity  I = 1 … V = 5
 */
export function expectedFeatures(calibration: Calibration, typeNumber: number, luminosity: number): ExpectedFeature[] {
  const decoded = decodeCalibration(calibration)
  const { types, classes, mean, features } = decoded
  const f = features.length
  const t = place(types, typeNumber)
  const c = place(classes, luminosity)
  return features.map((feature, k) => {
    const at = (i: number, j: number): number => mean[(i * classes.length + j) * f + k]
    const low = (1 - c.share) * at(t.low, c.low) + c.share * at(t.low, c.high)
    const high = (1 - c.share) * at(t.high, c.low) + c.share * at(t.high, c.high)
    const nearest = { type: t.share < 0.5 ? t.low : t.high, luminosity: c.share < 0.5 ? c.low : c.high }
    return { feature, value: (1 - t.share) * low + t.share * high, scatter: expectedScatter(decoded, nearest, k) }
  })
}

/** Neighbours of a value in an increasing list and its part of the way from the lower to the higher. */
function place(values: Float64Array, wanted: number): { low: number; high: number; share: number } {
  let low = 0
  while (low + 1 < values.length && values[low + 1] <= wanted) low++
  const high = Math.min(low + 1, values.length - 1)
  const share = high === low ? 0 : (wanted - values[low]) / (values[high] - values[low])
  return { low, high, share: Math.min(1, Math.max(0, share)) }
}

/** A mean normalised spectrum of a type: flux ÷ continuum in bins, NaN where not known. */
export interface ExpectedSpectrum {
  /** shape (n) [Å, air, rest]: middles of the bins. */
  readonly wavelength: Float64Array
  /** shape (n). */
  readonly normalised: Float64Array
  /** Stars that the mean rests on (of the nearest type used). */
  readonly stars: number
}

/** Subclasses within which a mean spectrum may stand for a type, counting one class of luminosity for two subclasses. */
const FARTHEST = 6
const SUBCLASSES_PER_CLASS = 2

/**
 * Mean normalised spectrum of a type and class, linear between the two nearest means of the class at hand; undefined
 * where no mean lies near.
 */
export function expectedSpectrum(
  { spectra }: Calibration,
  typeNumber: number,
  luminosity: number,
): ExpectedSpectrum | undefined {
  const rows = spectra.rows
    .map((row) => ({
      row,
      off: Math.abs(row.type - typeNumber) + SUBCLASSES_PER_CLASS * Math.abs(row.luminosity - luminosity),
    }))
    .sort((a, b) => a.off - b.off || a.row.type - b.row.type)
  if (rows.length === 0 || rows[0].off > FARTHEST) return undefined
  const [{ row: one }] = rows
  const other = rows.find(
    ({ row, off }) =>
      row.luminosity === one.luminosity && off <= FARTHEST && (row.type - typeNumber) * (one.type - typeNumber) < 0,
  )?.row
  const share = other ? (typeNumber - one.type) / (other.type - one.type) : 0
  const n = one.values.length
  const normalised = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const here = one.values[i] < 0 ? NaN : one.values[i] / 1000
    const there = other && other.values[i] >= 0 ? other.values[i] / 1000 : here
    normalised[i] = (1 - share) * here + share * there
  }
  return {
    wavelength: Float64Array.from({ length: n }, (_, i) => spectra.first + i * spectra.step),
    normalised,
    stars: one.stars,
  }
}
