import { FormatError } from '../errors.ts'
import { asciiValues } from './asciiTable.ts'
import { cellValues } from './cells.ts'
import { sizeOfElements } from './columns.ts'
import { readCompressedColumn } from './compressedTable.ts'
import { readData, requireData } from './source.ts'
import type { ByteSource, Column, ColumnValues, Hdu } from './types.ts'
import { readVariable } from './variable.ts'

/** Rows of a table that are wanted, counted from 0. */
export interface RowRange {
  readonly firstRow: number
  readonly rowCount: number
}

/** Rows wider than this are read cell by cell, narrower ones in blocks of whole rows. */
const WIDE_ROW = 16_384
const ROW_BLOCK = 4 << 20

/** Bytes of one column above which reading is refused. */
const MOST_BYTES = 2 ** 29

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

/** Stored bytes of a column's cells, one after another. */
function readCells(source: ByteSource, hdu: Hdu, column: Column, { firstRow, rowCount }: RowRange): Uint8Array {
  const { width, offset } = column
  const { rowSize, dataByte } = hdu
  const start = dataByte + firstRow * rowSize
  if (rowCount > 0) requireData(source, hdu, start, (rowCount - 1) * rowSize + offset + width)
  else requireData(source, hdu, dataByte, 0)
  if (width * rowCount > MOST_BYTES) {
    const message = `column requires at most ${MOST_BYTES} bytes at once, got ${width} x ${rowCount}`
    throw new FormatError('too-large', message, { hdu: hdu.index, keyword: 'NAXIS2' })
  }
  if (width === rowSize) return readData(source, hdu, start, rowCount * rowSize)
  if (rowCount === 1) return readData(source, hdu, start + offset, width)
  const out = new Uint8Array(width * rowCount)
  if (rowSize > WIDE_ROW) {
    for (let row = 0; row < rowCount; row++) out.set(source.read(start + row * rowSize + offset, width), row * width)
    return out
  }
  const step = Math.max(1, Math.floor(ROW_BLOCK / Math.max(1, rowSize)))
  for (let done = 0; done < rowCount; done += step) {
    const count = Math.min(step, rowCount - done)
    const block = source.read(start + done * rowSize, (count - 1) * rowSize + offset + width)
    gather(block, out, { offset, width, rowSize, count, at: done * width })
  }
  return out
}

interface Gather {
  readonly offset: number
  readonly width: number
  readonly rowSize: number
  readonly count: number
  readonly at: number
}

function gather(block: Uint8Array, out: Uint8Array, { offset, width, rowSize, count, at }: Gather): void {
  let from = offset
  let to = at
  for (let row = 0; row < count; row++, from += rowSize) {
    if (width > 64) {
      out.set(block.subarray(from, from + width), to)
      to += width
    } else for (let i = 0; i < width; i++) out[to++] = block[from + i] as number
  }
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

/** Bytes that a column takes in the rows of a table, or that one element of a variable-length array takes. */
export function elementSize(column: Column): number {
  return sizeOfElements(column.letter, 1)
}
