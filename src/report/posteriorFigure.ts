import type { TypeGrid, TypePosterior } from '../typing/types.ts'
import type { Block, Item } from './drawing.ts'
import { box, stroke } from './drawing.ts'
import type { LegendEntry } from './legend.ts'
import { legend } from './legend.ts'
import { PALETTE } from './palette.ts'
import type { Frame } from './plot.ts'
import { atX } from './plot.ts'
import type { Area } from './spectrumFigure.ts'
import { absentFigure, figureHeading, HEADING_ROOM, LABEL_ROOM } from './spectrumFigure.ts'
import type { Typeface } from './typeface.ts'
import { percent, typeRange, typeWord } from './words.ts'

const ROMAN: Readonly<Record<number, string>> = { 1: 'I', 2: 'II', 3: 'III', 4: 'IV', 5: 'V' }
const SPAN_LEAST = 20
const VALUE_ROOM = 34
const NAME_ROOM = 22
/** Line where the expected type lies. */
const EXPECTED = { width: 1, dash: [2, 1.5] } as const

/** Sums of the grid over class (by type) and over type (by class). */
export function marginals({ types, classes, probability }: TypeGrid): {
  readonly byType: Float64Array
  readonly byClass: Float64Array
} {
  const byType = new Float64Array(types.length)
  const byClass = new Float64Array(classes.length)
  for (let t = 0; t < types.length; t++)
    for (let c = 0; c < classes.length; c++) {
      byType[t] += probability[t * classes.length + c]
      byClass[c] += probability[t * classes.length + c]
    }
  return { byType, byClass }
}

/** Types the figure spans: the 95 % range and the expected type with margins, at least 20 subclasses. */
function span(type: TypePosterior, expected: number | undefined): readonly [number, number] {
  const ends = [type.low95, type.high95, type.typeNumber, expected].filter((v) => v !== undefined)
  let low = Math.min(...ends) - 3
  let high = Math.max(...ends) + 3
  const missing = Math.max(0, SPAN_LEAST - (high - low)) / 2
  low = Math.max(-0.5, low - missing)
  high = Math.min(70, Math.max(high + missing, low + SPAN_LEAST))
  return [Math.min(low, high - SPAN_LEAST), high]
}

/** Bars of one row of probabilities, upwards from the base of the frame, the highest as high as the frame. */
function bars(frame: Frame, grid: TypeGrid, values: (t: number) => number, top: number): Item {
  const boxes: number[] = []
  const step = grid.types.length > 1 ? grid.types[1] - grid.types[0] : 1
  const width = (step / (frame.xRange[1] - frame.xRange[0])) * frame.width
  for (let t = 0; t < grid.types.length; t++) {
    const x = atX(frame, grid.types[t]) - width / 2
    const height = (values(t) / top) * frame.height
    if (height < 0.05 || x < frame.x - 0.01 || x + width > frame.x + frame.width + 0.01) continue
    boxes.push(x, frame.y + frame.height - height, width * 0.86, height)
  }
  return { draw: 'boxes', boxes: Float64Array.from(boxes), fills: [PALETTE.blue] }
}

function typeAxis(face: Typeface, frame: Frame, y: number): Item[] {
  const items: Item[] = [stroke([frame.x, y], [frame.x + frame.width, y], PALETTE.ink)]
  const [low, high] = frame.xRange
  const step = high - low > 45 ? 5 : high - low > 25 ? 5 : 2
  for (let value = Math.ceil(low); value <= high; value++) {
    const x = atX(frame, value)
    const isLetter = value % 10 === 0
    items.push(stroke([x, y], [x, y + (isLetter ? 4 : 2)], PALETTE.ink))
    if (value % 10 === 0 || (value % 10) % step === 0)
      if (value < 70)
        items.push(
          face.text(x, y + 11, typeWord(value), { size: 7, weight: isLetter ? 'bold' : 'regular', anchor: 'middle' }),
        )
  }
  return items
}

