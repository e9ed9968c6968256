import { FormatError } from '../errors.ts'

export function decodeHcompress(_code: Uint8Array, _size: { width: number; height: number }): Int32Array {
  throw new FormatError(
    'compression',
    'ZCMPTYPE requires RICE_1, GZIP_1, GZIP_2, PLIO_1 or NOCOMPRESS, got HCOMPRESS_1',
  )
}
