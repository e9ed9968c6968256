import type { Item, LinkTarget } from './drawing.ts'
import type { Area } from './spectrumFigure.ts'

/** One column: its heading, width and how its cells are set. */
export interface TableColumn {
  readonly head: string
  /** Points, or a share of what is left when `share` is true. */
  readonly width: number
  readonly share?: true
  readonly align?: 'start' | 'end'
  /** Broken into lines instead of cut. */
  readonly wrap?: true
  /** Cut in the middle (paths). */
  readonly middle?: true
}

/** What stands in one cell. */
export interface TableCell {
  readonly text: string
  readonly bold?: boolean
  readonly colour?: string
  readonly link?: LinkTarget
  /** Drawn instead of the text, which then is only read out. */
  readonly draw?: (area: Area) => readonly Item[]
}

/** A cell of text. */
export const cell = (text: string, more: Omit<TableCell, 'text'> = {}): TableCell => ({ text, ...more })
