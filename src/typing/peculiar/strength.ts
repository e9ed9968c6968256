import { type LightSums, meanLight } from './lightSums.ts'

/** Three windows [Å, air, rest]: a feature and what lies beside it. */
export interface Windows {
  readonly band: readonly [number, number]
  readonly blue: readonly [number, number]
  readonly red: readonly [number, number]
}

/** Strength of a feature against the straight line through its side bands. */
export interface Strength {
  /** Å, positive in absorption. */
  readonly ew: number
  /** Å, 1 σ of noise and of a level that bends by a stated share. */
  readonly error: number
  /** Mean of the line through the side bands over the band [flux unit]. */
  readonly level: number
}

/** A window with less than this share of usable light is not measured. */
const USED = 0.85
/** Share of the level by which a straight line through two side bands may miss it, for each 100 Å between them. */
const BEND = 0.01

/** Strength in Å, undefined where a window is not covered or a side band holds no light. */
export function strengthOf(sums: LightSums, { band, blue, red }: Windows): Strength | undefined {
  const one = meanLight(sums, blue[0], blue[1])
  const two = meanLight(sums, red[0], red[1])
  const core = meanLight(sums, band[0], band[1])
  if (!(one.used > USED && two.used > USED && core.used > USED)) return undefined
  const distance = middle(red) - middle(blue)
  const share = (middle(band) - middle(blue)) / distance
  // No light of a star behind a nebula: the level is at most its error, and emission at least so strong.
  const level = Math.max(one.mean + share * (two.mean - one.mean), Math.hypot(one.error, two.error))
  if (!(level > 0)) return undefined
  const width = band[1] - band[0]
  const ratio = core.mean / level
  const sides = Math.hypot((1 - share) * one.error, share * two.error) / level
  const bend = BEND * Math.min(1, distance / 100) * Math.max(0.2, ratio)
  return { ew: width * (1 - ratio), error: width * Math.hypot(core.error / level, ratio * sides, bend), level }
}

/** Share of the level that a feature takes within `half` Å of its middle: its central depth, positive in absorption. */
export function depthAt(sums: LightSums, windows: Windows, wavelength: number, half: number): number | undefined {
  const found = strengthOf(sums, windows)
  if (!found) return undefined
  const blue = meanLight(sums, windows.blue[0], windows.blue[1]).mean
  const red = meanLight(sums, windows.red[0], windows.red[1]).mean
  const level =
    blue + ((red - blue) * (wavelength - middle(windows.blue))) / (middle(windows.red) - middle(windows.blue))
  return 1 - meanLight(sums, wavelength - half, wavelength + half).mean / level
}

function middle([lo, hi]: readonly [number, number]): number {
  return 0.5 * (lo + hi)
}
