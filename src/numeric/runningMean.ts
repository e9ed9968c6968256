/**
 * Values less their weighted mean in a window about each sample; 0 where the sample itself has no weight.
 * The window is cut at the ends.
 *
 * @param values  shape (n), finite
 * @param weight  shape (n), not negative; undefined for equal weights
 * @param half    samples on either side
 */
export function subtractRunningMean(
  values: Float64Array,
  weight: Float64Array | undefined,
  half: number,
): Float64Array {
  const n = values.length
  const sums = new Float64Array(n + 1)
  const weights = new Float64Array(n + 1)
  for (let i = 0; i < n; i++) {
    const w = weight ? weight[i] : 1
    sums[i + 1] = sums[i] + w * values[i]
    weights[i + 1] = weights[i] + w
  }
  const result = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    if (weight && weight[i] === 0) continue
    const from = Math.max(0, i - half)
    const to = Math.min(n, i + half + 1)
    result[i] = values[i] - (sums[to] - sums[from]) / (weights[to] - weights[from])
  }
  return result
}
