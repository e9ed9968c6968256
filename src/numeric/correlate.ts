/**
 * Normalised cross-correlation at whole shifts: for each shift k from −reach to +reach,
 * Σ w d t(i − k) / √(Σ w d² · Σ w t(i − k)²), the share of the data's shape that the pattern explains, −1 to 1.
 *
 * @param data     shape (n)
 * @param weight   shape (n), not negative
 * @param pattern  shape (n + 2 · margin): sample i of the data lies at i + margin
 * @param reach    largest shift, at most the margin
 * @returns        shape (2 · reach + 1); 0 where nothing overlaps
 */
export function correlate(
  data: Float64Array,
  weight: Float64Array,
  pattern: Float64Array,
  reach: number,
): Float64Array {
  const n = data.length
  const margin = (pattern.length - n) / 2
  if (!(reach <= margin)) throw new RangeError(`correlate requires a reach of at most ${margin}, got ${reach}`)
  const weighted = new Float64Array(n)
  let power = 0
  for (let i = 0; i < n; i++) {
    weighted[i] = weight[i] * data[i]
    power += weighted[i] * data[i]
  }
  const result = new Float64Array(2 * reach + 1)
  if (!(power > 0)) return result
  for (let k = -reach; k <= reach; k++) {
    const offset = margin - k
    let product = 0
    let square = 0
    for (let i = 0; i < n; i++) {
      const t = pattern[i + offset]
      product += weighted[i] * t
      square += weight[i] * t * t
    }
    result[k + reach] = square > 0 ? product / Math.sqrt(square * power) : 0
  }
  return result
}

/**
 * As `correlate`, with the weighted means of data and pattern under the overlap taken out at every shift: Pearson's
 * coefficient, for short stretches whose level is not known.
 */
export function correlateCentred(
  data: Float64Array,
  weight: Float64Array,
  pattern: Float64Array,
  reach: number,
): Float64Array {
  const n = data.length
  const margin = (pattern.length - n) / 2
  if (!(reach <= margin)) throw new RangeError(`correlateCentred requires a reach of at most ${margin}, got ${reach}`)
  let weights = 0
  let sum = 0
  for (let i = 0; i < n; i++) {
    weights += weight[i]
    sum += weight[i] * data[i]
  }
  const result = new Float64Array(2 * reach + 1)
  if (!(weights > 0)) return result
  const mean = sum / weights
  let power = 0
  for (let i = 0; i < n; i++) power += weight[i] * (data[i] - mean) ** 2
  for (let k = -reach; k <= reach; k++) {
    let product = 0
    let square = 0
    let level = 0
    for (let i = 0; i < n; i++) {
      const t = pattern[i + margin - k]
      product += weight[i] * (data[i] - mean) * t
      square += weight[i] * t * t
      level += weight[i] * t
    }
    const spread = square - (level * level) / weights
    if (spread > 1e-12 * square && power > 0) result[k + reach] = product / Math.sqrt(spread * power)
  }
  return result
}