/** Probability over type and, row by row, over type for each luminosity class, with the 68 % and 95 % ranges. */
export function posteriorFigure(
  face: Typeface,
  area: Area,
  type: TypePosterior,
  expected?: { readonly word: string; readonly number: number },
): Block {
  const heading = 'Probability over type'
  const { grid, low68, high68, low95, high95 } = type
  if (!grid || low68 === undefined || high68 === undefined || low95 === undefined || high95 === undefined)
    return absentFigure(face, area, heading, `none: ${type.reason ?? 'the spectrum was not typed'}`)
  const { byType, byClass } = marginals(grid)
  const rows = grid.classes.length
  const room = area.height - HEADING_ROOM - LABEL_ROOM - 10
  const rowHeight = Math.min(13, (room * 0.55) / rows)
  const xRange = span(type, expected?.number)
  const frame: Frame = {
    x: area.x + NAME_ROOM,
    y: area.y + HEADING_ROOM + 2,
    width: area.width - NAME_ROOM - VALUE_ROOM,
    height: room - rows * rowHeight,
    xRange,
    yRange: [0, 1],
  }
  const entries: LegendEntry[] = [
    { label: '68 %', stroke: PALETTE.shade, width: 6 },
    { label: '95 %', stroke: PALETTE.wash, width: 6 },
    ...(expected ? [{ label: `expected ${expected.word}`, stroke: PALETTE.vermillion, ...EXPECTED }] : []),
  ]
  const items: Item[] = [figureHeading(face, area, heading), ...legend(face, area.x + area.width, area.y + 8, entries)]
  const top = byType.reduce((most, p) => Math.max(most, p), 0)
  const base = frame.y + frame.height
  const held = (value: number): number => Math.min(frame.x + frame.width, Math.max(frame.x, atX(frame, value)))
  items.push(box(held(low95), frame.y, held(high95) - held(low95), frame.height, PALETTE.wash))
  items.push(box(held(low68), frame.y, held(high68) - held(low68), frame.height, PALETTE.shade))
  items.push(
    bars(frame, grid, (t) => byType[t], top),
    stroke([frame.x, base], [frame.x + frame.width, base], PALETTE.rule),
  )
  items.push(face.text(frame.x - 4, base - 1, 'all', { size: 7, anchor: 'end' }))
  const cells = grid.probability.reduce((most, p) => Math.max(most, p), 0)
  for (let c = 0; c < rows; c++) {
    const row: Frame = { ...frame, y: base + c * rowHeight + 2, height: rowHeight - 2 }
    const foot = row.y + row.height
    items.push(bars(row, grid, (t) => grid.probability[t * rows + c], cells))
    items.push(stroke([frame.x, foot], [frame.x + frame.width, foot], PALETTE.rule, { width: 0.3 }))
    items.push(
      face.text(frame.x - 4, foot - 0.5, ROMAN[grid.classes[c]] ?? String(grid.classes[c]), { size: 7, anchor: 'end' }),
    )
    items.push(face.text(area.x + area.width, foot - 0.5, percent(byClass[c]), { size: 7, anchor: 'end' }))
  }
  const foot = base + rows * rowHeight + 1
  items.push(...typeAxis(face, frame, foot))
  if (expected && expected.number >= xRange[0] && expected.number <= xRange[1])
    items.push(
      stroke([atX(frame, expected.number), frame.y], [atX(frame, expected.number), foot], PALETTE.vermillion, EXPECTED),
    )
  const alt =
    `Probability over spectral type: 68 % within ${typeRange(low68, high68)}, 95 % within ${typeRange(low95, high95)}. By class: ` +
    [...byClass].map((p, c) => `${ROMAN[grid.classes[c]] ?? grid.classes[c]} ${percent(p)}`).join(', ') +
    (expected ? `. The list expects ${expected.word}` : '')
  return { role: 'Figure', alt, items }
}
