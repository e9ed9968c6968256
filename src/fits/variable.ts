import { FormatError } from '../errors.ts'
import { int32Of, int64Of } from './bigEndian.ts'
import { cellValues } from './cells.ts'
import { sizeOfElements } from './columns.ts'
import { readData } from './source.ts'
import type { ByteSource, Column, ColumnValues, Hdu } from './types.ts'

/** Stored descriptors of a column's cells, and the row of the first. */
export interface Descriptors {
  readonly descriptors: Uint8Array
  readonly firstRow: number
}

/** Element count and heap offset of every descriptor (FITS 4.0, section 7.3.5), as plain numbers. */
export function descriptorsOf(bytes: Uint8Array, kind: 'P' | 'Q'): Float64Array {
  if (kind === 'P') return Float64Array.from(int32Of(bytes))
  const wide = int64Of(bytes)
  return Float64Array.from({ length: wide.length }, (_, i) => Number(wide[i]))
}

/**
 * The arrays of a variable-length column, one a row; read from the heap row by row.
 *
 * @throws FormatError 'heap' when a descriptor points outside the heap (the row is named), 'truncated-data'
 */
export function readVariable(source: ByteSource, hdu: Hdu, column: Column, at: Descriptors): ColumnValues {
  const pairs = descriptorsOf(at.descriptors, column.descriptor ?? 'P')
  const cells: ColumnValues[] = []
  let total = 0
  for (let i = 0; 2 * i < pairs.length; i++) {
    const count = pairs[2 * i] as number
    const bytes = heapArray(source, hdu, column, { count, offset: pairs[2 * i + 1] as number, row: at.firstRow + i })
    total += bytes.length
    if (total > MOST_BYTES) {
      const message = `column requires at most ${MOST_BYTES} bytes of arrays at once, got more by row ${at.firstRow + i}`
      throw new FormatError('too-large', message, { hdu: hdu.index, row: at.firstRow + i })
    }
    cells.push(cellValues(bytes, column, count))
  }
  return { kind: 'variable', cells }
}

const MOST_BYTES = 2 ** 27

/** Where one array lies in the heap. */
export interface HeapPlace {
  readonly count: number
  readonly offset: number
  readonly row: number
}

/** The stored bytes of one array of the heap; an array without elements needs no place there. */
export function heapArray(source: ByteSource, hdu: Hdu, column: Column, { count, offset, row }: HeapPlace): Uint8Array {
  if (count === 0) return new Uint8Array(0)
  const length = sizeOfElements(column.letter, count)
  const heapSize = hdu.dataByte + hdu.dataSize - hdu.heapByte
  if (count < 0 || offset < 0 || offset + length > heapSize) {
    const message = `descriptor of row ${row} requires an array within the heap of ${heapSize} bytes, got ${count} elements from ${offset}`
    throw new FormatError('heap', message, { hdu: hdu.index, row, keyword: `TFORM${column.index + 1}` })
  }
  return readData(source, hdu, hdu.heapByte + offset, length)
}
