import { FormatError } from '../errors.ts'
import { int32Of } from './bigEndian.ts'
import { dequantized } from './dither.ts'
import type { Quantization } from './dither.ts'
import { decodeHcompress } from './hcompress.ts'
import { integerValue, numberValue, textValue } from './header.ts'
import { decodePlio } from './plio.ts'
import { decodeRice } from './rice.ts'
import type { PixelSize } from './rice.ts'
import { readCells } from './rows.ts'
import { gunzipped, unshuffled } from './shuffle.ts'
import { physicalValues } from './stored.ts'
import type { NumberLetter } from './stored.ts'
import type { Bitpix, ByteSource, Column, Hdu, StoredTable } from './types.ts'
import { descriptorsOf, heapArray } from './variable.ts'

/** Pixels above which a tile is refused. */
const MOST_TILE_PIXELS = 2 ** 24

const LETTER: Readonly<Record<Bitpix, NumberLetter>> = { 8: 'B', 16: 'I', 32: 'J', 64: 'K', [-32]: 'E', [-64]: 'D' }

/** How the tiles of an image are stored. */
export interface TileForm {
  readonly algorithm: string
  readonly tile: readonly number[]
  readonly table: Hdu
  readonly columns: ReadonlyMap<string, Column>
  /** ZNAMEn and ZVALn, the parameters of the algorithm. */
  readonly parameters: ReadonlyMap<string, number>
  readonly method: Quantization['method']
  readonly seed: number
}

/**
 * How the tiles of a compressed image are stored, from its header.
 *
 * @throws FormatError 'compression' when the tile size breaks its rule
 */
export function tileForm(hdu: Hdu): TileForm {
  const stored = hdu.stored as StoredTable
  const { header } = stored
  const tile = hdu.dimensions.map((n, i) => {
    const size = integerValue(header, `ZTILE${i + 1}`) ?? (i === 0 ? n : 1)
    if (size >= 1) return Math.min(size, Math.max(1, n))
    const message = `ZTILE${i + 1} requires a length of 1 or more, got ${size}`
    throw new FormatError('compression', message, { hdu: hdu.index, keyword: `ZTILE${i + 1}` })
  })
  if (stored.columns.some((column) => column.name.toUpperCase() === 'NULL_PIXEL_MASK')) {
    const message = 'NULL_PIXEL_MASK requires to be absent, since masks of undefined pixels are not read, got one'
    throw new FormatError('compression', message, { hdu: hdu.index, keyword: 'ZMASKCMP' })
  }
  const parameters = new Map<string, number>()
  for (let n = 1; header.get(`ZNAME${n}`); n++) {
    parameters.set((textValue(header, `ZNAME${n}`) ?? '').trim(), numberValue(header, `ZVAL${n}`) ?? 0)
  }
  const method = (textValue(header, 'ZQUANTIZ') ?? 'NO_DITHER').trim()
  const dithered = method === 'SUBTRACTIVE_DITHER_1' || method === 'SUBTRACTIVE_DITHER_2'
  return {
    algorithm: (textValue(header, 'ZCMPTYPE') ?? 'none').trim(),
    tile,
    table: { ...hdu, kind: 'table', header, columns: stored.columns, rows: stored.rows, rowSize: stored.rowSize },
    columns: new Map(stored.columns.map((column) => [column.name.toUpperCase(), column])),
    parameters,
    method: dithered ? method : 'NO_DITHER',
    seed: integerValue(header, 'ZDITHER0') ?? 1,
  }
}

/** One tile: its number, counted from 0, and its length along every axis. */
export interface Tile {
  readonly number: number
  readonly size: readonly number[]
}

/** Physical values of one tile. */
export function decodeTile(source: ByteSource, hdu: Hdu, form: TileForm, tile: Tile): Float64Array {
  const pixels = tile.size.reduce((product, n) => product * n, 1)
  if (pixels > MOST_TILE_PIXELS) {
    throw new FormatError('compression', `tile requires at most ${MOST_TILE_PIXELS} pixels, got ${pixels}`)
  }
  const cell = (name: string): Uint8Array | undefined => cellBytes(source, form, name, tile.number)
  const letter = LETTER[hdu.bitpix]
  const plain = { scale: hdu.scale, zero: hdu.zero, empty: hdu.blank ?? keywordBlank(form) }
  const code = cell('COMPRESSED_DATA')
  if (code === undefined || code.length === 0) {
    const packed = cell('GZIP_COMPRESSED_DATA')
    const bytes = packed?.length ? gunzipped(packed, pixels * 8) : cell('UNCOMPRESSED_DATA')
    if (!bytes?.length) {
      throw new FormatError('compression', 'tile requires compressed or uncompressed data, got none')
    }
    return physicalValues(exactly(bytes, pixels, Math.abs(hdu.bitpix) / 8), letter, plain)
  }
  const scale = tileNumber(source, form, 'ZSCALE', tile.number)
  if (hdu.bitpix < 0 && scale === undefined) {
    const size = Math.abs(hdu.bitpix) / 8
    return physicalValues(exactly(gzipPixels(code, form, pixels, size), pixels, size), letter, plain)
  }
  const stored = integers(code, hdu, form, tile)
  if (scale === undefined) {
    const bytes = integerBytes(stored)
    return physicalValues(bytes, 'J', plain)
  }
  const zero = tileNumber(source, form, 'ZZERO', tile.number) ?? 0
  const blank = tileNumber(source, form, 'ZBLANK', tile.number)
  const single = hdu.bitpix === -32
  return dequantized(stored, { scale, zero, blank, single, method: form.method, seed: form.seed, tile: tile.number })
}

