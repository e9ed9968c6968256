import { FormatError } from '../errors.ts'
import { readData } from './source.ts'
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

/** Elements above which an array is refused: its numbers would not fit in memory (2^26 x 8 bytes = 512 MiB). */
const MOST_ELEMENTS = 2 ** 26

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
  const size = Math.abs(hdu.bitpix) / 8
  if (hdu.kind === 'image') {
    const bytes = readData(source, hdu, hdu.dataByte + start * size, limited(hdu, count) * size)
    return physicalValues(bytes, LETTER[hdu.bitpix], { scale: hdu.scale, zero: hdu.zero, empty: hdu.blank })
  }
  return readTiles(source, hdu, { start, count: limited(hdu, count) })
}

function limited(hdu: Hdu, count: number): number {
  if (count <= MOST_ELEMENTS) return count
  const message = `image requires at most ${MOST_ELEMENTS} elements at once, got ${count}`
  throw new FormatError('too-large', message, { hdu: hdu.index, keyword: 'NAXIS1' })
}
