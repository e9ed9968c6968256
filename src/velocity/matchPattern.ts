import { correlate, correlateCentred } from '../numeric/correlate.ts'
import { subtractRunningMean } from '../numeric/runningMean.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'
import type { LinePattern } from '../tables/types.ts'
import type { LogGrid } from './logGrid.ts'
import { patternDepth } from './pattern.ts'
import { findPeak } from './peak.ts'
import type { CorrelationPeak } from './peak.ts'

/** Full window of the running mean that takes out slopes, in ln wavelength: 120 Å at 4000 Å. */
const WINDOW = 0.03

/** Fewest cells that a pattern must share with the spectrum. */
const FEWEST_CELLS = 12

/** How a pattern lies on a spectrum. */
export interface Match {
  readonly pattern: LinePattern
  readonly peak: CorrelationPeak
  /** Shift of the pattern before the correlation [cells]. */
  readonly before: number
  /** Number of cells of equal weight that would weigh as much. */
  readonly cells: number
}

/** Where a pattern is looked for. */
export interface MatchOptions {
  readonly fwhm: number
  readonly maxVelocity: number
  /** [km/s] beyond maxVelocity that the correlation goes on, default 0. */
  readonly beyond?: number
  /** [km/s] that the search is centred on, default 0. */
  readonly around?: number
  /** Takes out a single level instead of slopes, for stretches shorter than the running mean; default false. */
  readonly isShort?: boolean
}

/** The best place of a pattern on a spectrum's grid; undefined when they share too few cells. */
export function matchPattern(
  grid: LogGrid,
  pattern: LinePattern,
  { fwhm, maxVelocity, beyond = 0, around = 0, isShort = false }: MatchOptions,
): Match | undefined {
  const { step, start } = grid
  const weight = coveredWeight(grid, pattern)
  const cells = independentCells(weight)
  if (cells < FEWEST_CELLS) return undefined
  const half = Math.round(WINDOW / 2 / step)
  const search = Math.ceil(maxVelocity / SPEED_OF_LIGHT / step)
  const reach = Math.ceil((maxVelocity + beyond) / SPEED_OF_LIGHT / step)
  const before = Math.round(around / SPEED_OF_LIGHT / step)
  // the pattern is known beyond the spectrum's ends, so its running mean needs a margin; a level needs none
  const margin = reach + (isShort ? 0 : half)
  const count = weight.length + 2 * margin
  const depth = patternDepth(pattern, { start: start - (margin + before) * step, step, count }, fwhm)
  const correlation = isShort
    ? correlateCentred(grid.depth, weight, depth, reach)
    : correlate(
        subtractRunningMean(grid.depth, weight, half),
        weight,
        subtractRunningMean(depth, undefined, half).subarray(half, count - half),
        reach,
      )
  return { pattern, peak: findPeak(correlation, search), before, cells }
}

function independentCells(weight: Float64Array): number {
  let sum = 0
  let squares = 0
  for (let i = 0; i < weight.length; i++) {
    sum += weight[i]
    squares += weight[i] * weight[i]
  }
  return squares > 0 ? (sum * sum) / squares : 0
}

function coveredWeight(grid: LogGrid, pattern: LinePattern): Float64Array {
  const weight = new Float64Array(grid.weight.length)
  for (const [first, last] of pattern.covered) {
    const from = Math.max(0, Math.ceil((Math.log(first) - grid.start) / grid.step))
    const to = Math.min(weight.length, Math.floor((Math.log(last) - grid.start) / grid.step))
    for (let i = from; i < to; i++) weight[i] = grid.weight[i]
  }
  return weight
}

/** cz from a shift in ln wavelength. */
export function velocityOf(match: Match, grid: LogGrid): number {
  return SPEED_OF_LIGHT * Math.expm1((match.peak.shift + match.before) * grid.step)
}

/** First and last wavelength [Å] that a spectrum and any of the patterns share. */
export function rangeOf(wavelength: Float64Array, patterns: readonly LinePattern[]): [number, number] {
  const ends = patterns.flatMap((pattern) => pattern.covered.flat())
  return [Math.max(wavelength[0], Math.min(...ends)), Math.min(wavelength[wavelength.length - 1], Math.max(...ends))]
}
