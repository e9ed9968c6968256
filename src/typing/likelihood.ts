import { choleskyFactor, forwardSolve } from '../numeric/cholesky.ts'
import { type DecodedCalibration, HALO_STEPS } from './decodedCalibration.ts'

/** Measured features by their place in the calibration. */
export interface FeatureVector {
  /** shape (p): places in the calibration's list of features, increasing. */
  readonly index: Int32Array
  /** shape (p) [unit of the feature]. */
  readonly value: Float64Array
  /** shape (p), 1 σ of the measurement. */
  readonly error: Float64Array
}

/** How well each type (t) and luminosity class (c) explains the features. */
export interface LikelihoodGrid {
  /** shape (t × c): tempered log likelihood. */
  readonly logLikelihood: Float64Array
  /** shape (t × c): squared Mahalanobis distance from the expected values, those of the best metals. */
  readonly distance: Float64Array
  /** shape (t × c): metals that fit best; 0 as the Sun's, 1 as in the published means of metal-weak stars. */
  readonly weakness: Float64Array
  /** shape (t × c): how much farther the star would be with metals like the Sun's. */
  readonly weaknessGain: Float64Array
  /** Squared distance from a spectrum without any feature. */
  readonly featureless: number
  /** Type number whose scatter was used. */
  readonly scatterType: number
  /** shape (p × p): Cholesky factor of the covariance used. */
  readonly factor: Float64Array
  /** Exponent on the likelihood at that type. */
  readonly tempering: number
}

/** The scatter is taken anew at the type found until that moves by less than this many subclasses, so often at most. */
const SETTLED = 3
const ROUNDS = 4
/** Steps in the grid's types and classes while the scatter is settled. */
const COARSE = { type: 4, luminosity: 2 } as const
const EVERY = { type: 1, luminosity: 1 } as const

/**
 * Log likelihood of the measured features over type and class: Student's t about the expected values, raised to the
 * tempering exponent. One covariance, that of the stars near the type found plus the measurement's own errors, serves
 * for all cells: with a covariance of each cell's own, its determinant pulls towards types whose features scatter little
 * (found by cross-validation: 68 % of the atlas within 1.5 subclasses so, 1.3 with one).
 */
export function likelihoodGrid(
  calibration: DecodedCalibration,
  degreesOfFreedom: number,
  vector: FeatureVector,
): LikelihoodGrid {
  const { types, classes, zones } = calibration
  let place = firstGuess(calibration, vector)
  for (let round = 0; round < ROUNDS; round++) {
    const coarse = lowest(distances(calibration, vector, scatterFactor(calibration, vector, place), COARSE).distance)
    const found = { type: types[Math.floor(coarse / classes.length)], luminosity: coarse % classes.length }
    const isSettled = Math.abs(found.type - place.type) < SETTLED
    if (isSettled && found.luminosity === place.luminosity) break
    place = isSettled ? { ...place, luminosity: found.luminosity } : found
  }
  const scatterType = place.type
  const { z, share } = zoneAt(zones, scatterType)
  const tempering = (1 - share) * zones[z].tempering + share * zones[Math.min(z + 1, zones.length - 1)].tempering
  const lower = scatterFactor(calibration, vector, place)
  const { distance, weakness, weaknessGain } = distances(calibration, vector, lower, EVERY)
  const bare = forwardSolve(lower, vector.index.length, vector.value, new Float64Array(vector.index.length))
  const featureless = bare.reduce((sum, x) => sum + x * x, 0)
  const half = 0.5 * (degreesOfFreedom + vector.index.length)
  const logLikelihood = distance.map((d) => -tempering * half * Math.log1p(d / degreesOfFreedom))
  return { logLikelihood, distance, weakness, weaknessGain, featureless, scatterType, factor: lower, tempering }
}

/** A type number, and the place of a class in the calibration's list. */
interface Place {
  readonly type: number
  readonly luminosity: number
}

/** Cholesky factor of the features' covariance for a star near a type and class. */
function scatterFactor(
  calibration: DecodedCalibration,
  { index, error }: FeatureVector,
  { type: scatterType, luminosity }: Place,
): Float64Array {
  const { features, types, zones } = calibration
  const f = features.length
  const p = index.length
  const { z, share } = zoneAt(zones, scatterType)
  const low = zones[z].covariance
  const high = zones[Math.min(z + 1, zones.length - 1)].covariance
  const at = Math.min(types.length - 1, Math.max(0, Math.round(scatterType - types[0])))
  const matrix = new Float64Array(p * p)
  for (let a = 0; a < p; a++) {
    const row = index[a] * f
    for (let b = 0; b <= a; b++) matrix[a * p + b] = (1 - share) * low[row + index[b]] + share * high[row + index[b]]
    matrix[a * p + a] += error[a] * error[a] + calibration.meanVariance(at, luminosity, index[a])
  }
  return choleskyFactor(matrix, p)
}

