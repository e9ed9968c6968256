import { type Pixels, firstPixelAbove, partMean } from './pixels.ts'

/** A line by direct summation over a window, observed frame [Å]. */
export interface Integral {
  /** ∫(1 − F/Fc) dλ over the window; masked parts are taken as the mean of the rest. */
  readonly area: number
  /** 1 σ from pixel noise. */
  readonly errNoise: number
  /** 1 σ from the placement of the continuum, taken as one shift over the window. */
  readonly errContinuum: number
  /** Mean wavelength weighted by depth, and its 1 σ from noise; meaningless for an undetected line. */
  readonly centroid: number
  readonly centroidErr: number
  /** Share of the window inside the data, and with usable samples. */
  readonly covered: number
  readonly used: number
}

/** Direct sum of 1 − F/Fc over [lo, hi] of the observed frame, counting of each pixel only the part inside. */
export function integrateLine(pixels: Pixels, lo: number, hi: number): Integral {
  const { lower, upper, flux, noise, levelError } = pixels
  let area = 0
  let moment = 0
  let variance = 0
  let spread = 0
  let light = 0
  let width = 0
  let covered = 0
  const middle = 0.5 * (lo + hi)
  for (let i = firstPixelAbove(pixels, lo); i < lower.length && lower[i] < hi; i++) {
    const from = lower[i] > lo ? lower[i] : lo
    const to = upper[i] < hi ? upper[i] : hi
    const part = to - from
    covered += part
    if (!(flux[i] === flux[i])) continue
    const off = 0.5 * (from + to) - middle
    const error = part * noise[i]
    const depth = 1 - (from > lower[i] || to < upper[i] ? partMean(pixels, flux, i, [from, to]) : flux[i])
    area += part * depth
    moment += part * depth * off
    variance += error * error
    spread += error * error * off * off
    light += part * flux[i] * levelError[i]
    width += part
  }
  const span = hi - lo
  const whole = span / width
  return {
    area: area * whole,
    errNoise: Math.sqrt(variance) * whole,
    errContinuum: Math.abs(light) * whole,
    centroid: middle + moment / area,
    centroidErr: Math.sqrt(spread) / Math.abs(area),
    covered: covered / span,
    used: width / span,
  }
}
