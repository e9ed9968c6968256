import type { CellBlock } from './drawing.ts'
import type { TableCell, TableColumn } from './tableCell.ts'
import { PALETTE } from './palette.ts'
import type { Area } from './spectrumFigure.ts'
import type { Typeface } from './typeface.ts'

const GAP = 6

/** Widths of columns that fill the given width [points]. */
export function columnWidths(columns: readonly TableColumn[], width: number): number[] {
  const fixed = columns.reduce((sum, c) => sum + (c.share ? 0 : c.width), 0) + GAP * (columns.length - 1)
  const shares = columns.reduce((sum, c) => sum + (c.share ? c.width : 0), 0)
  return columns.map((c) => (c.share ? ((width - fixed) * c.width) / shares : c.width))
}

/** Where a row begins: left edge, top or base line, size of its text [points]. */
export interface RowPlace {
  readonly x: number
  readonly y: number
  readonly size: number
}

/** The heads of a table; y is their base line. */
export function headRow(
  face: Typeface,
  columns: readonly TableColumn[],
  widths: readonly number[],
  { x, y, size }: RowPlace,
): CellBlock[] {
  let left = x
  return columns.map((column, i) => {
    const at = column.align === 'end' ? left + widths[i] : left
    left += widths[i] + GAP
    const style = {
      size: Math.max(6.5, size - 0.5),
      colour: PALETTE.quiet,
      anchor: column.align ?? 'start',
      fit: widths[i],
    }
    return { heading: true, items: column.head === '' ? [] : [face.text(at, y, column.head, style)] }
  })
}

/** The cells of a row whose top is y, and the height it takes. */
export function bodyRow(
  face: Typeface,
  columns: readonly TableColumn[],
  widths: readonly number[],
  { row, x, y, size, rowHeight }: RowPlace & { readonly row: readonly TableCell[]; readonly rowHeight: number },
): { readonly cells: CellBlock[]; readonly height: number } {
  const leading = size * 1.3
  const texts = columns.map((column, i) => {
    const { text, bold } = row[i]
    const weight = bold ? 'bold' : 'regular'
    const clean = face.clean(text)
    return column.wrap ? face.wrap(clean, widths[i], { size, weight }) : [clean]
  })
  const lines = Math.max(...texts.map((t) => t.length))
  const height = rowHeight + (lines - 1) * leading
  let left = x
  const cells = columns.map((column, i): CellBlock => {
    const cell = row[i]
    const at = column.align === 'end' ? left + widths[i] : left
    const place: Area = { x: left, y, width: widths[i], height }
    left += widths[i] + GAP
    if (cell.draw) return { heading: false, items: cell.draw(place) }
    const base = y + (lines === 1 ? (rowHeight + size * 0.72) / 2 - 1 : size + 1)
    const items = texts[i]
      .filter((line) => line !== '')
      .map((line, k) =>
        face.text(at, base + k * leading, line, {
          size,
          weight: cell.bold ? 'bold' : 'regular',
          colour: cell.colour ?? (cell.link ? PALETTE.blue : PALETTE.ink),
          anchor: column.align ?? 'start',
          fit: widths[i],
          ...(column.middle ? { middle: true } : {}),
          ...(cell.link ? { link: cell.link } : {}),
        }),
      )
    return { heading: false, items }
  })
  return { cells, height }
}