/** Range of metals tried, and the spread of ordinary stars, in units of the published metal-weak means. */
const WEAKNESS = { richest: -0.5, weakest: 3, spread: 0.6 } as const
/**
 * Halo stars: lines this many times as weakened, each saturating, with the spread about it, at the price of their rarity
 * (about 1 in 100 stars bright enough for a slit; common practice, no source).
 */
const HALO = { spread: 0.3, price: 9 } as const

/**
 * Squared Mahalanobis distances of the cells at every `step`-th type and class, with Infinity for the others, each at the metals
 * that bring the star nearest, a penalty for unusual metals included. shapes (t × c).
 */
function distances(
  { features, types, classes, mean, metalWeak, halo }: DecodedCalibration,
  { index, value }: FeatureVector,
  lower: Float64Array,
  step: { readonly type: number; readonly luminosity: number },
): Pick<LikelihoodGrid, 'distance' | 'weakness' | 'weaknessGain'> {
  const f = features.length
  const c = classes.length
  const p = index.length
  const distance = new Float64Array(types.length * c).fill(Infinity)
  const weakness = new Float64Array(types.length * c)
  const weaknessGain = new Float64Array(types.length * c)
  const residual = new Float64Array(p)
  const weak = direction(p)
  const far = direction(p)
  for (let i = 0; i < types.length; i += step.type) {
    aim(weak, metalWeak, { index, lower, row: i * f })
    aim(far, halo, { index, lower, row: i * f })
    for (let j = 0; j < c; j += step.luminosity) {
      const at = i * c + j
      const row = at * f
      for (let a = 0; a < p; a++) residual[a] = value[a] - mean[row + index[a]]
      forwardSolve(lower, p, residual, residual)
      let sum = 0
      let along = 0
      let alongFar = 0
      for (let a = 0; a < p; a++) {
        sum += residual[a] * residual[a]
        along += residual[a] * weak.change[a]
        alongFar += residual[a] * far.change[a]
      }
      const stiffness = weak.leverage + 1 / (WEAKNESS.spread * WEAKNESS.spread)
      const z = Math.min(WEAKNESS.weakest, Math.max(WEAKNESS.richest, along / stiffness))
      weakness[at] = z
      weaknessGain[at] = z * (2 * along - z * stiffness)
      if (far.leverage > 0) {
        const hold = 1 / (HALO.spread * HALO.spread)
        const y = (alongFar + hold) / (far.leverage + hold)
        const gain = y * (2 * alongFar - y * far.leverage) - (y - 1) * (y - 1) * hold - HALO.price
        if (gain > weaknessGain[at]) {
          weakness[at] = HALO_STEPS * y
          weaknessGain[at] = gain
        }
      }
      distance[at] = sum - weaknessGain[at]
    }
  }
  return { distance, weakness, weaknessGain }
}

/** A change of the features in whitened units, and its squared length. */
interface Direction {
  readonly change: Float64Array
  leverage: number
}

function direction(p: number): Direction {
  return { change: new Float64Array(p), leverage: 0 }
}

function aim(
  target: Direction,
  changes: Float64Array,
  { index, lower, row }: { readonly index: Int32Array; readonly lower: Float64Array; readonly row: number },
): void {
  const { change } = target
  const p = index.length
  let size = 0
  for (let a = 0; a < p; a++) size += Math.abs((change[a] = changes[row + index[a]]))
  target.leverage = 0
  if (size === 0) return
  forwardSolve(lower, p, change, change)
  for (let a = 0; a < p; a++) target.leverage += change[a] * change[a]
}

/** A residual counts for no more than this many σ in the first guess. */
const HELD = 4

/** The zone's type that fits best with features taken one by one, each zone with its own scatter. */
function firstGuess({ features, types, classes, mean, zones }: DecodedCalibration, vector: FeatureVector): Place {
  const f = features.length
  const { index, value, error } = vector
  let best = Infinity
  let guess: Place = { type: zones[0].type, luminosity: classes.length - 1 }
  for (const { type, covariance } of zones) {
    const i = Math.min(types.length - 1, Math.max(0, Math.round(type - types[0])))
    for (let j = 0; j < classes.length; j++) {
      let sum = 0
      for (let a = 0; a < index.length; a++) {
        const k = index[a]
        const variance = covariance[k * f + k] + error[a] * error[a]
        const off = value[a] - mean[(i * classes.length + j) * f + k]
        sum += Math.min(HELD * HELD, (off * off) / variance) + Math.log(variance)
      }
      if (sum < best) {
        best = sum
        guess = { type, luminosity: j }
      }
    }
  }
  return guess
}

function lowest(values: Float64Array): number {
  let best = 0
  for (let i = 1; i < values.length; i++) if (values[i] < values[best]) best = i
  return best
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
