import { COLUMNS } from './columns.ts'
import type { Cell, Row, TableName } from './row.ts'

/** Beginnings that a spreadsheet would take for a formula (OWASP, "CSV Injection"). */
const FORMULA_START = /^[=+\-@\t\r]/
const NEEDS_QUOTES = /[",\r\n]/

function csvCell(cell: Cell): string {
  if (cell === undefined) return ''
  if (typeof cell === 'number') return String(cell)
  const safe = FORMULA_START.test(cell) ? `'${cell}` : cell
  return NEEDS_QUOTES.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
}

/** The header record of a table in CSV (RFC 4180: comma, double quotes, lines end in CRLF; UTF-8). */
export function csvHead(name: TableName): string {
  return COLUMNS[name].map((column) => column.name).join(',') + '\r\n'
}

/**
 * Rows as CSV records. An absent value is an empty cell. A text that begins with = + - @, tab or return gets an
 * apostrophe in front, so that no spreadsheet runs it.
 */
export function csvLines(name: TableName, rows: readonly Row[]): string {
  const names = COLUMNS[name].map((column) => column.name)
  return rows.map((row) => names.map((column) => csvCell(row[column])).join(',') + '\r\n').join('')
}
