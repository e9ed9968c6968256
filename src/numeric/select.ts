/**
 * The k-th smallest (from 0) of the first `count` values; partly sorts `values` in place (Hoare 1961, quickselect).
 * Values must not be NaN.
 */
export function selectInPlace(values: Float64Array, count: number, k: number): number {
  let low = 0
  let high = count - 1
  while (low < high) {
    const pivot = values[(low + high) >> 1]
    let i = low
    let j = high
    while (i <= j) {
      while (values[i] < pivot) i++
      while (values[j] > pivot) j--
      if (i <= j) {
        const kept = values[i]
        values[i++] = values[j]
        values[j--] = kept
      }
    }
    if (k <= j) high = j
    else if (k >= i) low = i
    else break
  }
  return values[k]
}

/** Median of the first `count` values, the mean of the middle two for an even count; partly sorts them. NaN for none. */
export function medianInPlace(values: Float64Array, count: number): number {
  if (count === 0) return NaN
  const half = count >> 1
  const upper = selectInPlace(values, count, half)
  if (count & 1) return upper
  let lower = values[0]
  for (let i = 1; i < half; i++) if (values[i] > lower) lower = values[i]
  return 0.5 * (lower + upper)
}
