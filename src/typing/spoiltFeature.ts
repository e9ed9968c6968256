import { backwardSolve, forwardSolve, inverseFromFactor } from '../numeric/cholesky.ts'
import type { FeatureVector } from './likelihood.ts'

/**
 * A feature this many σ from what the others foretell is taken for spoilt (a cosmic ray, a bad pixel, a sky line). Ordinary
 * features scatter by half a σ, since the covariance holds the outliers among the stars too.
 */
const SPOILT = 3.5

/**
 * Place in the vector of the feature that lies farthest from what all others foretell at a cell (its conditional mean under
 * the covariance), where that is beyond what a star can do; undefined where none is.
 *
 * @param residual  shape (p): measured minus expected
 * @param factor    shape (p × p): Cholesky factor of the covariance
 */
export function spoiltFeature(residual: Float64Array, factor: Float64Array): number | undefined {
  const p = residual.length
  const precision = inverseFromFactor(factor, p)
  const weighted = forwardSolve(factor, p, residual, new Float64Array(p))
  backwardSolve(factor, p, weighted, weighted)
  let worst: number | undefined
  let most = SPOILT
  for (let k = 0; k < p; k++) {
    const off = Math.abs(weighted[k]) / Math.sqrt(precision[k * p + k])
    if (off > most) {
      most = off
      worst = k
    }
  }
  return worst
}

/** The vector without one of its features. */
export function withoutFeature({ index, value, error }: FeatureVector, k: number): FeatureVector {
  return {
    index: index.filter((_, a) => a !== k),
    value: value.filter((_, a) => a !== k),
    error: error.filter((_, a) => a !== k),
  }
}
