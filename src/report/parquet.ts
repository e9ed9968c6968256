import { parquetWriteBuffer } from 'hyparquet-writer'
import { COLUMNS, TABLE_TITLES } from './columns.ts'
import type { ColumnSpec, Row, TableName } from './row.ts'

const TYPES = { text: 'STRING', number: 'DOUBLE', integer: 'INT32' } as const

/** Unit, UCD and description of a column, for the file's key-value metadata. */
const described = ({ name, unit, ucd, description }: ColumnSpec): object => ({ name, unit, ucd, description })

/**
 * A table as a Parquet file (Snappy pages, 100,000 rows a group). Absent values are null. The key-value metadata hold
 * the table's title and, under `columns`, unit, UCD and description of each column as JSON.
 */
export function encodeParquet(name: TableName, rows: readonly Row[]): Uint8Array {
  const columns = COLUMNS[name]
  const buffer = parquetWriteBuffer({
    columnData: columns.map((column) => ({
      name: column.name,
      data: rows.map((row) => row[column.name] ?? null),
      type: TYPES[column.kind],
      nullable: true,
    })),
    rowGroupSize: 100_000,
    kvMetadata: [
      { key: 'title', value: TABLE_TITLES[name] },
      { key: 'columns', value: JSON.stringify(columns.map(described)) },
    ],
    createdBy: 'darkline',
  })
  return new Uint8Array(buffer)
}
