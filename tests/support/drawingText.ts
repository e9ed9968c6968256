import { createHash } from 'node:crypto'
import type { Drawing, Item } from '../../src/report/drawing.ts'

const three = (value: number): string => String(Number(value.toFixed(3)) + 0)
const LONGEST = 16

/** Many numbers as their count, their bounds and a digest of each rounded to 3 decimals; few as they are. */
function numbers(values: Float64Array): string {
  const rounded = [...values].map(three)
  if (rounded.length <= LONGEST) return rounded.join(' ')
  const finite = [...values].filter(Number.isFinite)
  const digest = createHash('sha256').update(rounded.join(' ')).digest('hex').slice(0, 12)
  const bounds = `${three(finite.reduce((a, b) => Math.min(a, b)))} to ${three(finite.reduce((a, b) => Math.max(a, b)))}`
  return `${values.length} numbers ${bounds} ${digest}`
}

function line(item: Item): string {
  if (item.draw === 'text') {
    const { x, y, size, weight, colour, anchor, text, link } = item
    const to = link === undefined ? '' : ` -> ${JSON.stringify(link)}`
    return `text ${three(x)} ${three(y)} ${size} ${weight} ${anchor} ${colour} ${JSON.stringify(text)}${to}`
  }
  if (item.draw === 'boxes') return `boxes ${numbers(item.boxes)} ${new Set(item.fills).size} colours`
  const { stroke = 'none', fill = 'none', width = 0, dash = [], points } = item
  return `path ${numbers(points)} stroke ${stroke} ${width} [${dash.join(' ')}] fill ${fill}`
}

/** A drawing as text, one item a line, numbers rounded to 3 decimals: what a golden file holds. */
export function drawingText(drawing: Drawing): string {
  const lines = [`title ${drawing.title}`, `subject ${drawing.subject}`]
  for (const page of drawing.pages) {
    lines.push(`page ${three(page.width)} ${three(page.height)}`)
    for (const { role, alt, items, rows, bookmark, place } of page.blocks) {
      const mark = bookmark === undefined ? '' : ` bookmark ${bookmark.level} ${bookmark.title}`
      lines.push(
        `block ${role}${alt === undefined ? '' : ` alt ${alt}`}${mark}${place === undefined ? '' : ` place ${place.name}`}`,
      )
      for (const item of items) lines.push(`  ${line(item)}`)
      for (const row of rows ?? [])
        for (const { heading, items: inside } of row) {
          lines.push(heading ? '  head' : '  cell')
          for (const item of inside) lines.push(`    ${line(item)}`)
        }
    }
  }
  return lines.join('\n') + '\n'
}

/** Every item of a drawing with the page it stands on. */
export function itemsOf(drawing: Drawing): { readonly page: number; readonly item: Item }[] {
  return drawing.pages.flatMap((page, i) =>
    page.blocks.flatMap((block) =>
      [...block.items, ...(block.rows ?? []).flatMap((row) => row.flatMap((cell) => cell.items))].map((item) => ({
        page: i,
        item,
      })),
    ),
  )
}
