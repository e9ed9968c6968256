import { FormatError } from '../errors.ts'
import { readData, requireData } from './source.ts'
import type { ByteSource, Column, Hdu } from './types.ts'

/** Rows of a table that are wanted, counted from 0. */
export interface RowRange {
  readonly firstRow: number
  readonly rowCount: number
}

/** Rows wider than this are read cell by cell, narrower ones in blocks of whole rows. */
const WIDE_ROW = 16_384
const ROW_BLOCK = 4 << 20

/** Elements, texts and arrays of one column above which reading at once is refused (about 256 MiB as numbers or strings). */
const MOST_ELEMENTS = 2 ** 25
const MOST_TEXTS = 2 ** 22
const MOST_ARRAYS = 2 ** 20

/** Stored bytes of a column's cells, one after another. */
export function readCells(source: ByteSource, hdu: Hdu, column: Column, { firstRow, rowCount }: RowRange): Uint8Array {
  const { width, offset } = column
  const { rowSize, dataByte } = hdu
  const start = dataByte + firstRow * rowSize
  if (rowCount > 0) requireData(source, hdu, start, (rowCount - 1) * rowSize + offset + width)
  else requireData(source, hdu, dataByte, 0)
  const most = column.descriptor ? MOST_ARRAYS : 'AL'.includes(column.letter) ? MOST_TEXTS : MOST_ELEMENTS
  const bits = column.letter === 'X' ? 8 : 1
  if (rowCount > most || width * bits * rowCount > MOST_ELEMENTS * 8) {
    const message = `column requires at most ${MOST_ELEMENTS} elements at once, got ${rowCount} rows of ${width} bytes`
    throw new FormatError('too-large', message, { hdu: hdu.index, keyword: 'NAXIS2' })
  }
  if (width === rowSize) return readData(source, hdu, start, rowCount * rowSize)
  if (rowCount === 1) return readData(source, hdu, start + offset, width)
  const out = new Uint8Array(width * rowCount)
  if (rowSize > WIDE_ROW) {
    for (let row = 0; row < rowCount; row++) out.set(source.read(start + row * rowSize + offset, width), row * width)
    return out
  }
  const step = Math.max(1, Math.floor(ROW_BLOCK / Math.max(1, rowSize)))
  for (let done = 0; done < rowCount; done += step) {
    const count = Math.min(step, rowCount - done)
    const block = source.read(start + done * rowSize, (count - 1) * rowSize + offset + width)
    gather(block, out, { offset, width, rowSize, count, at: done * width })
  }
  return out
}

interface Gather {
  readonly offset: number
  readonly width: number
  readonly rowSize: number
  readonly count: number
  readonly at: number
}

function gather(block: Uint8Array, out: Uint8Array, { offset, width, rowSize, count, at }: Gather): void {
  let from = offset
  let to = at
  for (let row = 0; row < count; row++, from += rowSize) {
    if (width > 64) {
      out.set(block.subarray(from, from + width), to)
      to += width
    } else for (let i = 0; i < width; i++) out[to++] = block[from + i] as number
  }
}
