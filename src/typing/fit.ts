import type { DecodedCalibration } from './decodedCalibration.ts'
import { type BestCell, expectedScatter } from './evidence.ts'
import { type FeatureVector, zoneAt } from './likelihood.ts'

/** How well the best type fits at all. */
export interface Fit {
  /** Root mean square pull at the best type. */
  readonly pull: number
  /** Share of ordinary stars that fit no better, 0 to 1. */
  readonly probability: number
  /** The figures in words. */
  readonly text: string
}

/** Shares of ordinary stars that stay below the zone's `fitQuantiles`. */
export const FIT_SHARES = [0.5, 0.9, 0.98, 0.995] as const

/** The fit at the best cell, against what ordinary stars of the zone reached when they were left out of the calibration. */
export function fitOf(calibration: DecodedCalibration, vector: FeatureVector, best: BestCell, distance: number): Fit {
  const { zones, types, classes, mean, features } = calibration
  const row = (best.type * classes.length + best.luminosity) * features.length
  let sum = 0
  for (let a = 0; a < vector.index.length; a++) {
    const total = Math.hypot(vector.error[a], expectedScatter(calibration, best, vector.index[a]))
    sum += ((vector.value[a] - mean[row + vector.index[a]]) / total) ** 2
  }
  const pull = Math.sqrt(sum / vector.index.length)
  const { z, share } = zoneAt(zones, types[best.type])
  const next = zones[Math.min(z + 1, zones.length - 1)]
  const limits = zones[z].fitQuantiles.map((limit, k) => (1 - share) * limit + share * next.fitQuantiles[k])
  const perFeature = distance / vector.index.length
  return {
    pull,
    probability: tailShare(perFeature, limits),
    text: `distance² per feature is ${perFeature.toFixed(1)}, 98 % of such stars stay below ${limits[2].toFixed(1)}`,
  }
}

/** 1 − share at a value, the logarithm of the tail linear between the quantiles and beyond the last two. */
function tailShare(value: number, limits: readonly number[]): number {
  const tails = FIT_SHARES.map((share) => Math.log(1 - share))
  if (value <= limits[0]) return 1 - (FIT_SHARES[0] * value) / limits[0]
  let k = 1
  while (k < limits.length - 1 && value > limits[k]) k++
  const slope = (tails[k] - tails[k - 1]) / (limits[k] - limits[k - 1])
  return Math.exp(tails[k] + slope * (value - limits[k]))
}
