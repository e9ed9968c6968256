import type { Drift } from '../night/types.ts'
import type { Curves } from '../quality/types.ts'
import type { Block, Item } from './drawing.ts'
import { stroke } from './drawing.ts'
import { quantile } from '../numeric/median.ts'
import { mark } from './marks.ts'
import { PALETTE } from './palette.ts'
import type { Frame } from './plot.ts'
import { atX, atY, curve, heldY, yAxis } from './plot.ts'
import type { Area } from './spectrumFigure.ts'
import { AXIS_ROOM, figureHeading, HEADING_ROOM, LABEL_ROOM } from './spectrumFigure.ts'
import { clockTime } from './timeWords.ts'
import type { Typeface } from './typeface.ts'
import type { Standing } from './verdict.ts'
import { shortNumber, typeWord } from './words.ts'

/** A normalised spectrum inside a cell of a table: a thin line, scaled to its own deepest line. */
export function smallSpectrum(area: Area, xRange: readonly [number, number], curves: Curves | undefined): Item[] {
  if (!curves || !(xRange[1] > xRange[0])) return []
  const low = Math.min(0.8, quantile(curves.normalised, 0.004))
  const high = Math.max(1.05, quantile(curves.normalised, 0.99))
  const yRange: readonly [number, number] = [low, high]
  const frame: Frame = { x: area.x, y: area.y + 1, width: area.width, height: area.height - 4, xRange, yRange }
  const line = curve(frame, curves.restWavelength, curves.normalised, { stroke: PALETTE.ink, width: 0.35, column: 1.6 })
  return line.points.length > 2 ? [line] : []
}

/** One star of the figure of types found against types expected. */
export interface TypePair {
  readonly name: string
  readonly expected: number
  readonly found: number
  readonly low: number
  readonly high: number
  readonly standing: Standing
}

/** Types found against types expected with 68 % ranges; the stars far off the diagonal are named. */
export function foundAgainstExpected(face: Typeface, area: Area, pairs: readonly TypePair[]): Block {
  const ends = pairs.flatMap((p) => [p.expected, p.found])
  const low = Math.max(0, Math.floor(Math.min(...ends) / 10) * 10)
  const high = Math.min(70, Math.max(low + 10, Math.ceil((Math.max(...ends) + 0.1) / 10) * 10))
  const side = area.height - HEADING_ROOM - LABEL_ROOM - 10
  const frame: Frame = {
    x: area.x + AXIS_ROOM,
    y: area.y + HEADING_ROOM,
    width: Math.min(side * 1.25, area.width - AXIS_ROOM),
    height: side,
    xRange: [low, high],
    yRange: [low, high],
  }
  const right = frame.x + frame.width
  const bottom = frame.y + frame.height
  const items: Item[] = [
    figureHeading(face, area, 'Types found against types expected, with 68 % ranges'),
    stroke([atX(frame, low), atY(frame, low)], [atX(frame, high), atY(frame, high)], PALETTE.rule, {
      width: 1,
      dash: [4, 2],
    }),
    stroke([frame.x, bottom], [right, bottom], PALETTE.ink),
    stroke([frame.x, frame.y], [frame.x, bottom], PALETTE.ink),
  ]
  for (let value = low; value <= high; value += 5) {
    const [x, y] = [atX(frame, value), atY(frame, value)]
    items.push(stroke([x, bottom], [x, bottom + 3], PALETTE.ink), stroke([frame.x - 3, y], [frame.x, y], PALETTE.ink))
    if (value % 10 !== 0 || value === 70) continue
    items.push(face.text(x, bottom + 11, typeWord(value), { size: 7, anchor: 'middle' }))
    items.push(face.text(frame.x - 5, y + 2.5, typeWord(value), { size: 7, anchor: 'end' }))
  }
  items.push(face.text(right, bottom + 21, 'expected', { size: 7, colour: PALETTE.quiet, anchor: 'end' }))
  items.push(
    face.text(area.x + 7, frame.y + frame.height / 2, 'found', {
      size: 7,
      colour: PALETTE.quiet,
      anchor: 'middle',
      upright: true,
    }),
  )
  const named: { x: number; y: number; width: number }[] = []
  for (const pair of pairs) {
    const [x, y] = [atX(frame, pair.expected), heldY(frame, pair.found)]
    items.push(stroke([x, heldY(frame, pair.low)], [x, heldY(frame, pair.high)], PALETTE.quiet, { width: 0.5 }))
    items.push(mark(x, y, 2.2, pair.standing))
  }
  for (const pair of pairs) {
    if (pair.standing !== 'bad') continue
    const [x, y] = [atX(frame, pair.expected) + 5, heldY(frame, pair.found) + 2.5]
    const text = face.text(x, y, pair.name, { size: 7, fit: area.x + area.width - x })
    const clashes = named.some((n) => Math.abs(n.y - y) < 8 && x < n.x + n.width && n.x < x + text.width)
    if (clashes) continue
    named.push({ x, y, width: text.width })
    items.push(text)
  }
  const odd = pairs.filter((p) => p.standing === 'bad')
  const alt =
    `Types found against types expected for ${pairs.length} stars; ` +
    (odd.length
      ? `${odd.length} not as expected: ${odd
          .slice(0, 12)
          .map((p) => `${p.name} found ${typeWord(p.found)}, expected ${typeWord(p.expected)}`)
          .join('; ')}`
      : 'all as expected')
  return { role: 'Figure', alt, items }
}

