import { median, robustSigma } from '../numeric/median.ts'
import { looksLikeMedium } from './checkMedium.ts'

/** Fewest stars that can share an offset: four may well move alike. */
export const FEWEST_STARS = 5

/** [km/s] scatter of the velocities of stars near the Sun, taken where the stars at hand scatter less. */
const STELLAR_SCATTER = 30

/** Sigmas from zero at which an offset is common. */
const SIGMAS = 3

/** A velocity that several stars share. */
export interface CommonOffset {
  /** km/s: median of the velocities. */
  readonly offset: number
  /** km/s: of the median, the stars' own scatter counted in. */
  readonly error: number
  readonly stars: number
  /** True where the offset is no chance. */
  readonly isCommon: boolean
  /** True where it is common and what a mix-up of air and vacuum gives (82 to 85 km/s). */
  readonly isMedium: boolean
}

/**
 * The velocity that the stars of a night share, which is the instrument's and not theirs; undefined for fewer than
 * five. One velocity a star, barycentric where known. Each weighs the same, as the stars' own motions outweigh the
 * errors; those with an error above 100 km/s are left out.
 */
export function commonOffset(
  velocities: readonly { readonly velocity: number; readonly error?: number }[],
): CommonOffset | undefined {
  const used = velocities.filter(({ velocity, error = 0 }) => Number.isFinite(velocity) && error <= 100)
  if (used.length < FEWEST_STARS) return undefined
  const values = used.map(({ velocity }) => velocity)
  const offset = median(values)
  // the median's error is √(π/2) times that of the mean
  const error = (Math.sqrt(Math.PI / 2) * Math.max(robustSigma(values), STELLAR_SCATTER)) / Math.sqrt(values.length)
  const isCommon = Math.abs(offset) > SIGMAS * error
  return { offset, error, stars: values.length, isCommon, isMedium: isCommon && looksLikeMedium(offset, error) }
}
