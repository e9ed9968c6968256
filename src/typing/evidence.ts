import type { DecodedCalibration } from './decodedCalibration.ts'
import type { FeatureVector } from './likelihood.ts'
import { zoneAt } from './likelihood.ts'
import type { Evidence } from './types.ts'

/** Subclasses to either side at which the neighbours are looked at: half of a letter. */
const NEIGHBOUR = 5

/**
 * What each feature said, ranked: measured, expected at the best type and half a letter to either side, and its share in
 * the decision, which is the part of the summed drop in χ² from the neighbours to the best type (features taken one by one).
 */
export function evidenceOf(calibration: DecodedCalibration, vector: FeatureVector, best: BestCell): Evidence[] {
  const { features, types, classes } = calibration
  const drops: number[] = []
  const rows = Array.from(vector.index, (feature, a): Evidence => {
    const at = (type: number): number | undefined =>
      type < 0 || type >= types.length
        ? undefined
        : calibration.mean[(type * classes.length + best.luminosity) * features.length + feature]
    const expected = at(best.type) ?? NaN
    const scatter = expectedScatter(calibration, best, feature)
    const total = Math.hypot(vector.error[a], scatter)
    const pull = (vector.value[a] - expected) / total
    const earlier = at(best.type - NEIGHBOUR)
    const later = at(best.type + NEIGHBOUR)
    const sides = [earlier, later].filter((value) => value !== undefined)
    const drop = sides.reduce((sum, value) => sum + ((vector.value[a] - value) / total) ** 2 - pull * pull, 0)
    drops.push(Math.max(0, drop / Math.max(1, sides.length)))
    return {
      feature: features[feature],
      measured: vector.value[a],
      error: vector.error[a],
      expected,
      expectedScatter: scatter,
      ...(earlier === undefined ? {} : { expectedEarlier: earlier }),
      ...(later === undefined ? {} : { expectedLater: later }),
      pull,
      share: 0,
    }
  })
  const sum = drops.reduce((total, drop) => total + drop, 0)
  return rows
    .map((row, a) => ({ ...row, share: sum > 0 ? drops[a] / sum : 1 / rows.length }))
    .sort((a, b) => b.share - a.share || (a.feature < b.feature ? -1 : 1))
}

/** Places of the best type and class in the calibration's grid. */
export interface BestCell {
  readonly type: number
  readonly luminosity: number
}

/** 1 σ of a feature between stars of one type and class [unit of the feature]. */
export function expectedScatter(
  calibration: DecodedCalibration,
  { type, luminosity }: BestCell,
  feature: number,
): number {
  const { zones, types, features } = calibration
  const { z, share } = zoneAt(zones, types[type])
  const diagonal = (zone: number): number =>
    zones[Math.min(zone, zones.length - 1)].covariance[feature * features.length + feature]
  const between = (1 - share) * diagonal(z) + share * diagonal(z + 1)
  return Math.sqrt(between + calibration.meanVariance(type, luminosity, feature))
}
