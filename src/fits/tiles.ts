import { FormatError } from '../errors.ts'
import { textValue } from './header.ts'
import type { ByteSource, Hdu } from './types.ts'

export function readTiles(_source: ByteSource, hdu: Hdu, _range: { start: number; count: number }): Float64Array {
  const algorithm = textValue(hdu.stored?.header ?? hdu.header, 'ZCMPTYPE') ?? 'none'
  throw new FormatError('compression', `ZCMPTYPE requires a known algorithm, got ${algorithm}`, { hdu: hdu.index })
}
