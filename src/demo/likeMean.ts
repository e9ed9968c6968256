import { FINE_FIRST, FINE_STEP } from './grid.ts'

/** Rounds of comparing and correcting, and the largest factor by which a round changes the light. */
const ROUNDS = 4
const LARGEST_FACTOR = 2
/** Bins on either side over which the factor is smoothed: single bins would move the centres of lines. */
const SMOOTHING = 4
/** Light is never taken out wholly. */
const DARKEST = 0.02

/**
 * Light whose means in bins are near those of a mean normalised spectrum, while lines narrower than a bin stay as they
 * are: the given light times a smooth factor, 1 where the mean is not known.
 *
 * @param light   shape (fine grid), share of the continuum let through
 * @param middle  shape (n) [Å, air, rest]: middles of the bins, evenly spaced
 * @param wanted  shape (n), flux ÷ continuum; NaN where not known
 */
export function likeMean(light: Float64Array, middle: Float64Array, wanted: Float64Array): Float64Array {
  const out = light.slice()
  const step = middle[1] - middle[0]
  for (let round = 0; round < ROUNDS; round++) {
    const factor = wanted.map((value, i) => {
      const now = binMean(out, middle[i] - step / 2, middle[i] + step / 2)
      const ratio = value / now
      return ratio > 0 ? Math.min(LARGEST_FACTOR, Math.max(1 / LARGEST_FACTOR, ratio)) : 1
    })
    const smooth = runningMean(factor, SMOOTHING)
    for (let i = 0; i < out.length; i++) {
      const at = (FINE_FIRST + FINE_STEP * i - middle[0]) / step
      out[i] = Math.max(DARKEST, out[i] * between(smooth, at))
    }
  }
  return out
}

/** Mean over entries up to `reach` away on either side, fewer at the ends. */
function runningMean(values: Float64Array, reach: number): Float64Array {
  return values.map((_, i) => {
    const near = values.subarray(Math.max(0, i - reach), i + reach + 1)
    return near.reduce((sum, value) => sum + value, 0) / near.length
  })
}

/** Mean of the samples with from ≤ wavelength < to; NaN when there is none. */
function binMean(light: Float64Array, from: number, to: number): number {
  const first = Math.max(0, Math.ceil((from - FINE_FIRST) / FINE_STEP))
  const last = Math.min(light.length, Math.ceil((to - FINE_FIRST) / FINE_STEP))
  let sum = 0
  for (let i = first; i < last; i++) sum += light[i]
  return sum / (last - first)
}

/** Linear between entries, 1 beyond the ends. */
function between(values: Float64Array, at: number): number {
  if (at < 0 || at > values.length - 1) return 1
  const i = Math.min(values.length - 2, Math.floor(at))
  return values[i] + (values[i + 1] - values[i]) * (at - i)
}
