import { FormatError } from '../errors.ts'
import { integerValue, numberValue, textValue } from './header.ts'
import type { Column, Header } from './types.ts'

/** Bytes of one element of each letter of TFORMn (FITS 4.0, table 18); X takes one bit. */
export const ELEMENT_SIZE: Readonly<Record<string, number>> = {
  L: 1,
  B: 1,
  I: 2,
  J: 4,
  K: 8,
  A: 1,
  E: 4,
  D: 8,
  C: 8,
  M: 16,
}

const MOST_COLUMNS = 999
const VARIABLE = -1

/** Bytes that `count` elements of a letter fill. */
export function sizeOfElements(letter: string, count: number): number {
  return letter === 'X' ? Math.ceil(count / 8) : count * (ELEMENT_SIZE[letter] ?? 0)
}

/**
 * The columns of a binary table as its header describes them. With `form` 'ZFORM' the columns of a compressed table
 * as it was before compression.
 *
 * @throws FormatError 'columns' when TFIELDS, TFORMn or their sum breaks the rules
 */
export function binaryColumns(header: Header, hdu: number, form: 'TFORM' | 'ZFORM' = 'TFORM'): readonly Column[] {
  const columns: Column[] = []
  let offset = 0
  const count = fieldCount(header, hdu)
  for (let n = 1; n <= count; n++) {
    const text = requireForm(header, hdu, `${form}${n}`, count)
    const parsed = /^\s*(\d*)\s*([LXBIJKAEDCMPQ])(.*)$/i.exec(text)
    if (!parsed) throw badForm(hdu, `${form}${n}`, 'a repeat count and one of L X B I J K A E D C M P Q', text)
    const [, digits = '', written = '', rest = ''] = parsed
    const letter = written.toUpperCase()
    const repeat = digits === '' ? 1 : Number(digits)
    const descriptor = letter === 'P' || letter === 'Q' ? letter : undefined
    const element = descriptor ? rest.trim().charAt(0).toUpperCase() : letter
    if (descriptor && ELEMENT_SIZE[element] === undefined && element !== 'X') {
      throw badForm(hdu, `${form}${n}`, 'the letter of an element type after P or Q', text)
    }
    const width = descriptor ? Math.min(repeat, 1) * (descriptor === 'P' ? 8 : 16) : sizeOfElements(letter, repeat)
    columns.push({
      ...described(header, n),
      letter: element,
      repeat: descriptor ? (repeat === 0 ? 0 : VARIABLE) : repeat,
      form: text,
      offset,
      width,
      shape: shapeOf(header, n),
      ...(descriptor && repeat > 0 ? { descriptor } : {}),
      ...nullOf(header, n, element),
    })
    offset += width
  }
  return columns
}

/**
 * The columns of an ASCII table: TBCOLn and the Fortran forms Aw, Iw, Fw.d, Ew.d and Dw.d.
 *
 * @throws FormatError 'columns' when TFIELDS, TFORMn or TBCOLn breaks the rules
 */
export function asciiColumns(header: Header, hdu: number): readonly Column[] {
  const columns: Column[] = []
  const count = fieldCount(header, hdu)
  for (let n = 1; n <= count; n++) {
    const text = requireForm(header, hdu, `TFORM${n}`, count)
    const parsed = /^\s*([AIFED])\s*(\d+)/i.exec(text)
    if (!parsed) throw badForm(hdu, `TFORM${n}`, 'A, I, F, E or D and a width', text)
    const start = integerValue(header, `TBCOL${n}`)
    if (start === undefined || start < 1) {
      throw badForm(hdu, `TBCOL${n}`, 'a column of characters from 1', String(header.get(`TBCOL${n}`)?.value ?? 'none'))
    }
    const empty = textValue(header, `TNULL${n}`)
    columns.push({
      ...described(header, n),
      letter: (parsed[1] ?? '').toUpperCase(),
      repeat: 1,
      form: text,
      offset: start - 1,
      width: Number(parsed[2]),
      shape: [],
      ...(empty === undefined ? {} : { nullValue: empty }),
    })
  }
  return columns
}

function fieldCount(header: Header, hdu: number): number {
  const count = integerValue(header, 'TFIELDS')
  if (count !== undefined && count >= 0 && count <= MOST_COLUMNS) return count
  throw badForm(hdu, 'TFIELDS', `a count of columns from 0 to ${MOST_COLUMNS}`, String(header.get('TFIELDS')?.value))
}

function requireForm(header: Header, hdu: number, keyword: string, count: number): string {
  const text = textValue(header, keyword)
  if (text !== undefined) return text
  throw badForm(
    hdu,
    keyword,
    `the form of a column, since TFIELDS is ${count}`,
    String(header.get(keyword)?.value ?? 'none'),
  )
}

function badForm(hdu: number, keyword: string, rule: string, got: string): FormatError {
  return new FormatError('columns', `${keyword} requires ${rule}, got ${got}`, { hdu, keyword })
}

type Described = 'index' | 'name' | 'unit' | 'scale' | 'zero' | 'display' | 'ucd' | 'utype'

function described(header: Header, n: number): Pick<Column, Described> {
  return {
    index: n - 1,
    name: (textValue(header, `TTYPE${n}`) ?? '').trim(),
    unit: (textValue(header, `TUNIT${n}`) ?? '').trim(),
    scale: numberValue(header, `TSCAL${n}`) ?? 1,
    zero: numberValue(header, `TZERO${n}`) ?? 0,
    display: textValue(header, `TDISP${n}`) ?? '',
    ucd: textValue(header, `TUCD${n}`) ?? '',
    utype: textValue(header, `TUTYP${n}`) ?? textValue(header, `TUTYPE${n}`) ?? '',
  }
}

function shapeOf(header: Header, n: number): readonly number[] {
  const text = textValue(header, `TDIM${n}`)
  const inside = text === undefined ? null : /^\s*\(([\d\s,]+)\)\s*$/.exec(text)
  return inside ? (inside[1] ?? '').split(',').map(Number) : []
}

function nullOf(header: Header, n: number, letter: string): { nullValue?: bigint } {
  if (!'BIJK'.includes(letter)) return {}
  const value = header.get(`TNULL${n}`)?.value
  if (typeof value === 'bigint') return { nullValue: value }
  const number = numberValue(header, `TNULL${n}`)
  return number !== undefined && Number.isInteger(number) ? { nullValue: BigInt(number) } : {}
}
