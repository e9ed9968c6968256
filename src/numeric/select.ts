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

/** Median of the first `count` values (the upper of the middle two); partly sorts them. NaN when there is none. */
export function medianInPlace(values: Float64Array, count: number): number {
  return count > 0 ? selectInPlace(values, count, count >> 1) : NaN
}
