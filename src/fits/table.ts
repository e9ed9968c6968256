import { FormatError } from '../errors.ts'
import { asciiValues } from './asciiTable.ts'
import { cellValues } from './cells.ts'
import { readCompressedColumn } from './compressedTable.ts'
import { readCells } from './rows.ts'
import type { RowRange } from './rows.ts'
import type { ByteSource, Column, ColumnValues, Hdu } from './types.ts'
import { readVariable } from './variable.ts'

/**
 * Values of a table column: of a binary table, an ASCII table or a compressed table, scaled, with nulls as NaN.
 * Only the rows asked for are read.
 *
 * @param column  one of `hdu.columns`
 * @throws FormatError 'truncated-data', 'heap' when a descriptor points outside the heap, 'number' when an ASCII field
 *   is no number, 'compression' when an algorithm is not known, or the HDU's own fault; RangeError when the rows leave
 *   the table
 */
export function readColumn(source: ByteSource, hdu: Hdu, column: Column, range?: RowRange): ColumnValues {
  const { firstRow, rowCount } = range ?? { firstRow: 0, rowCount: hdu.rows }
  const whole = Number.isInteger(firstRow) && Number.isInteger(rowCount)
  if (!whole || firstRow < 0 || rowCount < 0 || firstRow + rowCount > hdu.rows) {
    throw new RangeError(`range requires rows within ${hdu.rows}, got ${firstRow} + ${rowCount}`)
  }
  const rows = { firstRow, rowCount }
  if (hdu.kind === 'compressed table') return readCompressedColumn(source, hdu, column, rows)
  if (hdu.kind !== 'table' && hdu.kind !== 'ascii table') {
    throw new FormatError('no-table', `column requires a table, got ${hdu.kind}`, { hdu: hdu.index })
  }
  const bytes = readCells(source, hdu, column, rows)
  if (hdu.kind === 'ascii table') return asciiValues(bytes, hdu, column, rows)
  if (column.descriptor) return readVariable(source, hdu, column, { descriptors: bytes, firstRow })
  return cellValues(bytes, column, column.repeat)
}

/**
 * Column values as plain numbers: 64-bit integers rounded to the nearest, logicals as 1, 0 and NaN, bits as 0 and 1.
 * Undefined for text, complex numbers and variable-length arrays.
 */
export function numbersOf(values: ColumnValues): Float64Array | undefined {
  switch (values.kind) {
    case 'numbers':
      return values.values
    case 'integers': {
      const { nulls } = values
      const out = new Float64Array(values.values.length)
      for (let i = 0; i < out.length; i++) out[i] = nulls?.[i] === 1 ? NaN : Number(values.values[i])
      return out
    }
    case 'logicals':
      return Float64Array.from(values.values, (value) => (value === undefined ? NaN : value ? 1 : 0))
    case 'bits':
      return Float64Array.from(values.values)
    case 'text':
    case 'complex':
    case 'variable':
      return undefined
  }
}
