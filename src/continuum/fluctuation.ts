import { selectInPlace } from '../numeric/select.ts'

/** Fluctuations are followed on samples of at least this width [Å]. */
const FINEST = 0.8
/** Lines deeper than this many robust standard deviations of their block are measured one by one, and count as clipped. */
const STRONG = 4

/** Flux over a first curve, and its noise. */
export interface Samples {
  readonly wavelength: Float64Array
  readonly ratio: Float64Array
  readonly noise: Float64Array
}

/** Means of neighbouring samples where the sampling is finer than needed. */
export function coarser(wavelength: Float64Array, ratio: Float64Array, noise: Float64Array): Samples {
  const n = wavelength.length
  const step = (wavelength[n - 1] - wavelength[0]) / Math.max(1, n - 1)
  const group = Math.floor(FINEST / step)
  if (group < 2) return { wavelength, ratio, noise }
  const size = Math.floor(n / group)
  const out = { wavelength: new Float64Array(size), ratio: new Float64Array(size), noise: new Float64Array(size) }
  for (let k = 0; k < size; k++) {
    let count = 0
    let variance = 0
    for (let i = k * group; i < (k + 1) * group; i++) {
      out.wavelength[k] += wavelength[i] / group
      if (!(ratio[i] === ratio[i])) continue
      out.ratio[k] += ratio[i]
      variance += noise[i] * noise[i]
      count++
    }
    out.ratio[k] = count ? out.ratio[k] / count : NaN
    out.noise[k] = Math.sqrt(variance) / count
  }
  return out
}

/** One stretch of a spectrum and how the flux fluctuates in it. */
export interface Block {
  /** Mean of ratio − 1 without strong lines; NaN when there are too few samples. */
  readonly mean: number
  /** Ratio less its mean, 0 where a sample has no part. */
  readonly off: Float64Array
  readonly good: Uint8Array
  readonly used: number
  readonly noiseVariance: number
}

/** Fewest samples of a block. */
const FEWEST = 20

/** A block of samples [start, end) of which strong lines have no part; `half` is half of `TREND` in samples. */
export function blockOf({ ratio, noise }: Samples, [start, end]: readonly [number, number], half: number): Block {
  const size = Math.max(0, end - start)
  const off = new Float64Array(size)
  const good = new Uint8Array(size)
  const kept = new Float64Array(size)
  let count = 0
  for (let i = start; i < end; i++) if (ratio[i] === ratio[i]) kept[count++] = ratio[i]
  if (count < FEWEST) return { mean: NaN, off, good, used: 0, noiseVariance: NaN }
  const middle = selectInPlace(kept, count, count >> 1)
  const low = middle - STRONG * (middle - selectInPlace(kept, count, Math.floor(0.16 * count)))
  const high = middle + STRONG * (selectInPlace(kept, count, Math.floor(0.84 * count)) - middle)
  let sum = 0
  let used = 0
  for (let i = start; i < end; i++)
    if (ratio[i] > low && ratio[i] < high) {
      sum += ratio[i]
      used++
    }
  const mean = sum / used
  let variance = 0
  for (let i = start; i < end; i++)
    if (ratio[i] > low && ratio[i] < high) {
      off[i - start] = ratio[i] - mean
      good[i - start] = 1
      variance += noise[i] * noise[i]
    }
  return { mean: mean - 1, off: withoutTrend(off, good, half), good, used, noiseVariance: variance / used }
}

/** Fluctuations about the mean of the neighbourhood: a level that is bent or tilted within a block is no crowd of lines. */
function withoutTrend(off: Float64Array, good: Uint8Array, half: number): Float64Array {
  const n = off.length
  const sums = new Float64Array(n + 1)
  const counts = new Float64Array(n + 1)
  for (let i = 0; i < n; i++) {
    sums[i + 1] = sums[i] + off[i]
    counts[i + 1] = counts[i] + good[i]
  }
  const out = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    if (!good[i]) continue
    const from = Math.max(0, i - half)
    const to = Math.min(n, i + half + 1)
    out[i] = off[i] - (sums[to] - sums[from]) / (counts[to] - counts[from])
  }
  return out
}

/** Width of the neighbourhood whose mean is taken off [Å]. */
export const TREND = 60

/** Mean product of samples `lag` apart; NaN when there are none. */
export function autocovariance({ off, good, used }: Block, lag: number): number {
  if (used === 0) return NaN
  let product = 0
  let pairs = off.length - lag
  for (let i = 0; i + lag < off.length; i++) product += off[i] * off[i + lag]
  if (used < off.length) {
    pairs = 0
    for (let i = 0; i + lag < off.length; i++) pairs += good[i] & good[i + lag]
  }
  return pairs > 0 ? product / pairs : NaN
}
