import type { Item } from './drawing.ts'
import { PALETTE } from './palette.ts'
import type { Standing } from './verdict.ts'

/** Colour that goes with a standing; the shape and the words say the same. */
export const STANDING_COLOURS: Readonly<Record<Standing, string>> = {
  good: PALETTE.green,
  doubt: PALETTE.orange,
  bad: PALETTE.vermillion,
  unknown: PALETTE.quiet,
}

function polygon(x: number, y: number, size: number, corners: readonly (readonly [number, number])[]): Float64Array {
  const points = corners.flatMap(([dx, dy]) => [x + dx * size, y + dy * size])
  return Float64Array.from([...points, points[0], points[1]])
}

const circle = Array.from(
  { length: 24 },
  (_, i) => [Math.cos((i * Math.PI) / 12), Math.sin((i * Math.PI) / 12)] as const,
)
const SHAPES: Readonly<Record<Standing, readonly (readonly [number, number])[]>> = {
  good: circle,
  doubt: [
    [0, -1.1],
    [1.1, 0.85],
    [-1.1, 0.85],
  ],
  bad: [
    [-0.9, -0.9],
    [0.9, -0.9],
    [0.9, 0.9],
    [-0.9, 0.9],
  ],
  unknown: circle,
}

/** A mark of the given radius centred at x, y: disc (good), triangle (doubt), square (bad), ring (unknown). */
export function mark(x: number, y: number, size: number, standing: Standing): Item {
  const points = polygon(x, y, size, SHAPES[standing])
  const colour = STANDING_COLOURS[standing]
  if (standing === 'unknown') return { draw: 'path', points, stroke: colour, width: 1 }
  return { draw: 'path', points, fill: colour, stroke: PALETTE.ink, width: 0.4 }
}
