import type { Continuum } from '../continuum/types.ts'
import type { Spectrum } from '../spectrum/types.ts'

/** A spectrum made ready for measuring: pixel edges, flux over the continuum, its noise. All shape (n). */
export interface Pixels {
  readonly wavelength: Float64Array
  /** Å; pixels of a gap end at half of the usual step. */
  readonly lower: Float64Array
  readonly upper: Float64Array
  /** Flux ÷ level, NaN where not usable. */
  readonly flux: Float64Array
  /** Noise ÷ level, 1 σ. */
  readonly noise: Float64Array
  /** Error of the level ÷ level, 1 σ. */
  readonly levelError: Float64Array
}

/** A step this many times its neighbour's is a gap. */
const GAP = 2.5
/** A sample so many σ above both neighbours, and holding nearly all of the excess, is a spike (a cosmic ray). */
const SPIKE_SIGMA = 8
/** Share of the excess that the next sample of a real line of FWHM ≥ 2 samples has at least, with some room. */
const SPIKE_NEIGHBOUR = 0.3

/** Pixels of a spectrum against its continuum; single-sample spikes are taken out of use. */
export function pixelsOf(spectrum: Spectrum, continuum: Continuum): Pixels {
  const { wavelength, usable } = spectrum
  const n = wavelength.length
  const lower = new Float64Array(n)
  const upper = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const before = i > 0 ? wavelength[i] - wavelength[i - 1] : wavelength[1] - wavelength[0]
    const after = i + 1 < n ? wavelength[i + 1] - wavelength[i] : before
    lower[i] = wavelength[i] - 0.5 * (before > GAP * after ? after : before)
    upper[i] = wavelength[i] + 0.5 * (after > GAP * before ? before : after)
  }
  const flux = new Float64Array(n)
  const noise = new Float64Array(n)
  const levelError = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const level = continuum.level[i]
    flux[i] = usable[i] && level > 0 ? spectrum.flux[i] / level : NaN
    noise[i] = continuum.noise[i] / level
    levelError[i] = continuum.error[i] / level
  }
  dropSpikes(flux, noise)
  return { wavelength, lower, upper, flux, noise, levelError }
}

function dropSpikes(flux: Float64Array, noise: Float64Array): void {
  for (let i = 1; i + 1 < flux.length; i++) {
    if (!(flux[i] > 1.2)) continue
    const base = Math.min(1.2, 0.5 * (flux[i - 1] + flux[i + 1]))
    const excess = flux[i] - base
    const beside = Math.max(flux[i - 1], flux[i + 1]) - 1
    if (excess > SPIKE_SIGMA * noise[i] && beside < SPIKE_NEIGHBOUR * (flux[i] - 1)) flux[i] = NaN
  }
}

/** First pixel that ends above `wavelength`. */
export function firstPixelAbove({ upper }: Pixels, wavelength: number): number {
  let low = 0
  let high = upper.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (upper[middle] > wavelength) high = middle
    else low = middle + 1
  }
  return low
}

/**
 * Mean flux over the part [from, to] of pixel i: the pixel's own for a whole one; for a part the line through its
 * neighbours gives what that part has more or less than the whole. NaN where the pixel is not usable.
 */
export function partMean(
  { wavelength, lower, upper }: Pixels,
  flux: Float64Array,
  i: number,
  [from, to]: readonly [number, number],
): number {
  const off = 0.5 * (from + to) - 0.5 * (lower[i] + upper[i])
  if (off === 0 || i === 0 || i + 1 === flux.length) return flux[i]
  const slope = (flux[i + 1] - flux[i - 1]) / (wavelength[i + 1] - wavelength[i - 1])
  return slope === slope ? flux[i] + slope * off : flux[i]
}

/** Mean over a window, counting of each pixel only the part inside. */
export interface WindowMean {
  /** Mean of flux ÷ level; NaN when no pixel is usable. */
  readonly mean: number
  readonly variance: number
  /** Share of the window inside the data. */
  readonly covered: number
  /** Share of the window with usable samples. */
  readonly used: number
  /** Mean wavelength of the part used [Å]. */
  readonly centre: number
}

/** Mean of `flux` (the pixels' own unless given) over [lo, hi] Å of the observed frame. */
export function windowMean(pixels: Pixels, lo: number, hi: number, flux: Float64Array = pixels.flux): WindowMean {
  const { lower, upper, noise } = pixels
  let sum = 0
  let moment = 0
  let variance = 0
  let width = 0
  let covered = 0
  for (let i = firstPixelAbove(pixels, lo); i < lower.length && lower[i] < hi; i++) {
    const from = lower[i] > lo ? lower[i] : lo
    const to = upper[i] < hi ? upper[i] : hi
    const part = to - from
    covered += part
    if (!(flux[i] === flux[i])) continue
    sum += part * (from > lower[i] || to < upper[i] ? partMean(pixels, flux, i, [from, to]) : flux[i])
    moment += part * (from + to)
    variance += part * noise[i] * (part * noise[i])
    width += part
  }
  const span = hi - lo
  return {
    mean: sum / width,
    variance: variance / (width * width),
    covered: covered / span,
    used: width / span,
    centre: moment / (2 * width),
  }
}