/** Least half height of a drift's axis as a part of its middle, so that rounding does not look like a drift. */
const LEAST_SPAN = 0.02

/** What stands above a drift: the quantity with its unit, where it has one. */
function driftTitle({ quantity, unit }: Drift): string {
  const name = quantity === 'seeing' ? 'seeing, as the width of the stars along the slit' : quantity
  return `${name.charAt(0).toUpperCase()}${name.slice(1)}${unit === '1' ? '' : `, ${unit}`}`
}

/** One quantity through the night: points with errors against time, UTC. */
export function driftFigure(face: Typeface, area: Area, drift: Drift, times: readonly [number, number]): Block {
  const values = drift.points.flatMap((p) => [p.value - (p.error ?? 0), p.value + (p.error ?? 0)])
  const [least, most] = [Math.min(...values), Math.max(...values)]
  const middle = (least + most) / 2
  const half = Math.max((most - least) * 0.6, Math.abs(middle) * LEAST_SPAN, 1e-9)
  const hour = 1 / 24
  const aside = Math.max((times[1] - times[0]) * 0.02, times[1] - times[0] > hour ? 0 : hour)
  const xRange: readonly [number, number] = [times[0] - aside, times[1] + aside]
  const frame: Frame = {
    x: area.x + AXIS_ROOM,
    y: area.y + HEADING_ROOM,
    width: area.width - AXIS_ROOM,
    height: area.height - HEADING_ROOM - LABEL_ROOM,
    xRange,
    yRange: [middle - half, middle + half],
  }
  const bottom = frame.y + frame.height
  const items: Item[] = [
    figureHeading(face, area, driftTitle(drift)),
    face.text(area.x + area.width, area.y + 8, drift.setup, {
      size: 7,
      colour: PALETTE.quiet,
      anchor: 'end',
      fit: area.width * 0.5,
    }),
    ...yAxis(face, frame, '', 3),
    stroke([frame.x, bottom], [frame.x + frame.width, bottom], PALETTE.ink),
  ]
  const span = (xRange[1] - xRange[0]) * 24
  const step = [1 / 6, 0.5, 1, 2, 3, 6, 12, 24].find((s) => span / s <= 9) ?? Math.ceil(span / 9 / 24) * 24
  for (let h = Math.ceil((xRange[0] * 24) / step) * step; h <= xRange[1] * 24 + 1e-9; h += step) {
    const x = atX(frame, h / 24)
    items.push(stroke([x, bottom], [x, bottom + 3], PALETTE.ink))
    const label = face.text(x, bottom + 10, clockTime(h / 24), { size: 6.5, anchor: 'middle' })
    if (x + label.width / 2 <= area.x + area.width) items.push(label)
  }
  const inTime = [...drift.points].sort((a, b) => a.mjd - b.mjd)
  items.push(
    curve(
      frame,
      inTime.map((p) => p.mjd),
      inTime.map((p) => p.value),
      { stroke: PALETTE.rule, width: 0.6, column: 1e-6 },
    ),
  )
  for (const point of inTime) {
    const x = atX(frame, point.mjd)
    if (point.error !== undefined)
      items.push(
        stroke(
          [x, heldY(frame, point.value - point.error)],
          [x, heldY(frame, point.value + point.error)],
          PALETTE.quiet,
        ),
      )
    items.push(mark(x, heldY(frame, point.value), 1.8, 'good'))
  }
  const alt =
    `${driftTitle(drift)} for ${drift.setup}: ${drift.points.length} points, from ${shortNumber(inTime[0].value)} at ` +
    `${clockTime(inTime[0].mjd)} to ${shortNumber(inTime[inTime.length - 1].value)} at ${clockTime(inTime[inTime.length - 1].mjd)} UTC`
  return { role: 'Figure', alt, items }
}
