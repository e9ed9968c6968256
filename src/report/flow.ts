import type { Block, CellBlock, Drawing, Item, Page, Paper } from './drawing.ts'
import { PAPERS, stroke } from './drawing.ts'
import { PALETTE } from './palette.ts'
import type { Area } from './spectrumFigure.ts'
import type { TableCell, TableColumn } from './tableCell.ts'
import { bodyRow, columnWidths, headRow } from './tableRow.ts'
import type { Typeface } from './typeface.ts'

/** Margins of every page [points]. */
export const MARGIN = { left: 46, right: 40, top: 50, bottom: 44 } as const

/** How a table looks where it differs from the usual. */
export interface TableStyle {
  readonly size?: number
  /** Height of a row of one line [points]. */
  readonly rowHeight?: number
}

/** A document that grows from top to bottom, page after page. */
export interface Flow {
  /** The column of text: left edge and width [points]. */
  readonly x: number
  readonly width: number
  /** Height left on this page [points]. */
  room(): number
  space(height: number): void
  newPage(): void
  heading(text: string, options?: { readonly level?: 1 | 2; readonly place?: string; readonly keep?: number }): void
  paragraph(text: string, options?: { readonly size?: number; readonly bold?: boolean; readonly colour?: string }): void
  /** Draws blocks in an area of this height, on the next page when this one has no room. */
  area(height: number, draw: (area: Area) => readonly Block[]): void
  table(columns: readonly TableColumn[], rows: readonly (readonly TableCell[])[], style?: TableStyle): void
  finish(title: string, subject: string): Drawing
}

/** A flow on the given paper. `head` and `foot` stand on every page, with its number. */
export function makeFlow(
  face: Typeface,
  options: { readonly paper: Paper; readonly head: string; readonly foot: string },
): Flow {
  const [pageWidth, pageHeight] = PAPERS[options.paper]
  const x = MARGIN.left
  const width = pageWidth - MARGIN.left - MARGIN.right
  const bottom = pageHeight - MARGIN.bottom
  const pages: Block[][] = [[]]
  let y: number = MARGIN.top

  const add = (block: Block): void => void pages[pages.length - 1].push(block)
  const room = (): number => bottom - y
  const newPage = (): void => {
    pages.push([])
    y = MARGIN.top
  }
  const ensure = (height: number): void => {
    if (room() < height && y > MARGIN.top) newPage()
  }

  function heading(
    text: string,
    given: { readonly level?: 1 | 2; readonly place?: string; readonly keep?: number } = {},
  ): void {
    const { level = 2, place, keep = 40 } = given
    const size = level === 1 ? 16 : 10.5
    if (y > MARGIN.top) y += level === 1 ? 16 : 10
    ensure(size + keep)
    const top = y
    y += size
    const lines = face.wrap(face.clean(text), width, { size, weight: 'bold' })
    const items: Item[] = lines.map((line, i) => face.text(x, y + i * size * 1.2, line, { size, weight: 'bold' }))
    y += (lines.length - 1) * size * 1.2 + 6
    add({
      role: level === 1 ? 'H1' : 'H2',
      items,
      bookmark: { title: face.clean(text), level, y: top },
      ...(place === undefined ? {} : { place: { name: place, y: top } }),
    })
  }

  function paragraph(
    text: string,
    given: { readonly size?: number; readonly bold?: boolean; readonly colour?: string } = {},
  ): void {
    const { size = 8.5, bold = false, colour = PALETTE.ink } = given
    const weight = bold ? 'bold' : 'regular'
    const leading = size * 1.35
    let lines = face.wrap(face.clean(text), width, { size, weight })
    while (lines.length) {
      ensure(leading)
      const fitting = Math.max(1, Math.floor(room() / leading))
      const now = lines.slice(0, fitting)
      lines = lines.slice(fitting)
      const top = y
      add({
        role: 'P',
        items: now.map((line, i) => face.text(x, top + size + i * leading, line, { size, weight, colour })),
      })
      y += now.length * leading
    }
    y += 3
  }

  function area(height: number, draw: (area: Area) => readonly Block[]): void {
    ensure(height)
    for (const block of draw({ x, y, width, height })) add(block)
    y += height
  }

  function table(
    columns: readonly TableColumn[],
    rows: readonly (readonly TableCell[])[],
    style: TableStyle = {},
  ): void {
    const { size = 7.5, rowHeight = size * 1.55 } = style
    const widths = columnWidths(columns, width)
    let block: CellBlock[][] = []
    let rules: Item[] = []
    const close = (): void => {
      if (block.length) add({ role: 'Table', items: [], rows: block })
      if (rules.length) add({ role: 'Artifact', items: rules })
      block = []
      rules = []
    }
    const open = (): void => {
      block.push(headRow(face, columns, widths, { x, y: y + size, size }))
      y += rowHeight
      rules.push(stroke([x, y - 1.5], [x + width, y - 1.5], PALETTE.ink, { width: 0.6 }))
    }
    ensure(rowHeight * (rows.length < 9 ? rows.length + 1 : 4))
    open()
    for (const row of rows) {
      const set = bodyRow(face, columns, widths, { row, x, y: 0, size, rowHeight })
      if (room() < set.height) {
        close()
        newPage()
        open()
      }
      block.push(bodyRow(face, columns, widths, { row, x, y, size, rowHeight }).cells)
      y += set.height
      rules.push(stroke([x, y - 1], [x + width, y - 1], PALETTE.rule, { width: 0.3 }))
    }
    close()
    y += 6
  }

  function finish(title: string, subject: string): Drawing {
    const count = pages.length
    return {
      title: face.clean(title),
      subject: face.clean(subject),
      pages: pages.map((blocks, i): Page => {
        const number = `${i + 1} of ${count}`
        const style = { size: 6.5, colour: PALETTE.quiet }
        const head: Item[] = [
          face.text(x, 32, 'darkline', { ...style, weight: 'bold', colour: PALETTE.ink }),
          face.text(x + width, 32, options.head, { ...style, anchor: 'end', fit: width - 60 }),
          stroke([x, 37], [x + width, 37], PALETTE.ink, { width: 0.4 }),
          face.text(x, pageHeight - 26, options.foot, { ...style, fit: width - 60, middle: true }),
          face.text(x + width, pageHeight - 26, number, { ...style, anchor: 'end' }),
        ]
        return { width: pageWidth, height: pageHeight, blocks: [...blocks, { role: 'Artifact', items: head }] }
      }),
    }
  }

  return { x, width, room, space: (height) => void (y += height), newPage, heading, paragraph, area, table, finish }
}
