import { FormatError } from '../errors.ts'
import { inverseHaar } from './haar.ts'
import { addBitPlanes, bitReader } from './quadtree.ts'

const MAGIC = 0xdd99
const HEADER_SIZE = 25
const MOST_PLANES = 52

/**
 * The integers of an HCOMPRESS_1 tile: a two-dimensional Haar transform whose coefficients are written bit plane by
 * bit plane as quadtrees (FITS 4.0, section 10.4.4; White 1992). Smoothing on decompression (SMOOTH) is not applied:
 * it invents no information.
 *
 * @param size  pixels along the fastest and the other axis
 * @throws FormatError 'compression' when the code breaks its form
 */
export function decodeHcompress(
  code: Uint8Array,
  { width, height }: { readonly width: number; readonly height: number },
): Int32Array {
  const view = new DataView(code.buffer, code.byteOffset, code.length)
  if (code.length < HEADER_SIZE || view.getUint16(0) !== MAGIC) {
    throw new FormatError('compression', 'HCOMPRESS code requires its header of 25 bytes, got none')
  }
  const rows = view.getInt32(2)
  const columns = view.getInt32(6)
  const scale = view.getInt32(10)
  if (rows !== height || columns !== width) {
    throw new FormatError(
      'compression',
      `HCOMPRESS tile requires ${width} x ${height} pixels, got ${columns} x ${rows}`,
    )
  }
  const planes = [22, 23, 24].map((at) => code[at] as number)
  if (planes.some((count) => count > MOST_PLANES)) {
    throw new FormatError(
      'compression',
      `HCOMPRESS tile requires at most ${MOST_PLANES} bit planes, got ${planes.join(', ')}`,
    )
  }
  const [whole = 0, half = 0, quarter = 0] = planes
  const out = new Float64Array(rows * columns)
  const reader = bitReader(code, HEADER_SIZE)
  const top = (rows + 1) >> 1
  const left = (columns + 1) >> 1
  const parts = [
    { first: 0, height: top, width: left, planes: whole },
    { first: left, height: top, width: columns >> 1, planes: half },
    { first: columns * top, height: rows >> 1, width: left, planes: half },
    { first: columns * top + left, height: rows >> 1, width: columns >> 1, planes: quarter },
  ]
  for (const part of parts) addBitPlanes(reader, out, { ...part, stride: columns }, part.planes)
  if (reader.bits(4) !== 0)
    throw new FormatError('compression', 'bit planes require a zero after them, got another value')
  reader.align()
  for (let i = 0; i < out.length; i++) if (out[i] !== 0 && reader.bits(1) === 1) out[i] = -(out[i] as number)
  out[0] = Number(view.getBigInt64(14))
  if (scale > 1) for (let i = 0; i < out.length; i++) out[i] = (out[i] as number) * scale
  inverseHaar(out, rows, columns)
  return Int32Array.from(out)
}
