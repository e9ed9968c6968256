/** Pages as plain lists of what to draw. Units are points (1/72 inch); the origin is the upper left corner, y down. */

export type Weight = 'regular' | 'bold'
export type Anchor = 'start' | 'middle' | 'end'

/** Where a link leads: a place in this document, an address relative to it, or a page file beside it. */
export type LinkTarget =
  { readonly to: 'place'; readonly name: string } | { readonly to: 'address' | 'pages'; readonly address: string }

/** Text on one line; x, y is the anchor on the base line. */
export interface TextItem {
  readonly draw: 'text'
  readonly x: number
  readonly y: number
  readonly text: string
  readonly size: number
  readonly weight: Weight
  readonly colour: string
  readonly anchor: Anchor
  /** Width of the text [points], as measured. */
  readonly width: number
  /** Read upwards. */
  readonly upright?: true
  readonly link?: LinkTarget
}

/** A polyline, or a closed area when it has a fill. `points` holds x, y in turn; NaN lifts the pen. */
export interface PathItem {
  readonly draw: 'path'
  readonly points: Float64Array
  readonly stroke?: string
  readonly width?: number
  readonly dash?: readonly number[]
  readonly fill?: string
}

/** Filled rectangles: `boxes` holds x, y, width, height in turn; `fills` one colour each, or one for all. */
export interface BoxesItem {
  readonly draw: 'boxes'
  readonly boxes: Float64Array
  readonly fills: readonly string[]
}

export type Item = TextItem | PathItem | BoxesItem

/** The cell of a table: what is drawn in it, and whether it is a heading. */
export interface CellBlock {
  readonly heading: boolean
  readonly items: readonly Item[]
}

/** One piece of a page with its meaning, in reading order. */
export interface Block {
  readonly role: 'H1' | 'H2' | 'P' | 'Figure' | 'Table' | 'Artifact'
  readonly items: readonly Item[]
  /** What a figure shows, in words. */
  readonly alt?: string
  /** Rows of a table, each of cells. */
  readonly rows?: readonly (readonly CellBlock[])[]
  readonly bookmark?: { readonly title: string; readonly level: 1 | 2; readonly y: number }
  /** Name of this place for links within the document. */
  readonly place?: { readonly name: string; readonly y: number }
}

/** One page: its size [points] and its blocks in reading order. */
export interface Page {
  readonly width: number
  readonly height: number
  readonly blocks: readonly Block[]
}

/** A document before it is bytes. */
export interface Drawing {
  readonly title: string
  readonly subject: string
  readonly pages: readonly Page[]
}

export type Paper = 'A4' | 'Letter'

/** Width and height [points]: ISO 216 A4 is 210 mm × 297 mm, US Letter (ANSI A) 8.5 in × 11 in. */
export const PAPERS: Readonly<Record<Paper, readonly [number, number]>> = {
  A4: [(210 / 25.4) * 72, (297 / 25.4) * 72],
  Letter: [612, 792],
}

/** A straight line. */
export function stroke(
  from: readonly [number, number],
  to: readonly [number, number],
  colour: string,
  style: { readonly width?: number; readonly dash?: readonly number[] } = {},
): PathItem {
  return {
    draw: 'path',
    points: Float64Array.of(...from, ...to),
    stroke: colour,
    width: style.width ?? 0.5,
    ...dashOf(style),
  }
}

const dashOf = ({ dash }: { readonly dash?: readonly number[] }): { dash?: readonly number[] } => (dash ? { dash } : {})

/** One filled rectangle. */
export function box(x: number, y: number, width: number, height: number, fill: string): BoxesItem {
  return { draw: 'boxes', boxes: Float64Array.of(x, y, width, height), fills: [fill] }
}
