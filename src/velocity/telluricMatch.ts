import type { Continuum } from '../continuum/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { LinePattern } from '../tables/types.ts'
import { toLogGrid } from './logGrid.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'
import { matchPattern, velocityOf } from './matchPattern.ts'
import type { Match } from './matchPattern.ts'

/** How a band of the air lies on a spectrum. */
export interface TelluricMatch {
  readonly name: string
  /** km/s, positive when the file's wavelengths are too long. */
  readonly offset: number
  readonly error: number
  /** Å: width of the instrument that fits the band best. */
  readonly fwhm: number
}

/** Widths [Å] the band is tried with, each by this ratio more than the last. */
const WIDTHS = { first: 1, ratio: 1.15, count: 22 } as const

/** A band is believed when its shape fits this well (stellar bands do not), is this deep [fraction], and placed this well [km/s]. */
const BELIEVED = { height: 0.88, ratio: 3, depth: 0.04, error: 80 } as const

/** [km/s] range searched, and how much farther the correlation goes on. */
const SEARCH = 300
const BEYOND = 800

/** [km/s] what saturation and the weather do to the shape of a band. */
const SHAPE_ERROR = 8

const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2)

/** Step of the grid in ln wavelength. */
const STEP = { smallest: 3e-5, largest: 2.5e-4 } as const

/**
 * Offset and width of one band of the air, by correlation with its lines smoothed to the width that fits best;
 * undefined where the band is not covered or cannot be told from what else is there.
 */
export function matchTelluric(spectrum: Spectrum, continuum: Continuum, band: LinePattern): TelluricMatch | undefined {
  const { wavelength } = spectrum
  const [first, last] = band.covered[0]
  if (!(wavelength[0] < first && wavelength[wavelength.length - 1] > last)) return undefined
  let inside = 0
  for (let i = 0; i < wavelength.length; i++) if (wavelength[i] > first && wavelength[i] < last) inside++
  const sampling = (last - first) / Math.max(1, inside)
  const step = Math.min(STEP.largest, Math.max(STEP.smallest, (0.7 * sampling) / first))
  const grid = toLogGrid(spectrum, continuum, [first, last], step)
  const heights: number[] = []
  const widths: number[] = []
  let best: Match | undefined
  for (let i = 0; i < WIDTHS.count; i++) {
    const fwhm = WIDTHS.first * WIDTHS.ratio ** i
    const match =
      fwhm < 1.5 * sampling
        ? undefined
        : matchPattern(grid, band, { fwhm, maxVelocity: SEARCH, beyond: BEYOND, isShort: true })
    if (match === undefined) continue
    widths.push(fwhm)
    heights.push(match.peak.height)
    if (best === undefined || match.peak.height > best.peak.height) best = match
  }
  if (best === undefined) return undefined
  const { height, ratio, isAtEdge, width } = best.peak
  const at = heights.indexOf(height)
  if (isAtEdge || height < BELIEVED.height || ratio < BELIEVED.ratio || at === 0 || at === heights.length - 1)
    return undefined
  if (deepest(grid.depth) - mean(grid.depth, grid.weight) < BELIEVED.depth) return undefined
  const offset = velocityOf(best, grid)
  const trueWidth = vertex(widths, heights, at)
  // Zucker 2003, MNRAS 342, 1291, equation 9, for a Gaussian peak; misfits go on for a width of the instrument
  const sigma = (width * step * SPEED_OF_LIGHT) / FWHM_PER_SIGMA
  const independent = (last - first) / trueWidth
  const ofPeak = sigma * Math.sqrt((1 - height * height) / (height * height * independent))
  const error = Math.hypot(ofPeak, SHAPE_ERROR)
  if (!(error < BELIEVED.error)) return undefined
  return {
    name: band.name,
    offset,
    error,
    // each sample is shared out over its own width, a box of variance sampling² / 12
    fwhm: Math.sqrt(Math.max(0, trueWidth ** 2 - (FWHM_PER_SIGMA * sampling) ** 2 / 12)),
  }
}

/** Width at the top of the parabola through three heights, in the logarithm of the width. */
function vertex(widths: readonly number[], heights: readonly number[], at: number): number {
  const curvature = heights[at - 1] - 2 * heights[at] + heights[at + 1]
  const offset = curvature < 0 ? (heights[at - 1] - heights[at + 1]) / (2 * curvature) : 0
  return widths[at] * WIDTHS.ratio ** offset
}

function deepest(depth: Float64Array): number {
  let most = -Infinity
  for (const d of depth) most = Math.max(most, d)
  return most
}

function mean(depth: Float64Array, weight: Float64Array): number {
  let sum = 0
  let weights = 0
  for (let i = 0; i < depth.length; i++) {
    sum += weight[i] * depth[i]
    weights += weight[i]
  }
  return weights > 0 ? sum / weights : 0
}
