import { FormatError } from '../errors.ts'
import type { ByteSource, Column, ColumnValues, Hdu } from './types.ts'

export function readCompressedColumn(
  _source: ByteSource,
  hdu: Hdu,
  _column: Column,
  _rows: { firstRow: number; rowCount: number },
): ColumnValues {
  throw new FormatError('compression', 'compressed table requires a known algorithm, got one not read yet', {
    hdu: hdu.index,
  })
}
