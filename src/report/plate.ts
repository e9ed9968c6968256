import type { BoxesItem } from './drawing.ts'
import { grey } from './palette.ts'
import type { Frame } from './plot.ts'
import { atX } from './plot.ts'

/**
 * A normalised spectrum as the eye of a classifier knows it, a strip of grey: dark where light is missing. Each bar
 * holds the mean of its samples; no bar stands where there are none. Flux 0.2 and below is black, 1.05 nearly white.
 *
 * @param bar  width of a bar [points]
 */
export function plate(frame: Frame, xs: ArrayLike<number>, ys: ArrayLike<number>, bar = 1.5): BoxesItem {
  const n = Math.max(1, Math.round(frame.width / bar))
  const sums = new Float64Array(n)
  const counts = new Float64Array(n)
  for (let i = 0; i < xs.length; i++) {
    if (!Number.isFinite(ys[i])) continue
    const k = Math.floor(((atX(frame, xs[i]) - frame.x) / frame.width) * n)
    if (k < 0 || k >= n) continue
    sums[k] += ys[i]
    counts[k]++
  }
  const boxes: number[] = []
  const fills: string[] = []
  for (let k = 0; k < n; k++) {
    if (counts[k] === 0) continue
    const lightness = (sums[k] / counts[k] - 0.2) / 0.85
    const fill = grey(0.08 + (0.86 * Math.round(Math.min(1, Math.max(0, lightness)) * 31)) / 31)
    const x = frame.x + (k * frame.width) / n
    const before = boxes.length - 4
    if (fill === fills[fills.length - 1] && Math.abs(boxes[before] + boxes[before + 2] - x) < 0.01) {
      boxes[before + 2] = x + frame.width / n - boxes[before]
      continue
    }
    boxes.push(x, frame.y, frame.width / n, frame.height)
    fills.push(fill)
  }
  return { draw: 'boxes', boxes: Float64Array.from(boxes), fills }
}
