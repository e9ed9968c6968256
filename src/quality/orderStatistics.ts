/**
 * Exact order statistics of a stream of 32-bit floats in a few hundred KiB: a histogram of the upper half of each
 * number's bits, in an order that agrees with the numbers', then of the lower half within the bins asked for
 * (radix selection; Knuth, The Art of Computer Programming 3, 5.2.5).
 */
export interface OrderHistogram {
  readonly upper: Uint32Array
  count: number
}

/** A histogram of the upper halves without counts. */
export function emptyOrderHistogram(): OrderHistogram {
  return { upper: new Uint32Array(65536), count: 0 }
}

/** Counts `n` numbers given as their bits; NaN and infinities are left out. Returns how many were. */
export function countOrder(histogram: OrderHistogram, bits: Uint32Array, n: number): number {
  const { upper } = histogram
  let left = 0
  for (let i = 0; i < n; i++) {
    const raw = bits[i]
    if ((raw & 0x7f800000) === 0x7f800000) left++
    else upper[orderKey(raw) >>> 16]++
  }
  histogram.count += n - left
  return left
}

/** Bits of a float as an unsigned number that sorts like the float. */
export function orderKey(bits: number): number {
  return (bits & 0x80000000 ? ~bits : bits | 0x80000000) >>> 0
}

/** Where a rank (from 0) falls: its bin of upper bits and the rank within it. */
export interface OrderPlace {
  readonly bin: number
  readonly rank: number
}

/** The bin of the upper halves that holds a rank (from 0), and the rank within it; throws RangeError beyond the count. */
export function placeOfRank(histogram: OrderHistogram, rank: number): OrderPlace {
  let before = 0
  for (let bin = 0; bin < 65536; bin++) {
    const here = histogram.upper[bin]
    if (rank < before + here) return { bin, rank: rank - before }
    before += here
  }
  throw new RangeError(`rank requires a value below ${histogram.count}, got ${rank}`)
}

/** Lower-half histograms for the bins asked for. */
export type LowerHistograms = ReadonlyMap<number, Uint32Array>

/** Histograms without counts of the lower halves, one for each bin that holds a rank looked for. */
export function emptyLower(places: readonly OrderPlace[]): LowerHistograms {
  return new Map(places.map(({ bin }) => [bin, new Uint32Array(65536)]))
}

/** Counts the lower halves of those of `n` numbers that fall into the bins of `lower`. */
export function countLower(lower: LowerHistograms, bits: Uint32Array, n: number): void {
  const slot = new Int8Array(65536).fill(-1)
  const tables = [...lower.values()]
  let next = 0
  for (const bin of lower.keys()) slot[bin] = next++
  for (let i = 0; i < n; i++) {
    const raw = bits[i]
    if ((raw & 0x7f800000) === 0x7f800000) continue
    const key = orderKey(raw)
    const table = slot[key >>> 16]
    if (table >= 0) tables[table][key & 0xffff]++
  }
}

/** The number at a place. */
export function valueAt(lower: LowerHistograms, { bin, rank }: OrderPlace): number {
  const table = lower.get(bin)
  if (!table) throw new RangeError(`place requires a counted bin, got ${bin}`)
  let before = 0
  for (let low = 0; low < 65536; low++) {
    before += table[low]
    if (rank < before) return floatOfKey(((bin << 16) | low) >>> 0)
  }
  throw new RangeError(`rank requires a value below ${before}, got ${rank}`)
}

function floatOfKey(key: number): number {
  const bits = new Uint32Array(1)
  bits[0] = key & 0x80000000 ? key & 0x7fffffff : ~key
  return new Float32Array(bits.buffer)[0]
}
