import type { FitsColumnInput } from '../fits/writeTable.ts'
import { encodeFits } from '../fits/write.ts'
import { asciiText } from './asciiText.ts'
import { COLUMNS, TABLE_TITLES } from './columns.ts'
import type { Cell, ColumnSpec, Row, TableName } from './row.ts'

/** Stands for an absent integer (TNULLn); no count, HDU or row comes near it. */
const ABSENT_INTEGER = -2147483648

function columnOf(column: ColumnSpec, rows: readonly Row[]): FitsColumnInput {
  const { name, kind, unit, ucd, utype, description } = column
  const facts = {
    name,
    comment: asciiText(description),
    ...(unit === '' ? {} : { unit }),
    ...(ucd === '' ? {} : { ucd }),
    ...(utype === undefined ? {} : { utype }),
  }
  const cells: Cell[] = rows.map((row) => row[name])
  if (kind === 'text')
    return { ...facts, letter: 'A', values: cells.map((c) => (c === undefined ? undefined : asciiText(String(c)))) }
  const numbers = cells.map((c) => (typeof c === 'number' ? c : undefined))
  if (kind === 'integer') return { ...facts, letter: 'J', values: numbers, nullValue: ABSENT_INTEGER }
  return { ...facts, letter: 'D', values: numbers }
}

/**
 * A table as a FITS binary table with TUNITn, TUCDn, TUTYPn, TNULLn and checksums. An absent number is NaN, an absent
 * integer TNULLn, an absent text blank. Text is in ASCII, as the standard wants it (see `asciiText`).
 */
export function encodeFitsTable(name: TableName, rows: readonly Row[]): Uint8Array {
  return encodeFits([
    {
      kind: 'table',
      name: name.toUpperCase(),
      rows: rows.length,
      columns: COLUMNS[name].map((column) => columnOf(column, rows)),
      cards: [{ keyword: 'TITLE', value: TABLE_TITLES[name], comment: '' }],
    },
  ])
}
