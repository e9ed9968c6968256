import { choleskyFactor, forwardSolve, logDeterminant } from '../numeric/cholesky.ts'
import type { DecodedCalibration, DecodedZone } from './decodedCalibration.ts'

/** Measured features by their place in the calibration. */
export interface FeatureVector {
  /** shape (p): places in the calibration's list of features, increasing. */
  readonly index: Int32Array
  /** shape (p) [unit of the feature]. */
  readonly value: Float64Array
  /** shape (p), 1 σ of the measurement. */
  readonly error: Float64Array
}

export interface LikelihoodGrid {
  /** shape (t × c): tempered log likelihood. */
  readonly logLikelihood: Float64Array
  /** shape (t × c): squared Mahalanobis distance from the expected values; NaN where it was not needed. */
  readonly distance: Float64Array
}

/** Cells whose log likelihood lies this far below the best are told by interpolation between zones alone. */
const NEGLIGIBLE = 14

/**
 * Log likelihood of the measured features over type and class: Student's t about the expected values with the zone's
 * covariance and the measurement's own errors, raised to the zone's tempering exponent. Between the types of two zones it
 * is interpolated.
 */
export function likelihoodGrid(
  calibration: DecodedCalibration,
  degreesOfFreedom: number,
  vector: FeatureVector,
): LikelihoodGrid {
  const { types, classes, zones } = calibration
  const c = classes.length
  const logLikelihood = new Float64Array(types.length * c)
  const distance = new Float64Array(types.length * c).fill(NaN)
  const solvers = zones.map((zone) => zoneSolver(calibration, zone, vector, degreesOfFreedom))
  const coarse = zones.map((zone, z) => {
    const i = nearest(types, zone.type)
    return Array.from(classes, (_, j) => solvers[z](i, j).logLikelihood)
  })
  const top = Math.max(...coarse.flat())
  for (let i = 0; i < types.length; i++) {
    const { z, share } = zoneAt(zones, types[i])
    const next = Math.min(z + 1, zones.length - 1)
    const isNear = Math.max(...coarse[z], ...coarse[next]) > top - NEGLIGIBLE
    for (let j = 0; j < c; j++) {
      const at = i * c + j
      if (!isNear) {
        logLikelihood[at] = (1 - share) * coarse[z][j] + share * coarse[next][j]
        continue
      }
      const low = solvers[z](i, j)
      const high = share > 0 ? solvers[next](i, j) : low
      logLikelihood[at] = (1 - share) * low.logLikelihood + share * high.logLikelihood
      distance[at] = (1 - share) * low.distance + share * high.distance
    }
  }
  return { logLikelihood, distance }
}

interface CellLikelihood {
  readonly logLikelihood: number
  readonly distance: number
}

function zoneSolver(
  calibration: DecodedCalibration,
  zone: DecodedZone,
  { index, value, error }: FeatureVector,
  degreesOfFreedom: number,
): (type: number, luminosity: number) => CellLikelihood {
  const { features, mean, classes } = calibration
  const f = features.length
  const p = index.length
  const i0 = nearest(calibration.types, zone.type)
  const matrix = new Float64Array(p * p)
  for (let a = 0; a < p; a++) {
    for (let b = 0; b <= a; b++) matrix[a * p + b] = zone.covariance[index[a] * f + index[b]]
    let uncertain = 0
    for (let j = 0; j < classes.length; j++) uncertain += calibration.meanVariance(i0, j, index[a]) / classes.length
    matrix[a * p + a] += error[a] * error[a] + uncertain
  }
  const lower = choleskyFactor(matrix, p)
  const constant = -0.5 * logDeterminant(lower, p)
  const residual = new Float64Array(p)
  return (type, luminosity) => {
    const row = (type * classes.length + luminosity) * f
    for (let a = 0; a < p; a++) residual[a] = value[a] - mean[row + index[a]]
    forwardSolve(lower, p, residual, residual)
    let distance = 0
    for (let a = 0; a < p; a++) distance += residual[a] * residual[a]
    const tail = 0.5 * (degreesOfFreedom + p) * Math.log1p(distance / degreesOfFreedom)
    return { logLikelihood: zone.tempering * (constant - tail), distance }
  }
}

/** The zone at or below a type, and how far the type lies towards the next, 0 to 1. */
export function zoneAt(
  zones: readonly { readonly type: number }[],
  type: number,
): { readonly z: number; readonly share: number } {
  let z = 0
  while (z + 1 < zones.length && zones[z + 1].type <= type) z++
  if (z + 1 === zones.length || type <= zones[z].type) return { z, share: 0 }
  return { z, share: (type - zones[z].type) / (zones[z + 1].type - zones[z].type) }
}

function nearest(values: Float64Array, wanted: number): number {
  let best = 0
  for (let i = 1; i < values.length; i++) if (Math.abs(values[i] - wanted) < Math.abs(values[best] - wanted)) best = i
  return best
}
