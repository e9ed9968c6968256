import { bigEndianOf } from './bigEndian.ts'
import { sizeOfElements } from './columns.ts'
import type { FitsCardInput } from './writeCard.ts'
import { integerBytes } from './writeImage.ts'

interface ColumnFacts {
  readonly name: string
  readonly unit?: string
  readonly ucd?: string
  readonly utype?: string
  /** TDISPn. */
  readonly display?: string
  /** What the column holds, written as the comment of its name. */
  readonly comment?: string
  /** TDIMn, fastest first. */
  readonly shape?: readonly number[]
}

/**
 * A column to write: `rows` x `repeat` values (repeat is 1 unless given; of text the characters a cell, by default
 * those of the longest). Undefined entries and NaN become `nullValue` in integer columns, NaN in floating-point ones,
 * blanks in text and a zero byte in logicals. Characters of text outside printable ASCII become '?', since FITS allows
 * no others in a table.
 */
export type FitsColumnInput =
  | (ColumnFacts & { readonly letter: 'A'; readonly repeat?: number; readonly values: readonly (string | undefined)[] })
  | (ColumnFacts & {
      readonly letter: 'L'
      readonly repeat?: number
      readonly values: readonly (boolean | undefined)[]
    })
  | (ColumnFacts & {
      readonly letter: 'B' | 'I' | 'J' | 'E' | 'D'
      readonly repeat?: number
      readonly values: ArrayLike<number | undefined>
      readonly nullValue?: number
    })
  | (ColumnFacts & {
      readonly letter: 'K'
      readonly repeat?: number
      readonly values: ArrayLike<number | bigint | undefined>
      readonly nullValue?: number | bigint
    })

/** A binary table to write. */
export interface FitsTableInput {
  readonly kind: 'table'
  readonly name?: string
  readonly rows: number
  readonly columns: readonly FitsColumnInput[]
  readonly cards?: readonly FitsCardInput[]
}

const LOWEST_64 = -(1n << 63n)
const HIGHEST_64 = (1n << 63n) - 1n

/** Elements a cell of a column: of text the characters. */
function repeatOf(column: FitsColumnInput): number {
  if (column.repeat !== undefined) return column.repeat
  if (column.letter !== 'A') return 1
  return column.values.reduce((longest, text) => Math.max(longest, text?.length ?? 0), 1)
}

/** The cards that describe a binary table after XTENSION. */
export function tableCards(table: FitsTableInput): readonly FitsCardInput[] {
  const width = table.columns.reduce((sum, column) => sum + sizeOfElements(column.letter, repeatOf(column)), 0)
  return [
    { keyword: 'BITPIX', value: 8, comment: 'bytes' },
    { keyword: 'NAXIS', value: 2, comment: 'rows and the bytes of a row' },
    { keyword: 'NAXIS1', value: width, comment: 'bytes of a row' },
    { keyword: 'NAXIS2', value: table.rows, comment: 'rows' },
    { keyword: 'PCOUNT', value: 0, comment: 'no heap' },
    { keyword: 'GCOUNT', value: 1, comment: 'one table' },
    { keyword: 'TFIELDS', value: table.columns.length, comment: 'columns' },
    ...(table.name === undefined ? [] : [{ keyword: 'EXTNAME', value: table.name, comment: 'name of this table' }]),
    ...table.columns.flatMap((column, i) => columnCards(column, i + 1)),
  ]
}

function columnCards(column: FitsColumnInput, n: number): readonly FitsCardInput[] {
  const { name, unit, ucd, utype, display, comment = '', shape } = column
  const empty = 'nullValue' in column ? column.nullValue : undefined
  const optional = (keyword: string, value: string | number | bigint | undefined): readonly FitsCardInput[] =>
    value === undefined || value === '' ? [] : [{ keyword: `${keyword}${n}`, value }]
  return [
    { keyword: `TTYPE${n}`, value: name, comment },
    { keyword: `TFORM${n}`, value: `${repeatOf(column)}${column.letter}` },
    ...optional('TUNIT', unit),
    ...optional('TNULL', empty),
    ...optional('TDISP', display),
    ...optional('TDIM', shape && shape.length > 0 ? `(${shape.join(',')})` : undefined),
    ...optional('TUCD', ucd),
    ...optional('TUTYP', utype),
  ]
}

/**
 * The stored rows of a binary table.
 *
 * @throws RangeError when a column has another number of values than its rows need, or a value does not fit
 */
export function tableBytes(table: FitsTableInput): Uint8Array {
  const columns = table.columns.map((column) => ({ bytes: columnBytes(column, table.rows), width: 0 }))
  const widths = table.columns.map((column) => sizeOfElements(column.letter, repeatOf(column)))
  const rowSize = widths.reduce((sum, width) => sum + width, 0)
  const out = new Uint8Array(rowSize * table.rows)
  let offset = 0
  columns.forEach(({ bytes }, i) => {
    const width = widths[i] as number
    for (let row = 0; row < table.rows; row++) {
      out.set(bytes.subarray(row * width, (row + 1) * width), row * rowSize + offset)
    }
    offset += width
  })
  return out
}

function columnBytes(column: FitsColumnInput, rows: number): Uint8Array {
  const repeat = repeatOf(column)
  const count = column.letter === 'A' ? rows : rows * repeat
  if (column.values.length !== count) {
    throw new RangeError(`column ${column.name} requires ${count} values, got ${column.values.length}`)
  }
  try {
    switch (column.letter) {
      case 'A':
        return textBytes(column.values, repeat)
      case 'L':
        return Uint8Array.from(column.values, (value) => (value === undefined ? 0 : value ? 84 : 70))
      case 'E':
        return bigEndianOf(Float32Array.from(plain(column.values)))
      case 'D':
        return bigEndianOf(Float64Array.from(plain(column.values)))
      case 'K':
        return wideBytes(column.values, column.nullValue)
      default:
        return integerBytes(plain(column.values), BITS[column.letter], column.nullValue)
    }
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    throw new RangeError(`column ${column.name}: ${error.message}`, { cause: error })
  }
}

const BITS = { B: 8, I: 16, J: 32 } as const

function plain(values: ArrayLike<number | undefined>): Float64Array {
  return Float64Array.from({ length: values.length }, (_, i) => values[i] ?? NaN)
}

function wideBytes(values: ArrayLike<number | bigint | undefined>, empty: number | bigint | undefined): Uint8Array {
  const whole = Array.from({ length: values.length }, (_, i) => {
    const given = values[i]
    const value = given === undefined || Number.isNaN(given) ? empty : given
    const exact =
      typeof value === 'bigint' ? value : Number.isFinite(value) ? BigInt(Math.round(value as number)) : undefined
    if (exact === undefined || exact < LOWEST_64 || exact > HIGHEST_64) {
      throw new RangeError(`integer of 64 bits requires a value from -2^63 to 2^63 - 1, got ${given}`)
    }
    return exact
  })
  return bigEndianOf(BigInt64Array.from(whole))
}

function textBytes(values: readonly (string | undefined)[], width: number): Uint8Array {
  const out = new Uint8Array(values.length * width).fill(32)
  values.forEach((text = '', row) => {
    if (text.length > width) throw new RangeError(`text requires at most ${width} characters, got ${text.length}`)
    for (let i = 0; i < text.length; i++) {
      const code = text.charCodeAt(i)
      out[row * width + i] = code < 32 || code > 126 ? 63 : code
    }
  })
  return out
}
