import { FormatError } from '../errors.ts'
import { asciiColumns, binaryColumns } from './columns.ts'
import { booleanValue, integerValue, numberValue, textValue } from './header.ts'
import { imageHeader, tableHeader } from './storedHeader.ts'
import type { Bitpix, FitsFault, FitsNote, Hdu, HduKind, Header } from './types.ts'

const BITPIX: readonly number[] = [8, 16, 32, 64, -32, -64]
const MOST_AXES = 999

/** Where the header of an HDU lies. */
export interface HduPlace {
  readonly index: number
  readonly headerByte: number
  readonly dataByte: number
}

/**
 * The HDU that a header announces. Breaches that leave the size of the data unknown throw; those that only make the
 * data unreadable become its `fault`.
 *
 * @throws FormatError 'bitpix', 'naxis' or 'too-large'
 */
export function hduOf(header: Header, place: HduPlace, found: readonly FitsNote[]): Hdu {
  const { index } = place
  const extension = index === 0 ? 'PRIMARY' : (textValue(header, 'XTENSION') ?? '').trim().toUpperCase()
  const bitpix = bitpixOf(header, 'BITPIX', index)
  const dimensions = axesOf(header, 'NAXIS', index)
  const groups = index === 0 && booleanValue(header, 'GROUPS') === true && dimensions[0] === 0
  const dataSize = sizeOf(header, { bitpix, dimensions, groups, extension, index })
  const notes = [...found]
  if (index === 0 && booleanValue(header, 'SIMPLE') === false) {
    notes.push({ code: 'simple-false', text: 'SIMPLE is F: the file says that it departs from the FITS standard' })
  }
  const base = {
    index,
    name: (textValue(header, 'EXTNAME') ?? '').trim(),
    version: integerValue(header, 'EXTVER') ?? 1,
    extension,
    headerByte: place.headerByte,
    dataByte: place.dataByte,
    dataSize,
    notes,
    scale: 1,
    zero: 0,
    rowSize: 0,
    heapByte: place.dataByte + dataSize,
  }
  const array = { ...base, header, bitpix, dimensions, columns: [], rows: 0 }
  if (extension === 'BINTABLE' || extension === 'A3DTABLE') return binaryTable(array)
  if (extension === 'TABLE') return asciiTable(array)
  const image = (extension === 'PRIMARY' && !groups) || extension === 'IMAGE' || extension === 'IUEIMAGE'
  return { ...array, kind: image ? 'image' : 'unknown', ...scalingOf(header, bitpix, notes) }
}

type Unsorted = Omit<Hdu, 'kind'>

function binaryTable(array: Unsorted): Hdu {
  const { header, dimensions, index, dataByte } = array
  const rowSize = dimensions[0] ?? 0
  const rows = dimensions[1] ?? 0
  const heap = integerValue(header, 'THEAP')
  const table = {
    ...array,
    kind: 'table' as HduKind,
    rows,
    rowSize,
    heapByte: dataByte + (heap !== undefined && heap >= rowSize * rows ? heap : rowSize * rows),
  }
  const columns = attempt(() => binaryColumns(header, index))
  if ('fault' in columns) return { ...table, fault: columns.fault }
  const width = columns.value.reduce((sum, column) => sum + column.width, 0)
  const fault = width === rowSize ? {} : { fault: widthFault(rowSize, width) }
  const stored = { header, columns: columns.value, rows, rowSize, dimensions }
  if (booleanValue(header, 'ZIMAGE') === true) {
    const shown = imageHeader(header)
    const notes = [...array.notes]
    const seen = attempt(() => {
      const bitpix = bitpixOf(shown, 'BITPIX', index)
      return { bitpix, dimensions: axesOf(shown, 'NAXIS', index), ...scalingOf(shown, bitpix, notes) }
    })
    if ('fault' in seen) return { ...table, columns: columns.value, fault: seen.fault }
    return {
      ...table,
      ...seen.value,
      kind: 'compressed image',
      header: shown,
      columns: [],
      rows: 0,
      stored,
      notes,
      ...fault,
    }
  }
  if (booleanValue(header, 'ZTABLE') === true) {
    const shown = tableHeader(header)
    const seen = attempt(() => ({ columns: binaryColumns(shown, index), dimensions: axesOf(shown, 'NAXIS', index) }))
    if ('fault' in seen) return { ...table, columns: columns.value, fault: seen.fault }
    const [shownSize = 0, shownRows = 0] = seen.value.dimensions
    const named = { ...table, ...seen.value, header: shown, rows: shownRows, rowSize: shownSize, stored }
    return { ...named, kind: 'compressed table', ...fault }
  }
  return { ...table, columns: columns.value, ...fault }
}

