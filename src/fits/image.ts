import { FormatError } from '../errors.ts'
import { requireData } from './source.ts'
import { physicalValues } from './stored.ts'
import type { NumberLetter } from './stored.ts'
import { readTiles } from './tiles.ts'
import type { Bitpix, ByteSource, Hdu } from './types.ts'

/** Elements of an image that are wanted, counted flat from 0 with the fastest axis first. */
export interface ElementRange {
  readonly start: number
  readonly count: number
}

const LETTER: Readonly<Record<Bitpix, NumberLetter>> = { 8: 'B', 16: 'I', 32: 'J', 64: 'K', [-32]: 'E', [-64]: 'D' }

/** Elements above which an array is refused at once (8 bytes each: 256 MiB); larger ones are read by ranges. */
const MOST_ELEMENTS = 2 ** 25

/** Elements that are scaled in one go, so that little is held beside the result. */
const STEP = 2 ** 20

/** Elements of an image: the product of its axes; 0 without axes. */
export function elementCount(hdu: Hdu): number {
  return hdu.dimensions.length === 0 ? 0 : hdu.dimensions.reduce((product, n) => product * n, 1)
}

/**
 * Physical values of an image (BZERO + BSCALE x stored, BLANK as NaN), flat, fastest axis first; of a tile-compressed
 * image as well. Only the range asked for is read.
 *
 * @throws FormatError 'truncated-data' when the file ends before the range does, 'compression' when an algorithm is
 *   not known, or the HDU's own fault; RangeError when the range leaves the image
 */
export function readImage(source: ByteSource, hdu: Hdu, range?: ElementRange): Float64Array {
  if (hdu.kind !== 'image' && hdu.kind !== 'compressed image') {
    throw new FormatError('no-image', `image requires an image HDU, got ${hdu.kind}`, { hdu: hdu.index })
  }
  const total = elementCount(hdu)
  const { start, count } = range ?? { start: 0, count: total }
  if (!Number.isInteger(start) || !Number.isInteger(count) || start < 0 || count < 0 || start + count > total) {
    throw new RangeError(`range requires elements within ${total}, got ${start} + ${count}`)
  }
  limit(hdu, count)
  return hdu.kind === 'image' ? plainPixels(source, hdu, start, count) : readTiles(source, hdu, { start, count })
}

function plainPixels(source: ByteSource, hdu: Hdu, start: number, count: number): Float64Array {
  const size = Math.abs(hdu.bitpix) / 8
  const scaling = { scale: hdu.scale, zero: hdu.zero, empty: hdu.blank }
  const first = hdu.dataByte + start * size
  requireData(source, hdu, first, count * size)
  if (count <= STEP) return physicalValues(source.read(first, count * size), LETTER[hdu.bitpix], scaling)
  const out = new Float64Array(count)
  for (let at = 0; at < count; at += STEP) {
    const bytes = source.read(first + at * size, Math.min(STEP, count - at) * size)
    out.set(physicalValues(bytes, LETTER[hdu.bitpix], scaling), at)
  }
  return out
}

function limit(hdu: Hdu, count: number): void {
  if (count <= MOST_ELEMENTS) return
  const message = `image requires at most ${MOST_ELEMENTS} elements at once, got ${count}`
  throw new FormatError('too-large', message, { hdu: hdu.index, keyword: 'NAXIS1' })
}
