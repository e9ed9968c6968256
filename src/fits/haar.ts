/** Rounds to a multiple of `unit` towards plus infinity at halves for values of 0 and more, away from it below. */
function rounded(value: number, unit: number): number {
  const half = Math.floor(unit / 2)
  return Math.floor((value + (value >= 0 ? half : half - 1)) / unit) * unit
}

/** As `rounded` for the last pass, in which the unit is one. */
function whole(value: number): number {
  return Math.floor(value)
}

/** The bit of that weight in two's complement: 0 or `unit`. */
function bitOf(value: number, unit: number): number {
  const quotient = Math.floor(value / unit)
  return (quotient - 2 * Math.floor(quotient / 2)) * unit
}

/**
 * Turns Haar coefficients into pixels, in place: the inverse of the two-dimensional transform of White (1992), whose
 * low bits were dropped where they follow from others. Exact for integers below 2^50; numbers instead of 32-bit
 * integers, since sums of a wide tile go beyond them.
 *
 * @param a  shape (rows, columns), columns fastest; overwritten
 */
export function inverseHaar(a: Float64Array, rows: number, columns: number): void {
  const levels = Math.ceil(Math.log2(Math.max(rows, columns, 1)))
  if (levels === 0) {
    a[0] = Math.floor((rounded(a[0] as number, 2) as number) / 1)
    return
  }
  let bit0 = 2 ** (levels - 1)
  a[0] = rounded(a[0] as number, 4 * bit0)
  const scratch = new Float64Array(Math.max(rows, columns))
  for (let level = levels - 1; level >= 0; level--) {
    const height = Math.ceil(rows / 2 ** level)
    const width = Math.ceil(columns / 2 ** level)
    for (let y = 0; y < height; y++) interleave(a, { first: y * columns, step: 1, count: width }, scratch)
    for (let x = 0; x < width; x++) interleave(a, { first: x, step: columns, count: height }, scratch)
    recombine(a, { height, width, columns, bit0, last: level === 0 })
    bit0 /= 2
  }
}

interface Line {
  readonly first: number
  readonly step: number
  readonly count: number
}

/** Puts the first half of a line to its even places and the second half to its odd places. */
function interleave(a: Float64Array, { first, step, count }: Line, scratch: Float64Array): void {
  const half = (count + 1) >> 1
  for (let i = 0; i < count; i++) scratch[i < half ? 2 * i : 2 * (i - half) + 1] = a[first + i * step] as number
  for (let i = 0; i < count; i++) a[first + i * step] = scratch[i] as number
}

interface Pass {
  readonly height: number
  readonly width: number
  readonly columns: number
  readonly bit0: number
  readonly last: boolean
}

function recombine(a: Float64Array, { height, width, columns, bit0, last }: Pass): void {
  const bit1 = 2 * bit0
  const divisor = last ? 4 : 2
  const roundBit0 = last ? whole : (value: number): number => rounded(value, bit0)
  for (let y = 0; y < height; y += 2) {
    for (let x = 0; x < width; x += 2) {
      const at = y * columns + x
      const right = x + 1 < width
      const below = y + 1 < height
      let h0 = a[at] as number
      if (right && below) {
        const hc = roundBit0(a[at + columns + 1] as number)
        let hx = rounded(a[at + columns] as number, bit1)
        let hy = rounded(a[at + 1] as number, bit1)
        const low0 = bitOf(hc, bit0)
        hx -= hx >= 0 ? low0 : -low0
        hy -= hy >= 0 ? low0 : -low0
        const low1 = (bitOf(hc, bit1) + bitOf(hx, bit1) + bitOf(hy, bit1)) % (2 * bit1)
        h0 += h0 >= 0 ? low0 - low1 : low0 === 0 ? low1 : low0 - low1
        a[at + columns + 1] = Math.floor((h0 + hx + hy + hc) / divisor)
        a[at + columns] = Math.floor((h0 + hx - hy - hc) / divisor)
        a[at + 1] = Math.floor((h0 - hx + hy - hc) / divisor)
        a[at] = Math.floor((h0 - hx - hy + hc) / divisor)
      } else if (right || below) {
        const other = right ? at + 1 : at + columns
        const h = rounded(a[other] as number, bit1)
        const low1 = bitOf(h, bit1)
        h0 += h0 >= 0 ? -low1 : low1
        a[other] = Math.floor((h0 + h) / divisor)
        a[at] = Math.floor((h0 - h) / divisor)
      } else a[at] = Math.floor(h0 / divisor)
    }
  }
}