function integerBytes(stored: Int32Array): Uint8Array {
  const bytes = Buffer.from(stored.slice().buffer)
  return bytes.swap32()
}

function keywordBlank(form: TileForm): bigint | undefined {
  const blank = integerValue(form.table.header, 'ZBLANK')
  return blank === undefined ? undefined : BigInt(blank)
}

/** The integers that a tile's code stands for. */
function integers(code: Uint8Array, hdu: Hdu, form: TileForm, tile: Tile): Int32Array {
  const pixels = tile.size.reduce((product, n) => product * n, 1)
  const own = hdu.bitpix === 8 ? 1 : hdu.bitpix === 16 ? 2 : 4
  switch (form.algorithm) {
    case 'RICE_1':
    case 'RICE_ONE': {
      const pixelSize = form.parameters.get('BYTEPIX') ?? own
      if (pixelSize !== 1 && pixelSize !== 2 && pixelSize !== 4) {
        throw new FormatError('compression', `BYTEPIX requires 1, 2 or 4, got ${pixelSize}`)
      }
      const blockSize = form.parameters.get('BLOCKSIZE') ?? 32
      if (!Number.isInteger(blockSize) || blockSize < 1) {
        throw new FormatError('compression', `BLOCKSIZE requires a count of 1 or more, got ${blockSize}`)
      }
      return decodeRice(code, { pixels, pixelSize: pixelSize as PixelSize, blockSize })
    }
    case 'GZIP_1':
    case 'GZIP_2':
    case 'NOCOMPRESS':
      return gzipIntegers(gzipPixels(code, form, pixels, hdu.bitpix < 0 ? 4 : own), pixels)
    case 'PLIO_1':
      return decodePlio(code, pixels)
    case 'HCOMPRESS_1':
      return decodeHcompress(code, { width: tile.size[0] ?? 1, height: pixels / (tile.size[0] ?? 1) })
    default: {
      const known = 'RICE_1, GZIP_1, GZIP_2, PLIO_1, HCOMPRESS_1 or NOCOMPRESS'
      throw new FormatError('compression', `ZCMPTYPE requires ${known}, got ${form.algorithm}`)
    }
  }
}

function gzipPixels(code: Uint8Array, form: TileForm, pixels: number, size: number): Uint8Array {
  if (form.algorithm === 'NOCOMPRESS') return code
  if (form.algorithm !== 'GZIP_1' && form.algorithm !== 'GZIP_2') {
    const message = `ZCMPTYPE of floating-point tiles without ZSCALE requires GZIP_1 or GZIP_2, got ${form.algorithm}`
    throw new FormatError('compression', message)
  }
  const bytes = gunzipped(code, pixels * 8)
  if (form.algorithm === 'GZIP_1') return bytes
  const each = Math.floor(bytes.length / Math.max(1, pixels))
  return unshuffled(bytes, each === 1 || each === 2 || each === 4 || each === 8 ? each : size)
}

/** Pixels that came out of gzip, whose size follows from their number of bytes. */
function gzipIntegers(bytes: Uint8Array, pixels: number): Int32Array {
  const size = bytes.length / pixels
  if (size === 4) return int32Of(bytes)
  if (size === 2) return Int32Array.from(physicalValues(bytes, 'I', { scale: 1, zero: 0 }))
  if (size === 1) return Int32Array.from(bytes)
  throw new FormatError('compression', `gzip tile requires 1, 2 or 4 bytes for ${pixels} pixels, got ${bytes.length}`)
}

function exactly(bytes: Uint8Array, pixels: number, size: number): Uint8Array {
  if (bytes.length === pixels * size) return bytes
  throw new FormatError('compression', `tile requires ${pixels * size} bytes, got ${bytes.length}`)
}

function cellBytes(source: ByteSource, form: TileForm, name: string, row: number): Uint8Array | undefined {
  const column = form.columns.get(name)
  if (!column) return undefined
  const bytes = readCells(source, form.table, column, { firstRow: row, rowCount: 1 })
  if (!column.descriptor) return bytes
  const [count = 0, offset = 0] = descriptorsOf(bytes, column.descriptor)
  return heapArray(source, form.table, column, { count, offset, row })
}

/** ZSCALE, ZZERO or ZBLANK of a tile, from its column or else from the header. */
function tileNumber(source: ByteSource, form: TileForm, name: string, row: number): number | undefined {
  const column = form.columns.get(name)
  if (!column) return numberValue(form.table.header, name)
  const bytes = readCells(source, form.table, column, { firstRow: row, rowCount: 1 })
  return physicalValues(bytes, column.letter as NumberLetter, { scale: 1, zero: 0 })[0]
}
