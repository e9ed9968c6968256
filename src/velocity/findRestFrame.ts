import type { Continuum } from '../continuum/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { LinePattern } from '../tables/types.ts'
import { halved, toLogGrid } from './logGrid.ts'
import type { LogGrid } from './logGrid.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'
import { matchPattern, rangeOf, velocityOf } from './matchPattern.ts'
import type { Match, MatchOptions } from './matchPattern.ts'
import type { RestFrame } from './types.ts'

/** Step in ln wavelength of the grid the peak is judged on: 75 km/s. The pattern is chosen on cells twice as wide. */
const STEP = 2.5e-4

/** A peak narrower than this many cells is found anew on a finer grid, down to the step given. */
const NARROW_PEAK = 8
const FINEST_STEP = 4e-5

/** [km/s] farther than the search, so that the antisymmetric part of the correlation is seen far from the peak. */
const BEYOND = 2000

/**
 * A peak is trusted from these on. Tonry & Davis 1979 take a ratio below 3 for unreliable (from memory). Of 800 made
 * spectra of noise alone no peak was higher than `overNoise` / √(independent cells). Stars faster than `fast` km/s
 * are so rare that a peak there needs a higher ratio.
 */
const TRUST = { ratio: 3, height: 0.2, overNoise: 5.5, second: 0.9, fast: 700, fastRatio: 6 } as const

/** [km/s] how well the patterns themselves are at rest, from known velocities of stars they were not made from. */
const PATTERN_ZERO = 5

/** Fewest samples where the patterns have lines. */
const FEWEST_SAMPLES = 16

/** What a velocity is looked for with. */
export interface RestFrameOptions {
  readonly patterns: readonly LinePattern[]
  /** Name of the pattern to use; the others are tried only when it is not among the patterns. */
  readonly preferred?: string
  /** [km/s] largest velocity looked for, default 1000. */
  readonly maxVelocity?: number
  /** [Å] FWHM of the instrument, default 2.5 samples. */
  readonly fwhm?: number
}

/**
 * The star's velocity against the line pattern that fits it best, by cross-correlation over ln wavelength, with the
 * error of Tonry & Davis 1979 (AJ 84, 1511); velocity 0, untrusted and with a reason where no peak stands out.
 * Emission, telluric bands and ranges that no pattern knows are left out.
 *
 * @throws RangeError when there is no pattern
 */
export function findRestFrame(spectrum: Spectrum, continuum: Continuum, options: RestFrameOptions): RestFrame {
  const { patterns, preferred, maxVelocity = 1000 } = options
  if (patterns.length === 0) throw new RangeError('findRestFrame requires a line pattern, got none')
  const { wavelength } = spectrum
  const chosen = patterns.filter((pattern) => pattern.name === preferred)
  const candidates = chosen.length > 0 ? chosen : patterns
  const range: [number, number] = wavelength.length > 0 ? rangeOf(wavelength, candidates) : [0, 0]
  const samples = countWithin(wavelength, range)
  if (samples < FEWEST_SAMPLES) return untrusted(`only ${samples} samples where lines are known`)
  const middle = (range[0] + range[1]) / 2
  const sampling = (range[1] - range[0]) / samples / middle
  const fwhm = options.fwhm ?? 2.5 * sampling * middle

  const grid = toLogGrid(spectrum, continuum, range, Math.max(STEP, sampling))
  const pattern = candidates.length === 1 ? candidates[0] : bestPattern(grid, candidates, { fwhm, maxVelocity })
  const match = pattern && matchPattern(grid, pattern, { fwhm, maxVelocity, beyond: BEYOND })
  if (match === undefined) return untrusted('the line patterns cover too little of the spectrum')
  return judge(match, centred(spectrum, continuum, match, { grid, fwhm, sampling }), grid.step)
}

function countWithin(wavelength: Float64Array, [first, last]: readonly [number, number]): number {
  let count = 0
  for (let i = 0; i < wavelength.length; i++) if (wavelength[i] >= first && wavelength[i] <= last) count++
  return count
}

/** The pattern with the highest peak, which is the likeliest for noise of one strength; on cells twice as wide. */
function bestPattern(grid: LogGrid, patterns: readonly LinePattern[], options: MatchOptions): LinePattern | undefined {
  const wide = halved(grid)
  let best: Match | undefined
  for (const pattern of patterns) {
    const match = matchPattern(wide, pattern, options)
    if (match && (best === undefined || match.peak.height > best.peak.height)) best = match
  }
  return best?.pattern
}

/** Velocity of a match, found anew on a finer grid when its peak is narrow. */
function centred(
  spectrum: Spectrum,
  continuum: Continuum,
  match: Match,
  { grid, fwhm, sampling }: { readonly grid: LogGrid; readonly fwhm: number; readonly sampling: number },
): number {
  const around = velocityOf(match, grid)
  const step = Math.max(FINEST_STEP, sampling / 2)
  if (match.peak.isAtEdge || match.peak.width > NARROW_PEAK || step > 0.7 * grid.step) return around
  const fine = toLogGrid(spectrum, continuum, rangeOf(spectrum.wavelength, [match.pattern]), step)
  const refined = matchPattern(fine, match.pattern, { fwhm, maxVelocity: 120, around })
  return refined && !refined.peak.isAtEdge ? velocityOf(refined, fine) : around
}

function untrusted(reason: string): RestFrame {
  return { velocity: 0, trusted: false, reason, how: 'none' }
}

function judge({ pattern, peak, cells }: Match, velocity: number, step: number): RestFrame {
  const found = { how: 'cross-correlation', pattern: pattern.name, peakRatio: peak.ratio, peak: peak.height } as const
  const refuse = (reason: string): RestFrame => ({ velocity: 0, trusted: false, reason, ...found })
  if (peak.isAtEdge) return refuse('the correlation has no peak within the range of velocities')
  const height = Math.max(TRUST.height, TRUST.overNoise / Math.sqrt(cells))
  if (peak.height < height)
    return refuse(`the peak of the correlation is ${peak.height.toFixed(2)} high, below ${height.toFixed(2)}`)
  const ratio = Math.abs(velocity) > TRUST.fast ? TRUST.fastRatio : TRUST.ratio
  if (peak.ratio < ratio)
    return refuse(`the ratio of the peak at ${velocity.toFixed(0)} km/s is ${peak.ratio.toFixed(1)}, below ${ratio}`)
  if (peak.second > TRUST.second * peak.height)
    return refuse(`a second peak has ${((100 * peak.second) / peak.height).toFixed(0)} % of the height of the first`)
  const ofPeak = ((3 / 8) * peak.width * step * SPEED_OF_LIGHT) / (1 + peak.ratio)
  return { velocity, error: Math.hypot(ofPeak, PATTERN_ZERO), trusted: true, ...found }
}
