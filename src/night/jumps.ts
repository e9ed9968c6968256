import { median, robustSigma } from '../numeric/median.ts'

/** A value followed through the night. */
export interface DriftPoint {
  readonly mjd: number
  readonly value: number
  readonly error?: number
  readonly label: string
}

/** A lasting change between two neighbouring points. */
export interface Jump {
  /** Index of the first point after it. */
  readonly at: number
  readonly before: number
  readonly after: number
  /** after − before. */
  readonly size: number
}

/** Points on either side that set the two levels. */
const SIDE = 4

/**
 * Jumps of points in order of time: places where the medians of up to four points before and after differ by more than
 * `smallest` and by more than `sigmas` times the scatter of the points about them (or their errors, whichever is
 * larger), and where the change is made between two neighbours, not a slow drift. The largest of places side by side.
 */
export function findJumps(points: readonly DriftPoint[], smallest: number, sigmas: number): readonly Jump[] {
  const n = points.length
  if (n < 2) return []
  const values = points.map(({ value }) => value)
  const errors = points.map(({ error }) => error ?? 0)
  const candidates: Jump[] = []
  for (let at = 1; at < n; at++) {
    const [left, right] = [values.slice(Math.max(0, at - SIDE), at), values.slice(at, at + SIDE)]
    const [before, after] = [median(left), median(right)]
    const size = after - before
    const scatter = Math.max(about(left, before), about(right, after))
    const error = Math.hypot(
      median(errors.slice(Math.max(0, at - SIDE), at)) / Math.sqrt(left.length),
      median(errors.slice(at, at + SIDE)) / Math.sqrt(right.length),
    )
    if (Math.abs(size) <= smallest || Math.abs(size) <= sigmas * error || Math.abs(size) <= 3 * scatter) continue
    // a slow drift has its change spread over all the points looked at
    if (n > 2 && Math.abs(values[at] - values[at - 1]) < 0.5 * Math.abs(size)) continue
    candidates.push({ at, before, after, size })
  }
  return candidates.filter(
    (jump) => !candidates.some((other) => other !== jump && Math.abs(other.at - jump.at) <= 2 && isLarger(other, jump)),
  )
}

function isLarger(a: Jump, b: Jump): boolean {
  return Math.abs(a.size) > Math.abs(b.size) || (Math.abs(a.size) === Math.abs(b.size) && a.at < b.at)
}

function about(values: readonly number[], level: number): number {
  return values.length < 2
    ? 0
    : values.length === 2
      ? Math.abs(values[0] - level)
      : robustSigma(values.map((value) => value - level))
}
