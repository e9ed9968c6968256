import { linearRegression } from 'simple-statistics'
import { median, robustSigma } from '../numeric/median.ts'
import type { DriftPoint } from './jumps.ts'

/** A steady change through the night. */
export interface SlowDrift {
  /** Per hour [unit of the points]. */
  readonly perHour: number
  /** Over the whole time of the points. */
  readonly total: number
  readonly hours: number
}

/** Fewer points than this make no line. */
const FEWEST = 6
/** Points further from the line than this many times the scatter are left out of the second fit. */
const CLIP = 3

/**
 * A straight line through points in order of time, where its whole change is above `smallest` and above `sigmas` times
 * the error of that change from the scatter about the line; undefined otherwise, and for fewer than six points.
 */
export function findSlowDrift(points: readonly DriftPoint[], smallest: number, sigmas: number): SlowDrift | undefined {
  if (points.length < FEWEST) return undefined
  const start = points[0].mjd
  let used = points.map(({ mjd, value }) => [24 * (mjd - start), value] as [number, number])
  const hours = used[used.length - 1][0]
  if (!(hours > 0)) return undefined
  let line = linearRegression(used)
  const off = used.map(([t, value]) => value - line.b - line.m * t)
  const limit = CLIP * robustSigma(off)
  const kept = used.filter((_, i) => Math.abs(off[i] - median(off)) <= limit)
  if (kept.length >= FEWEST) {
    used = kept
    line = linearRegression(used)
  }
  const scatter = robustSigma(used.map(([t, value]) => value - line.b - line.m * t))
  const mean = used.reduce((sum, [t]) => sum + t, 0) / used.length
  const spread = Math.sqrt(used.reduce((sum, [t]) => sum + (t - mean) ** 2, 0))
  const error = (scatter / spread) * hours
  const total = line.m * hours
  if (Math.abs(total) <= smallest || Math.abs(total) <= sigmas * error) return undefined
  return { perHour: line.m, total, hours }
}
