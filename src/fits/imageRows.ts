import { readImage } from './image.ts'
import { readData } from './source.ts'
import type { ByteSource, Hdu } from './types.ts'

/** Rows of a 2-D image that are wanted, counted from 0 along the second axis. */
export interface ImageRows {
  readonly firstRow: number
  readonly rowCount: number
}

const SIGN_BIT = 0x8000
const UNSIGNED_16 = 32768

/**
 * Fills `into` with the physical values of whole rows of an image (of further axes as well, laid one after another);
 * meant for frames too large to hold at once. 16-bit frames go without an array between.
 *
 * @param into  at least rowCount x NAXIS1 elements
 * @throws as `readImage`; RangeError when the rows leave the image or `into` is too short
 */
export function readImageRows(
  source: ByteSource,
  hdu: Hdu,
  { firstRow, rowCount }: ImageRows,
  into: Float32Array | Float64Array,
): void {
  const width = hdu.dimensions[0] ?? 0
  const count = rowCount * width
  if (into.length < count) throw new RangeError(`into requires ${count} elements, got ${into.length}`)
  const plain = hdu.kind === 'image' && hdu.bitpix === 16 && hdu.blank === undefined && hdu.scale === 1
  const height = hdu.dimensions.slice(1).reduce((product, n) => product * n, 1)
  if (!plain || firstRow < 0 || rowCount < 0 || firstRow + rowCount > height) {
    into.set(readImage(source, hdu, { start: firstRow * width, count }))
    return
  }
  const bytes = readData(source, hdu, hdu.dataByte + firstRow * width * 2, count * 2)
  const zero = Number(hdu.zero)
  if (zero === UNSIGNED_16) {
    for (let i = 0, b = 0; i < count; i++, b += 2) {
      into[i] = (((bytes[b] as number) << 8) | (bytes[b + 1] as number)) ^ SIGN_BIT
    }
    return
  }
  for (let i = 0, b = 0; i < count; i++, b += 2) {
    into[i] = zero + ((((bytes[b] as number) << 24) >> 16) | (bytes[b + 1] as number))
  }
}
