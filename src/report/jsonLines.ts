import { COLUMNS } from './columns.ts'
import type { Row, TableName } from './row.ts'

/** Rows as JSON Lines: one object a line with every column of the table in order; an absent value is null. */
export function jsonLines(name: TableName, rows: readonly Row[]): string {
  const names = COLUMNS[name].map((column) => column.name)
  return rows
    .map((row) => JSON.stringify(Object.fromEntries(names.map((column) => [column, row[column] ?? null]))) + '\n')
    .join('')
}
