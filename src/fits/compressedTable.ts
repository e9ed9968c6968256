import { FormatError } from '../errors.ts'
import { bigEndianOf } from './bigEndian.ts'
import { cellValues } from './cells.ts'
import { ELEMENT_SIZE, sizeOfElements } from './columns.ts'
import { integerValue, textValue } from './header.ts'
import { joinedBytes } from './joinedBytes.ts'
import { decodeRice } from './rice.ts'
import type { PixelSize } from './rice.ts'
import { readCells } from './rows.ts'
import type { RowRange } from './rows.ts'
import { gunzipped, unshuffled } from './shuffle.ts'
import type { ByteSource, Column, ColumnValues, Hdu, StoredTable } from './types.ts'
import { descriptorsOf, heapArray } from './variable.ts'

/** Bytes that GZIP_2 shuffles together: those of an element; complex numbers are left in order (as fpack 1.7 does). */
const SHUFFLED: Readonly<Record<string, number>> = { ...ELEMENT_SIZE, C: 1, M: 1 }

const RICE_BLOCK = 32
const LONG_DESCRIPTOR = 16

/**
 * Values of a column of a compressed table (FITS 4.0, section 10.3): every tile of ZTILELEN rows keeps the cells of a
 * column together, packed with GZIP_1, GZIP_2, RICE_1 or not at all. Only the tiles that hold wanted rows are read.
 *
 * @throws FormatError 'compression' when the algorithm or the code cannot be understood
 */
export function readCompressedColumn(source: ByteSource, hdu: Hdu, column: Column, rows: RowRange): ColumnValues {
  const { header, columns, rows: tiles, rowSize } = hdu.stored as StoredTable
  const table: Hdu = { ...hdu, kind: 'table', header, columns, rows: tiles, rowSize }
  const packed = columns[column.index]
  const length = integerValue(header, 'ZTILELEN') ?? hdu.rows
  if (!packed?.descriptor || length < 1) {
    const message = `ZTILELEN requires tiles of 1 row or more in variable-length columns, got ${length}`
    throw new FormatError('compression', message, { hdu: hdu.index, keyword: 'ZTILELEN' })
  }
  const last = rows.rowCount === 0 ? -1 : Math.floor((rows.firstRow + rows.rowCount - 1) / length)
  if (last >= tiles) {
    const message = `NAXIS2 requires ${last + 1} tiles of ${length} rows, got ${tiles}`
    throw new FormatError('compression', message, { hdu: hdu.index, keyword: 'NAXIS2' })
  }
  const algorithm = (textValue(header, `ZCTYP${column.index + 1}`) ?? 'GZIP_2').trim()
  const reader: TileReader = { source, table, packed, column, algorithm }
  const parts: Uint8Array[] = []
  const cells: ColumnValues[] = []
  for (let tile = Math.floor(rows.firstRow / length); tile <= last; tile++) {
    const count = Math.min(length, hdu.rows - tile * length)
    const from = Math.max(0, rows.firstRow - tile * length)
    const to = Math.min(count, rows.firstRow + rows.rowCount - tile * length)
    if (column.descriptor) cells.push(...variableCells(reader, { tile, count, from, to }))
    else parts.push(fixedCells(reader, tile, count).subarray(from * column.width, to * column.width))
  }
  return column.descriptor ? { kind: 'variable', cells } : cellValues(joinedBytes(parts), column, column.repeat)
}

interface TileReader {
  readonly source: ByteSource
  readonly table: Hdu
  readonly packed: Column
  readonly column: Column
  readonly algorithm: string
}

function tileCode({ source, table, packed }: TileReader, tile: number): Uint8Array {
  const bytes = readCells(source, table, packed, { firstRow: tile, rowCount: 1 })
  const [count = 0, offset = 0] = descriptorsOf(bytes, packed.descriptor ?? 'P')
  return heapArray(source, table, packed, { count, offset, row: tile })
}

function fixedCells(reader: TileReader, tile: number, count: number): Uint8Array {
  const size = count * reader.column.width
  if (size === 0) return new Uint8Array(0)
  return unpacked(reader, tileCode(reader, tile), size, tile)
}

/** The bytes of cells or of one array, as they were before compression. */
function unpacked({ table, column, algorithm }: TileReader, code: Uint8Array, size: number, tile: number): Uint8Array {
  const { letter } = column
  const where = { hdu: table.index, row: tile, keyword: `ZCTYP${column.index + 1}` }
  let bytes: Uint8Array
  try {
    if (algorithm === 'NOCOMPRESS') bytes = code
    else if (algorithm === 'GZIP_1') bytes = gunzipped(code, size)
    else if (algorithm === 'GZIP_2') bytes = unshuffled(gunzipped(code, size), SHUFFLED[letter] ?? 1)
    else if (algorithm === 'RICE_1' && (letter === 'B' || letter === 'I' || letter === 'J')) {
      const pixelSize = (ELEMENT_SIZE[letter] ?? 1) as PixelSize
      const values = decodeRice(code, { pixels: size / pixelSize, pixelSize, blockSize: RICE_BLOCK })
      bytes =
        pixelSize === 4
          ? bigEndianOf(values)
          : pixelSize === 2
            ? bigEndianOf(Int16Array.from(values))
            : Uint8Array.from(values)
    } else {
      throw new FormatError(
        'compression',
        `ZCTYPn of ${letter} requires GZIP_1, GZIP_2, RICE_1 or NOCOMPRESS, got ${algorithm}`,
      )
    }
  } catch (error) {
    if (!(error instanceof FormatError)) throw error
    throw new FormatError(error.code, error.message, where, { cause: error })
  }
  if (bytes.length === size) return bytes
  throw new FormatError('compression', `tile requires ${size} bytes, got ${bytes.length}`, where)
}

interface TileRows {
  readonly tile: number
  readonly count: number
  readonly from: number
  readonly to: number
}

/**
 * Variable-length arrays of a tile: its code unpacks to the descriptors of the arrays as they were, then to those of the
 * packed arrays (64-bit), as files in use have it (checked against fpack 1.7; FITS 4.0, section 10.3.6).
 */
function variableCells(reader: TileReader, { tile, count, from, to }: TileRows): readonly ColumnValues[] {
  const { source, table, packed, column } = reader
  const kind = column.descriptor ?? 'P'
  const size = count * (LONG_DESCRIPTOR + (kind === 'P' ? LONG_DESCRIPTOR / 2 : LONG_DESCRIPTOR))
  const bytes = gunzipped(tileCode(reader, tile), size)
  if (bytes.length !== size) {
    const message = `descriptors of a tile require ${size} bytes, got ${bytes.length}`
    throw new FormatError('compression', message, { hdu: table.index, row: tile })
  }
  const split = size - count * LONG_DESCRIPTOR
  const original = descriptorsOf(bytes.subarray(0, split), kind)
  const stored = descriptorsOf(bytes.subarray(split), 'Q')
  const cells: ColumnValues[] = []
  for (let i = from; i < to; i++) {
    const elements = original[2 * i] as number
    const place = { count: stored[2 * i] as number, offset: stored[2 * i + 1] as number, row: tile }
    const whole = sizeOfElements(column.letter, Math.max(0, elements))
    const code = heapArray(source, table, packed, place)
    const data = whole === 0 ? code.subarray(0, 0) : code.length === whole ? code : unpacked(reader, code, whole, tile)
    cells.push(cellValues(data, column, elements))
  }
  return cells
}