function asciiTable(array: Unsorted): Hdu {
  const [rowSize = 0, rows = 0] = array.dimensions
  const table = { ...array, kind: 'ascii table' as HduKind, rows, rowSize }
  const columns = attempt(() => asciiColumns(array.header, array.index))
  if ('fault' in columns) return { ...table, fault: columns.fault }
  const wide = columns.value.find((column) => column.offset + column.width > rowSize)
  const keyword = wide === undefined ? undefined : `TBCOL${wide.index + 1}`
  const message = `${keyword} requires a field within the ${rowSize} characters of a row, got ${wide?.offset} + ${wide?.width}`
  return {
    ...table,
    columns: columns.value,
    ...(keyword === undefined ? {} : { fault: { code: 'columns', message, keyword } }),
  }
}

function widthFault(rowSize: number, width: number): FitsFault {
  const message = `NAXIS1 requires the ${width} bytes that the columns of a row take, got ${rowSize}`
  return { code: 'row-width', message, keyword: 'NAXIS1' }
}

function attempt<T>(make: () => T): { readonly value: T } | { readonly fault: FitsFault } {
  try {
    return { value: make() }
  } catch (error) {
    if (!(error instanceof FormatError)) throw error
    const { code, message, where } = error
    return { fault: { code, message, ...(where.keyword === undefined ? {} : { keyword: where.keyword }) } }
  }
}

function bitpixOf(header: Header, keyword: string, hdu: number): Bitpix {
  const value = integerValue(header, keyword)
  if (value !== undefined && BITPIX.includes(value)) return value as Bitpix
  const got = String(header.get(keyword)?.value ?? 'none')
  throw new FormatError('bitpix', `${keyword} requires 8, 16, 32, 64, -32 or -64, got ${got}`, { hdu, keyword })
}

function axesOf(header: Header, keyword: string, hdu: number): readonly number[] {
  const axis = (name: string, most: number): number => {
    const value = integerValue(header, name)
    if (value !== undefined && value >= 0 && value <= most) return value
    const rule = name === keyword ? `a count from 0 to ${most}` : 'a length of 0 or more'
    const got = String(header.get(name)?.value ?? 'none')
    throw new FormatError('naxis', `${name} requires ${rule}, got ${got}`, { hdu, keyword: name })
  }
  return Array.from({ length: axis(keyword, MOST_AXES) }, (_, i) => axis(`${keyword}${i + 1}`, Number.MAX_SAFE_INTEGER))
}

interface Announced {
  readonly bitpix: Bitpix
  readonly dimensions: readonly number[]
  readonly groups: boolean
  readonly extension: string
  readonly index: number
}

/** Bytes of the data (FITS 4.0, equations 1, 2 and 4). */
function sizeOf(header: Header, { bitpix, dimensions, groups, extension, index }: Announced): number {
  if (dimensions.length === 0) return 0
  const axes = groups ? dimensions.slice(1) : dimensions
  const elements = groups && axes.length === 0 ? 0 : axes.reduce((product, n) => product * n, 1)
  const plain = extension === 'PRIMARY' && !groups
  const pcount = plain ? 0 : (integerValue(header, 'PCOUNT') ?? 0)
  const gcount = plain ? 1 : (integerValue(header, 'GCOUNT') ?? 1)
  const size = (Math.abs(bitpix) / 8) * gcount * (pcount + elements)
  if (Number.isSafeInteger(size) && size >= 0) return size
  const keyword = pcount < 0 ? 'PCOUNT' : gcount < 0 ? 'GCOUNT' : 'NAXIS1'
  throw new FormatError('too-large', `data requires a size below 2^53 bytes, got ${size}`, { hdu: index, keyword })
}

function scalingOf(header: Header, bitpix: Bitpix, notes: FitsNote[]): Pick<Hdu, 'scale' | 'zero' | 'blank'> {
  const written = header.get('BZERO')?.value
  const zero = typeof written === 'bigint' ? written : (numberValue(header, 'BZERO') ?? 0)
  const scale = numberValue(header, 'BSCALE') ?? 1
  const blank = header.get('BLANK')?.value
  if (blank === undefined) return { scale, zero }
  if (bitpix < 0) {
    notes.push({ code: 'blank-on-floats', text: `BLANK ${String(blank)} is left aside: it applies to integers only` })
    return { scale, zero }
  }
  const number = typeof blank === 'bigint' ? blank : numberValue(header, 'BLANK')
  if (typeof number === 'bigint') return { scale, zero, blank: number }
  return number !== undefined && Number.isInteger(number) ? { scale, zero, blank: BigInt(number) } : { scale, zero }
}
