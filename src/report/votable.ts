import { COLUMNS, TABLE_TITLES } from './columns.ts'
import type { Cell, ColumnSpec, Row, TableName } from './row.ts'

/** One table to stand in a VOTable document. */
export interface NamedRows {
  readonly name: TableName
  readonly rows: readonly Row[]
}

const DATATYPES = {
  text: 'datatype="unicodeChar" arraysize="*"',
  number: 'datatype="double"',
  integer: 'datatype="int"',
} as const

/** Everything but the characters that XML 1.0 allows (production 2, "Char"), and lone surrogates. */
const NOT_XML = /[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu

/** Text for an element or a quoted attribute; what XML cannot hold becomes U+FFFD. */
export function xmlText(text: string): string {
  return text
    .replace(NOT_XML, '\ufffd')
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll('\r', '&#13;')
}

function field(column: ColumnSpec): string {
  const { name, kind, unit, ucd, utype, description } = column
  const optional = [
    ['unit', unit],
    ['ucd', ucd],
    ['utype', utype ?? ''],
  ]
    .filter(([, value]) => value !== '')
    .map(([key, value]) => ` ${key}="${xmlText(value)}"`)
    .join('')
  return `<FIELD ID="${name}" name="${name}" ${DATATYPES[kind]}${optional}><DESCRIPTION>${xmlText(description)}</DESCRIPTION></FIELD>\n`
}

const cell = (value: Cell): string => (value === undefined ? '<TD/>' : `<TD>${xmlText(String(value))}</TD>`)

/**
 * Tables as one VOTable 1.4 document (IVOA 2019-10-21), data as TABLEDATA. Absent values are empty cells, which the
 * standard reads as null since version 1.3.
 */
export function encodeVotable(tables: readonly NamedRows[]): string {
  const several = tables.length > 1
  const body = tables.map(({ name, rows }) => {
    const columns = COLUMNS[name]
    const fields = columns.map(field).join('')
    const lines = rows.map((row) => `<TR>${columns.map((column) => cell(row[column.name])).join('')}</TR>\n`).join('')
    const named = several ? fields.replaceAll('FIELD ID="', `FIELD ID="${name}.`) : fields
    return (
      `<TABLE name="${name}" nrows="${rows.length}">\n<DESCRIPTION>${xmlText(TABLE_TITLES[name])}</DESCRIPTION>\n` +
      `${named}<DATA><TABLEDATA>\n${lines}</TABLEDATA></DATA>\n</TABLE>\n`
    )
  })
  return (
    '<?xml version="1.0" encoding="UTF-8"?>\n' +
    '<VOTABLE version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3">\n' +
    `<RESOURCE>\n${body.join('')}</RESOURCE>\n</VOTABLE>\n`
  )
}
