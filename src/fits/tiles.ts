import { FormatError } from '../errors.ts'
import type { FormatError as Breach } from '../errors.ts'
import { decodeTile, tileForm } from './tilePixels.ts'
import type { ByteSource, Hdu } from './types.ts'

/**
 * Physical values of a range of a tile-compressed image (FITS 4.0, section 10.1), flat, fastest axis first. Only the
 * tiles that touch the range are read.
 *
 * @throws FormatError 'compression' when the algorithm or the code of a tile cannot be understood
 */
export function readTiles(
  source: ByteSource,
  hdu: Hdu,
  { start, count }: { readonly start: number; readonly count: number },
): Float64Array {
  const form = tileForm(hdu)
  const { dimensions } = hdu
  const { tile } = form
  const out = new Float64Array(count)
  if (count === 0) return out
  const strides = stridesOf(dimensions)
  const grid = dimensions.map((n, i) => Math.ceil(n / (tile[i] as number)))
  const tiles = grid.reduce((product, n) => product * n, 1)
  if (tiles > (hdu.stored?.rows ?? 0)) {
    const message = `ZTILEn requires ${tiles} rows of tiles, got ${hdu.stored?.rows}`
    throw new FormatError('compression', message, { hdu: hdu.index, keyword: 'ZTILE1' })
  }
  const place = new Array<number>(grid.length).fill(0)
  for (let number = 0; number < tiles; number++) {
    const corner = place.map((p, i) => p * (tile[i] as number))
    const size = corner.map((from, i) => Math.min(tile[i] as number, (dimensions[i] as number) - from))
    const first = corner.reduce((sum, from, i) => sum + from * (strides[i] as number), 0)
    const last = first + size.reduce((sum, n, i) => sum + (n - 1) * (strides[i] as number), 0)
    if (last >= start && first < start + count) {
      const values = tileValues(source, hdu, number, () => decodeTile(source, hdu, form, { number, size }))
      placeTile(values, out, { first, start, size, strides })
    }
    for (let i = 0; i < place.length; i++) {
      place[i] = (place[i] as number) + 1
      if ((place[i] as number) < (grid[i] as number)) break
      place[i] = 0
    }
  }
  return out
}

function tileValues(_source: ByteSource, hdu: Hdu, number: number, decode: () => Float64Array): Float64Array {
  try {
    return decode()
  } catch (error) {
    if (!(error instanceof FormatError) || error.where.hdu !== undefined) throw error
    const breach: Breach = error
    throw new FormatError(breach.code, breach.message, { hdu: hdu.index, row: number }, { cause: error })
  }
}

function stridesOf(dimensions: readonly number[]): readonly number[] {
  const strides: number[] = []
  let stride = 1
  for (const n of dimensions) {
    strides.push(stride)
    stride *= n
  }
  return strides
}

interface Placement {
  readonly first: number
  readonly start: number
  readonly size: readonly number[]
  readonly strides: readonly number[]
}

/** Copies a tile's rows to where they belong, clipped to the range. */
function placeTile(values: Float64Array, out: Float64Array, { first, start, size, strides }: Placement): void {
  const width = size[0] ?? 1
  const counter = new Array<number>(size.length).fill(0)
  for (let from = 0; from < values.length; from += width) {
    let to = first - start
    for (let i = 1; i < size.length; i++) to += (counter[i] as number) * (strides[i] as number)
    const skip = Math.max(0, -to)
    const take = Math.min(width, out.length - to)
    if (take > skip) out.set(values.subarray(from + skip, from + take), to + skip)
    for (let i = 1; i < size.length; i++) {
      counter[i] = (counter[i] as number) + 1
      if ((counter[i] as number) < (size[i] as number)) break
      counter[i] = 0
    }
  }
}
