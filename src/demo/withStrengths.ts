import type { BandWindow } from '../tables/types.ts'
import { FINE_FIRST, FINE_STEP } from './grid.ts'

/** Sweeps over the bands, which overlap, and the part of what is missing that each sweep puts in. */
const SWEEPS = 14
const STEP = 0.8
/** Largest share of the light that one sweep takes out of a band or gives back. */
const LARGEST_CHANGE = 0.35
/** Every so many samples of the fine grid are looked at. */
const EVERY = 2

/**
 * Light whose side-band strengths come near to those wanted: the given light with smooth changes inside the bands. The
 * bands overlap and share side bands, so that not all can be met exactly; what is left after some sweeps stays.
 *
 * @param light   shape (fine grid), share of the continuum let through
 * @param wanted  strength of each band in its own unit, Å or mag; undefined leaves the band alone
 * @param fwhm    Å, at which strengths are measured
 * @param level   shape (fine grid): level that a continuum fit would find, in units of the true continuum
 */
export function withStrengths(
  light: Float64Array,
  bands: readonly BandWindow[],
  wanted: readonly (number | undefined)[],
  { fwhm, level }: { readonly fwhm: number; readonly level?: Float64Array },
): Float64Array {
  const out = light.slice()
  for (let sweep = 0; sweep < SWEEPS; sweep++) {
    const seen = smoothed(level ? out.map((share, i) => share / level[i]) : out, fwhm)
    for (const [k, band] of bands.entries()) {
      const goal = wanted[k]
      if (goal === undefined) continue
      const width = band.band[1] - band.band[0]
      const strength = bandStrength(seen, band)
      if (strength === undefined) continue
      const goalAngstrom = band.unit === 'mag' ? width * (1 - 10 ** (-0.4 * goal)) : goal
      const share = (STEP * (goalAngstrom - strength)) / width
      deepen(out, band.band, Math.max(-LARGEST_CHANGE, Math.min(LARGEST_CHANGE, share)))
    }
  }
  return out
}

/**
 * Equivalent width [Å] of a band against the line through its two side bands at their middles; undefined where a side
 * band holds no light. The light is sampled as `smoothed` gives it.
 */
export function bandStrength(seen: Float64Array, { band, blue, red }: BandWindow): number | undefined {
  const [left, right] = [mean(seen, blue), mean(seen, red)]
  if (!(left > 0) || !(right > 0)) return undefined
  const [from, to] = [(blue[0] + blue[1]) / 2, (red[0] + red[1]) / 2]
  const middle = (band[0] + band[1]) / 2
  // one side band twice: a level instead of a line
  const level = to === from ? left : left + ((right - left) * (middle - from)) / (to - from)
  return (band[1] - band[0]) * (1 - mean(seen, band) / level)
}

/** Light smoothed by a Gaussian profile, every second sample of the fine grid. */
export function smoothed(light: Float64Array, fwhm: number): Float64Array {
  const sigma = fwhm / (2 * Math.sqrt(2 * Math.LN2)) / FINE_STEP
  const reach = Math.ceil(3.5 * sigma)
  const weights = Float64Array.from({ length: 2 * reach + 1 }, (_, k) => Math.exp(-0.5 * ((k - reach) / sigma) ** 2))
  const total = weights.reduce((sum, weight) => sum + weight, 0)
  const last = light.length - 1
  return Float64Array.from({ length: Math.floor(last / EVERY) + 1 }, (_, i) => {
    let sum = 0
    for (let k = -reach; k <= reach; k++) {
      sum += weights[k + reach] * light[Math.min(last, Math.max(0, EVERY * i + k))]
    }
    return sum / total
  })
}

/** Mean over [from, to] Å of light sampled as `smoothed` gives it, by the trapezoid rule on its samples inside. */
function mean(seen: Float64Array, [from, to]: readonly [number, number]): number {
  const first = Math.ceil((from - FINE_FIRST) / (FINE_STEP * EVERY))
  const last = Math.floor((to - FINE_FIRST) / (FINE_STEP * EVERY))
  let sum = 0
  for (let i = first; i <= last; i++) sum += seen[i]
  return sum / (last - first + 1)
}

/** Takes a share out of the band as a whole, most in the middle; the array is the caller's own scratch. */
function deepen(light: Float64Array, [from, to]: readonly [number, number], share: number): void {
  const first = Math.ceil((from - FINE_FIRST) / FINE_STEP)
  const last = Math.floor((to - FINE_FIRST) / FINE_STEP)
  for (let i = first; i <= last; i++) {
    const along = (FINE_FIRST + FINE_STEP * i - from) / (to - from)
    // level in the middle half, falling to nothing at the edges; 4/3 makes its mean 1
    const edge = Math.min(1, Math.min(along, 1 - along) / 0.25)
    light[i] *= 1 - ((share * 4) / 3) * 0.5 * (1 - Math.cos(Math.PI * edge))
    if (light[i] < 0.02) light[i] = 0.02
  }
}
