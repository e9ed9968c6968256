import { selectInPlace } from './select.ts'

/**
 * Median of the finite values, the mean of the middle two for an even count; NaN when there is none.
 * The input is not changed.
 */
export function median(values: ArrayLike<number>): number {
  return quantile(values, 0.5)
}

/**
 * Quantile of the finite values by linear interpolation between order statistics (Hyndman & Fan 1996, type 7);
 * NaN when there is none.
 *
 * @param fraction  0 (smallest) to 1 (largest)
 */
export function quantile(values: ArrayLike<number>, fraction: number): number {
  const kept = new Float64Array(values.length)
  let n = 0
  for (let i = 0; i < values.length; i++) if (Number.isFinite(values[i])) kept[n++] = values[i]
  if (n === 0) return NaN
  const position = (n - 1) * fraction
  const k = Math.floor(position)
  const lower = selectInPlace(kept, n, k)
  if (position === k) return lower
  // what stands behind the k-th after the selection is not smaller
  let upper = Infinity
  for (let i = k + 1; i < n; i++) if (kept[i] < upper) upper = kept[i]
  return lower + (upper - lower) * (position - k)
}

/** As `quantile`, for values that are finite and sorted already. */
export function quantileSorted(sorted: ArrayLike<number>, fraction: number): number {
  if (sorted.length === 0) return NaN
  const position = (sorted.length - 1) * fraction
  const i = Math.floor(position)
  const next = sorted[Math.min(i + 1, sorted.length - 1)]
  return sorted[i] + (next - sorted[i]) * (position - i)
}

/** Ratio of a normal standard deviation to its median absolute deviation, 1 / Φ⁻¹(3/4). */
export const SIGMA_PER_MAD = 1.482602218505602

/** Robust standard deviation: the median absolute deviation from the median, scaled for normal data; NaN when empty. */
export function robustSigma(values: ArrayLike<number>): number {
  const middle = median(values)
  const off = new Float64Array(values.length)
  for (let i = 0; i < values.length; i++) off[i] = Math.abs(values[i] - middle)
  return SIGMA_PER_MAD * median(off)
}
