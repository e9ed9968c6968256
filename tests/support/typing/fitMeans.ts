import { backwardSolve, choleskyFactor, forwardSolve, inverseFromFactor } from '../../../src/numeric/cholesky.ts'
import { median } from '../../../src/numeric/median.ts'

/** A star of the calibration: published type and class, weight, features (NaN where not measured). */
export interface TrainingStar {
  readonly type: number
  readonly luminosity: number
  /** 1 for a single star, more for a mean of several. */
  readonly weight: number
  /** shape (f) [unit of the feature]. */
  readonly values: Float64Array
}

/** How smooth the features are taken to be over type and class: a Gaussian process with fixed lengths. */
export interface Smoothness {
  /** Subclasses: correlation length of what all classes share, and of each class's own part. */
  readonly lengthShared: number
  readonly lengthOwn: number
  /** Variance of a class's own part, relative to the shared part. */
  readonly own: number
  /** Classes: correlation length over `classPlace`. */
  readonly lengthClass: number
  /** Variance of a single star about the mean, relative to the shared part. */
  readonly noise: number
  /** Residuals beyond this many local σ are pulled in (Huber's pseudo-values). */
  readonly clip: number
}

/** Chosen by cross-validation on the atlas; the score changes by less than 3 % over factors of two in any of them. */
export const SMOOTHNESS: Smoothness = {
  lengthShared: 4,
  lengthOwn: 6,
  own: 0.6,
  lengthClass: 1.5,
  noise: 0.1,
  clip: 2.5,
}

/** Places of the classes I, II, III, IV, V on the axis of luminosity: IV is nearly V, II between I and III. */
const CLASS_PLACES = [1, 2.2, 3, 4.4, 5]

function classPlace(luminosity: number): number {
  const i = Math.min(3, Math.max(0, Math.floor(luminosity) - 1))
  return CLASS_PLACES[i] + (luminosity - 1 - i) * (CLASS_PLACES[i + 1] - CLASS_PLACES[i])
}

export interface Cell {
  readonly type: number
  readonly luminosity: number
}

/** Covariance of the process between two places; the constant lets the overall mean go free. */
function kernel(a: Cell, b: Cell, s: Smoothness): number {
  const type = a.type - b.type
  const place = classPlace(a.luminosity) - classPlace(b.luminosity)
  return (
    1 +
    Math.exp(-0.5 * (type / s.lengthShared) ** 2) +
    s.own * Math.exp(-0.5 * (type / s.lengthOwn) ** 2 - 0.5 * (place / s.lengthClass) ** 2)
  )
}

/** Expected features over a grid, with what is left over at every star. */
export interface FittedMeans {
  /** shape (f): standard deviation of each feature over all stars. */
  readonly scale: Float64Array
  /** shape (g × f) [unit of the feature]. */
  readonly mean: Float64Array
  /** shape (g) [scale²]. */
  readonly variance: Float64Array
  /**
   * shape (n × f) [unit of the feature]: measured minus predicted from the other stars, without the share of the prediction's
   * own error (which is large at the ends of the sequence, and counted apart in `variance`); NaN where not measured.
   */
  readonly residual: Float64Array
}

export interface MeanModel {
  /** The fit without some of the stars (their places in the list), whose residuals are then NaN. */
  without(left: readonly number[]): FittedMeans
}

/**
 * Gaussian-process regression of every feature on type and class with one covariance for all (Rasmussen & Williams 2006,
 * algorithm 2.1 and section 5.4.2 for the leave-out formulas). Outliers are pulled in by Huber's pseudo-values, missing
 * values filled by what the others predict, which leaves them without influence.
 */
