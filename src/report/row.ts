/** Tables the program writes, in the order in which they are listed. */
export const TABLE_NAMES = ['spectra', 'features', 'lines', 'findings', 'frames', 'targets'] as const
export type TableName = (typeof TABLE_NAMES)[number]

/** A value of a table; undefined when absent. */
export type Cell = string | number | undefined

/** One row by column name. Numbers are rounded as their column says, so that every format holds the same values. */
export type Row = Readonly<Record<string, Cell>>

export type ColumnKind = 'text' | 'number' | 'integer'

/** A column of a table: the same name, order and meaning in every format. */
export interface ColumnSpec {
  readonly name: string
  readonly kind: ColumnKind
  /** VOUnits string, '' when it has none. */
  readonly unit: string
  /** UCD1+ 1.6, '' where no word fits. */
  readonly ucd: string
  /** Of the IVOA Spectrum Data Model 1.2, where it has one. */
  readonly utype?: string
  /** One sentence without full stop. */
  readonly description: string
  /** Decimals kept of a number, or significant digits when `significant` is true. */
  readonly digits: number
  readonly significant?: boolean
}

/** The number as its column keeps it: finite and rounded, or undefined. A rounded −0 is 0. */
export function roundedNumber(value: number | undefined, column: ColumnSpec): number | undefined {
  if (value === undefined || !Number.isFinite(value)) return undefined
  if (column.kind === 'integer') return Math.round(value) + 0
  if (column.significant) return Number(value.toPrecision(column.digits)) + 0
  if (Math.abs(value) >= 1e15) return value
  return Number(value.toFixed(column.digits)) + 0
}

/** A row of exactly the given columns: numbers rounded, empty text and non-finite numbers absent. */
export function tidyRow(columns: readonly ColumnSpec[], values: Row): Row {
  const row: Record<string, Cell> = {}
  for (const column of columns) {
    const value = values[column.name]
    if (typeof value === 'number') row[column.name] = roundedNumber(value, column)
    else row[column.name] = value === '' ? undefined : value
  }
  return row
}
