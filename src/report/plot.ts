import { ticks } from 'd3-array'
import type { Item, PathItem } from './drawing.ts'
import { stroke } from './drawing.ts'
import { PALETTE } from './palette.ts'
import type { Typeface } from './typeface.ts'
import { minus } from './words.ts'

/** Where a plot stands on the page [points] and what its axes span [data units]. */
export interface Frame {
  readonly x: number
  readonly y: number
  readonly width: number
  readonly height: number
  readonly xRange: readonly [number, number]
  readonly yRange: readonly [number, number]
}

/** Page position of a data value along x. */
export function atX(frame: Frame, value: number): number {
  const [first, last] = frame.xRange
  return frame.x + ((value - first) / (last - first)) * frame.width
}

/** Page position of a data value along y (data grow upwards). */
export function atY(frame: Frame, value: number): number {
  const [first, last] = frame.yRange
  return frame.y + frame.height - ((value - first) / (last - first)) * frame.height
}

/** As `atY`, held within the frame. */
export function heldY(frame: Frame, value: number): number {
  return Math.min(frame.y + frame.height, Math.max(frame.y, atY(frame, value)))
}

const AXIS_SIZE = 7

/** Labels and ticks below a frame; `label` is set at the right end. */
export function xAxis(face: Typeface, frame: Frame, label: string, count = 8): Item[] {
  const bottom = frame.y + frame.height
  const items: Item[] = [stroke([frame.x, bottom], [frame.x + frame.width, bottom], PALETTE.ink)]
  const end = frame.x + frame.width
  const words =
    label === ''
      ? undefined
      : face.text(end, bottom + 10, label, { size: AXIS_SIZE, colour: PALETTE.quiet, anchor: 'end' })
  const free = words ? end - words.width - 6 : Infinity
  for (const value of ticks(frame.xRange[0], frame.xRange[1], count)) {
    const x = atX(frame, value)
    items.push(stroke([x, bottom], [x, bottom + 3], PALETTE.ink))
    const text = face.text(x, bottom + 10, minus(String(value)), { size: AXIS_SIZE, anchor: 'middle' })
    if (x + text.width / 2 < free) items.push(text)
  }
  return words ? [...items, words] : items
}

/** Labels and ticks left of a frame, and the name of the axis read upwards. */
export function yAxis(face: Typeface, frame: Frame, label: string, count = 4): Item[] {
  const items: Item[] = [stroke([frame.x, frame.y], [frame.x, frame.y + frame.height], PALETTE.ink)]
  const values = ticks(frame.yRange[0], frame.yRange[1], count)
  const [scale, power] = powerOfTen(Math.max(...frame.yRange.map(Math.abs)))
  for (const value of values) {
    const y = atY(frame, value)
    items.push(stroke([frame.x - 3, y], [frame.x, y], PALETTE.ink))
    const text = minus(String(Number((value / scale).toPrecision(6))))
    items.push(face.text(frame.x - 5, y + 2.5, text, { size: AXIS_SIZE, anchor: 'end' }))
  }
  if (label !== '') {
    const name = power === 0 ? label : `${label}, 10${raised(power)}`
    const middle = frame.y + frame.height / 2
    items.push(
      face.text(frame.x - 27, middle, name, {
        size: AXIS_SIZE,
        colour: PALETTE.quiet,
        anchor: 'middle',
        upright: true,
        fit: frame.height,
      }),
    )
  }
  return items
}

/** Factor and exponent to take out of an axis whose largest value is of this size; none between 0.1 and 10,000. */
function powerOfTen(largest: number): readonly [number, number] {
  if (!(largest > 0) || (largest >= 0.1 && largest < 10_000)) return [1, 0]
  const power = Math.floor(Math.log10(largest))
  return [10 ** power, power]
}

const RAISED = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const raised = (power: number): string =>
  (power < 0 ? '⁻' : '') + [...String(Math.abs(power))].map((digit) => RAISED[Number(digit)]).join('')

/**
 * A curve thinned to what the frame can show: in every column of `column` points the lowest and the highest sample,
 * in order. The pen is lifted over NaN; values outside the frame are held at its edge.
 */
export function curve(
  frame: Frame,
  xs: ArrayLike<number>,
  ys: ArrayLike<number>,
  style: {
    readonly stroke: string
    readonly width: number
    readonly dash?: readonly number[]
    readonly column?: number
  },
): PathItem {
  const { column = 0.8, ...rest } = style
  const points: number[] = []
  let cell = NaN
  let low = -1
  let high = -1
  const put = (i: number): void => {
    points.push(atX(frame, xs[i]), heldY(frame, ys[i]))
  }
  const flush = (): void => {
    if (low < 0) return
    if (low === high) put(low)
    else if (low < high) [low, high].forEach(put)
    else [high, low].forEach(put)
    low = high = -1
  }
  for (let i = 0; i < xs.length; i++) {
    if (!(xs[i] >= frame.xRange[0] && xs[i] <= frame.xRange[1])) continue
    if (!Number.isFinite(ys[i])) {
      flush()
      if (points.length && !Number.isNaN(points[points.length - 1])) points.push(NaN, NaN)
      continue
    }
    const here = Math.floor((atX(frame, xs[i]) - frame.x) / column)
    if (here !== cell) flush()
    cell = here
    if (low < 0) low = high = i
    if (ys[i] < ys[low]) low = i
    if (ys[i] > ys[high]) high = i
  }
  flush()
  return { draw: 'path', points: Float64Array.from(points), ...rest }
}