export function modelMeans(
  stars: readonly TrainingStar[],
  grid: readonly Cell[],
  s: Smoothness = SMOOTHNESS,
): MeanModel {
  const n = stars.length
  const f = stars[0].values.length
  const matrix = new Float64Array(n * n)
  for (let i = 0; i < n; i++)
    for (let j = 0; j <= i; j++)
      matrix[i * n + j] = matrix[j * n + i] = kernel(stars[i], stars[j], s) + (i === j ? s.noise / stars[i].weight : 0)
  const inverse = inverseFromFactor(choleskyFactor(matrix, n), n)
  const scaled = standardise(stars, f)
  const pulled = pullIn(stars, scaled, inverse, s)
  const toGrid = grid.map((cell) => Float64Array.from(stars, (star) => kernel(cell, star, s)))
  const variance = gridVariance(toGrid, inverse, kernel(grid[0], grid[0], s))
  return {
    without: (left) => {
      const reduced = downdate(inverse, n, left)
      const kept = pulled.slice()
      for (const i of left) kept.fill(0, i * f, (i + 1) * f)
      const weights = product(reduced, kept, n, f)
      const residual = new Float64Array(n * f).fill(NaN)
      for (let i = 0; i < n; i++) {
        if (left.includes(i)) continue
        const own = Math.sqrt((s.noise / stars[i].weight) * reduced[i * n + i])
        for (let k = 0; k < f; k++) {
          const at = i * f + k
          if (scaled.missing[at]) continue
          const predicted = pulled[at] - weights[at] / reduced[i * n + i]
          residual[at] = own * (scaled.values[at] - predicted) * scaled.scale[k]
        }
      }
      const mean = new Float64Array(grid.length * f)
      toGrid.forEach((row, g) => {
        for (let i = 0; i < n; i++) for (let k = 0; k < f; k++) mean[g * f + k] += row[i] * weights[i * f + k]
        for (let k = 0; k < f; k++) mean[g * f + k] = scaled.middle[k] + scaled.scale[k] * mean[g * f + k]
      })
      return { scale: scaled.scale, mean, variance, residual }
    },
  }
}

/** Variance of the process at each cell, all stars known; it changes little when a few are left out. */
function gridVariance(toGrid: readonly Float64Array[], inverse: Float64Array, self: number): Float64Array {
  return Float64Array.from(toGrid, (row) => {
    const n = row.length
    let explained = 0
    for (let i = 0; i < n; i++) {
      let sum = 0
      for (let j = 0; j < n; j++) sum += inverse[i * n + j] * row[j]
      explained += row[i] * sum
    }
    return Math.max(0, self - explained)
  })
}

interface Standardised {
  readonly middle: Float64Array
  readonly scale: Float64Array
  /** shape (n × f): (value − middle) / scale, 0 where missing. */
  readonly values: Float64Array
  readonly missing: Uint8Array
}

function standardise(stars: readonly TrainingStar[], f: number): Standardised {
  const n = stars.length
  const middle = new Float64Array(f)
  const scale = new Float64Array(f)
  const values = new Float64Array(n * f)
  const missing = new Uint8Array(n * f)
  for (let k = 0; k < f; k++) {
    const known = stars.map((star) => star.values[k]).filter((value) => Number.isFinite(value))
    middle[k] = median(known)
    const mean = known.reduce((sum, value) => sum + value, 0) / known.length
    scale[k] = Math.sqrt(known.reduce((sum, value) => sum + (value - mean) ** 2, 0) / known.length)
    for (let i = 0; i < n; i++) {
      const value = stars[i].values[k]
      missing[i * f + k] = Number.isFinite(value) ? 0 : 1
      values[i * f + k] = Number.isFinite(value) ? (value - middle[k]) / scale[k] : 0
    }
  }
  return { middle, scale, values, missing }
}

const ROUNDS = 4
/** Subclasses over which the local σ of the residuals is taken. */
const LOCAL = 6

