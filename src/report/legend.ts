import type { Item, PathItem } from './drawing.ts'
import { stroke } from './drawing.ts'
import { PALETTE } from './palette.ts'
import type { Typeface } from './typeface.ts'

/** One entry of a legend: how its line is drawn, and what it is. */
export interface LegendEntry {
  readonly label: string
  readonly stroke: string
  readonly width: number
  readonly dash?: readonly number[]
}

/** A legend on one line that ends at x on the base line y. */
export function legend(face: Typeface, x: number, y: number, entries: readonly LegendEntry[]): Item[] {
  const items: Item[] = []
  let end = x
  for (const entry of [...entries].reverse()) {
    const text = face.text(end, y, entry.label, { size: 7, colour: PALETTE.quiet, anchor: 'end' })
    const from = end - text.width - 22
    const line: PathItem = stroke([from, y - 2.5], [from + 18, y - 2.5], entry.stroke, entry)
    items.push(line, text)
    end = from - 10
  }
  return items
}
