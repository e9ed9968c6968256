import { sizeOfElements } from './columns.ts'
import { storedValues, physicalValues } from './stored.ts'
import type { NumberLetter } from './stored.ts'
import { textOf, trimmedText } from './text.ts'
import type { Column, ColumnValues } from './types.ts'

const UNSIGNED_64 = 2 ** 63
const TRUE = 84
const FALSE = 70

/**
 * Values of a column's cells that lie one after another.
 *
 * @param bytes  rows x the bytes of `repeat` elements
 * @param repeat elements a cell
 */
export function cellValues(bytes: Uint8Array, column: Column, repeat: number): ColumnValues {
  const { letter } = column
  switch (letter) {
    case 'A':
      return textCells(bytes, column, repeat)
    case 'L':
      return { kind: 'logicals', repeat, values: Array.from(bytes, logicalOf) }
    case 'X':
      return { kind: 'bits', repeat, values: bitsOf(bytes, repeat) }
    case 'C':
    case 'M':
      return { kind: 'complex', repeat, ...complexOf(bytes, column) }
    case 'K':
      if (column.scale === 1 && (column.zero === 0 || column.zero === UNSIGNED_64))
        return exactOf(bytes, column, repeat)
  }
  const { scale, zero } = column
  const empty = typeof column.nullValue === 'bigint' ? column.nullValue : undefined
  return { kind: 'numbers', repeat, values: physicalValues(bytes, letter as NumberLetter, { scale, zero, empty }) }
}

function logicalOf(byte: number): boolean | undefined {
  return byte === TRUE ? true : byte === FALSE ? false : undefined
}

function exactOf(bytes: Uint8Array, column: Column, repeat: number): ColumnValues {
  const stored = storedValues(bytes, 'K') as BigInt64Array
  const { nullValue } = column
  const marked =
    typeof nullValue === 'bigint' ? { nulls: Uint8Array.from(stored, (v) => (v === nullValue ? 1 : 0)) } : {}
  if (column.zero === 0) return { kind: 'integers', repeat, values: stored, ...marked }
  const values = new BigUint64Array(stored.buffer)
  for (let i = 0; i < values.length; i++) values[i] = (values[i] as bigint) ^ (1n << 63n)
  return { kind: 'integers', repeat, values, ...marked }
}

function complexOf(bytes: Uint8Array, { letter, scale, zero }: Column): { re: Float64Array; im: Float64Array } {
  const stored = storedValues(bytes, letter === 'C' ? 'E' : 'D') as Float32Array | Float64Array
  const re = new Float64Array(stored.length >> 1)
  const im = new Float64Array(re.length)
  for (let i = 0; i < re.length; i++) {
    re[i] = zero + scale * (stored[2 * i] as number)
    im[i] = scale * (stored[2 * i + 1] as number)
  }
  return { re, im }
}

function bitsOf(bytes: Uint8Array, repeat: number): Uint8Array {
  const width = sizeOfElements('X', repeat)
  const rows = width === 0 ? 0 : Math.floor(bytes.length / width)
  const bits = new Uint8Array(rows * repeat)
  for (let row = 0; row < rows; row++) {
    for (let i = 0; i < repeat; i++) {
      bits[row * repeat + i] = ((bytes[row * width + (i >> 3)] as number) >> (7 - (i & 7))) & 1
    }
  }
  return bits
}

/** Text cells; a cell holds several strings where TDIMn or the rAw form says how long each is. */
function textCells(bytes: Uint8Array, column: Column, repeat: number): ColumnValues {
  if (repeat <= 0) return { kind: 'text', repeat: 0, values: [] }
  const each = stringLength(column, repeat)
  const strings = Math.floor(repeat / each)
  const rows = Math.floor(bytes.length / repeat)
  const text = textOf(bytes)
  const values: string[] = []
  for (let row = 0; row < rows; row++) {
    for (let i = 0; i < strings; i++) {
      const from = row * repeat + i * each
      values.push(trimmedText(text.slice(from, from + each)))
    }
  }
  return { kind: 'text', repeat: strings, values }
}

function stringLength(column: Column, repeat: number): number {
  const written = /A(\d+)$/.exec(column.form.trim())
  const length = column.shape[0] ?? (written && !column.descriptor ? Number(written[1]) : repeat)
  return length > 0 && length <= repeat ? length : repeat
}