function pullIn(
  stars: readonly TrainingStar[],
  { values, missing, scale }: Standardised,
  inverse: Float64Array,
  { clip }: Smoothness,
): Float64Array {
  const n = stars.length
  const f = scale.length
  const near = new Float64Array(n * n)
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) near[i * n + j] = Math.exp(-0.5 * ((stars[i].type - stars[j].type) / LOCAL) ** 2)
  const pulled = values.slice()
  for (let round = 0; round < ROUNDS; round++) {
    for (let k = 0; k < f; k++) fillMissing(pulled, missing, inverse, { n, f, k })
    const weights = product(inverse, pulled, n, f)
    for (let k = 0; k < f; k++) {
      const residual = new Float64Array(n)
      for (let i = 0; i < n; i++) {
        const at = i * f + k
        residual[i] = missing[at] ? NaN : values[at] - (pulled[at] - weights[at] / inverse[i * n + i])
      }
      const first = localSigma(residual, near, () => 0.5)
      const sigma = localSigma(residual, near, (i) => clip * first[i])
      for (let i = 0; i < n; i++) {
        const at = i * f + k
        if (missing[at]) continue
        const limit = clip * sigma[i]
        pulled[at] = values[at] - residual[i] + Math.min(limit, Math.max(-limit, residual[i]))
      }
    }
  }
  return pulled
}

/** Root mean square of the residuals about each star, each held within its limit. */
function localSigma(residual: Float64Array, near: Float64Array, limit: (i: number) => number): Float64Array {
  const n = residual.length
  return Float64Array.from({ length: n }, (_, i) => {
    let sum = 0
    let weight = 0
    for (let j = 0; j < n; j++) {
      if (!(residual[j] === residual[j])) continue
      const held = Math.min(Math.abs(residual[j]), limit(i))
      sum += near[i * n + j] * held * held
      weight += near[i * n + j]
    }
    return Math.sqrt(sum / weight)
  })
}

/** Sets the missing values of one feature to what the others predict: the weights of missing stars become zero. */
function fillMissing(
  pulled: Float64Array,
  missing: Uint8Array,
  inverse: Float64Array,
  { n, f, k }: { readonly n: number; readonly f: number; readonly k: number },
): void {
  const gone: number[] = []
  for (let i = 0; i < n; i++) if (missing[i * f + k]) gone.push(i)
  const m = gone.length
  if (m === 0) return
  const block = new Float64Array(m * m)
  const right = new Float64Array(m)
  gone.forEach((i, a) => {
    gone.forEach((j, b) => (block[a * m + b] = inverse[i * n + j]))
    let sum = 0
    for (let j = 0; j < n; j++) if (!missing[j * f + k]) sum -= inverse[i * n + j] * pulled[j * f + k]
    right[a] = sum
  })
  const lower = choleskyFactor(block, m)
  backwardSolve(lower, m, forwardSolve(lower, m, right, right), right)
  gone.forEach((i, a) => (pulled[i * f + k] = right[a]))
}

/** Inverse of the covariance without some stars, in place of the whole one; their rows and columns are zero. */
function downdate(inverse: Float64Array, n: number, left: readonly number[]): Float64Array {
  const m = left.length
  if (m === 0) return inverse
  const block = new Float64Array(m * m)
  left.forEach((i, a) => left.forEach((j, b) => (block[a * m + b] = inverse[i * n + j])))
  const lower = choleskyFactor(block, m)
  const half = new Float64Array(m * n)
  const column = new Float64Array(m)
  for (let j = 0; j < n; j++) {
    for (let a = 0; a < m; a++) column[a] = inverse[left[a] * n + j]
    forwardSolve(lower, m, column, column)
    for (let a = 0; a < m; a++) half[a * n + j] = column[a]
  }
  const reduced = inverse.slice()
  for (let a = 0; a < m; a++)
    for (let i = 0; i < n; i++) {
      const factor = half[a * n + i]
      for (let j = 0; j < n; j++) reduced[i * n + j] -= factor * half[a * n + j]
    }
  for (const i of left) for (let j = 0; j < n; j++) reduced[i * n + j] = reduced[j * n + i] = i === j ? 1 : 0
  return reduced
}

function product(a: Float64Array, b: Float64Array, n: number, f: number): Float64Array {
  const out = new Float64Array(n * f)
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) {
      const factor = a[i * n + j]
      if (factor === 0) continue
      const from = j * f
      const to = i * f
      for (let k = 0; k < f; k++) out[to + k] += factor * b[from + k]
    }
  return out
}
