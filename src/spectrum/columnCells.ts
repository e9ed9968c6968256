import { numbersOf, readColumn } from '../fits/table.ts'
import type { ByteSource, Column, Hdu } from '../fits/types.ts'

/** The numbers of a scalar column, one a row. Empty for columns that hold no numbers. */
export function columnNumbers(source: ByteSource, hdu: Hdu, column: Column): Float64Array {
  return numbersOf(readColumn(source, hdu, column)) ?? new Float64Array(0)
}

/** The numbers of one cell, of fixed or variable length. Empty for cells that hold no numbers. */
export function cellNumbers(source: ByteSource, hdu: Hdu, column: Column, row: number): Float64Array {
  const values = readColumn(source, hdu, column, { firstRow: row, rowCount: 1 })
  const only = values.kind === 'variable' ? values.cells[0] : values
  return (only && numbersOf(only)) ?? new Float64Array(0)
}

/** The text of one cell, trimmed, or its number as text; undefined when blank. */
export function cellText(source: ByteSource, hdu: Hdu, column: Column, row: number): string | undefined {
  const values = readColumn(source, hdu, column, { firstRow: row, rowCount: 1 })
  const text = values.kind === 'text' ? values.values[0] : numbersOf(values)?.[0]
  return text === undefined || String(text).trim() === '' ? undefined : String(text).trim()
}
