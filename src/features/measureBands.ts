import type { Continuum } from '../continuum/types.ts'
import { smoothToFwhm } from '../numeric/smoothToFwhm.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { BandWindow } from '../tables/types.ts'
import type { RestFrame } from '../velocity/types.ts'
import { type Pixels, type WindowMean, firstPixelAbove, partMean, pixelsOf, windowMean } from './pixels.ts'
import type { Measurement } from './types.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** Which side-band features are measured, and at what resolution. */
export interface BandOptions {
  readonly windows: readonly BandWindow[]
  /** FWHM [Å] now (0 when not known) and as wanted for all spectra alike. */
  readonly resolution?: { readonly current?: number; readonly common: number }
}

/** A window that has less than this share of itself inside the data is `uncovered`. */
const COVERED = 0.98
/** A window with less than this share of usable samples is `masked`. */
const USED = 0.7
/** Å at 5000 Å: over this distance the continuum's error at two places is independent; see `fitContinuum`. */
const CONTINUUM_PERIOD = 700
/** Magnitudes per unit of relative flux, 2.5 / ln 10. */
const MAG = 2.5 / Math.LN10

/**
 * Strengths of features against the straight line through the mean flux of two side bands, at their middles
 * (Worthey 1994, ApJS 95, 107; Trager et al. 1998, ApJS 116, 1): Å as ∫(1 − F/Fc) dλ, mag as −2.5 log₁₀ of the mean of
 * F/Fc; positive in absorption, in the star's rest frame. The spectrum is divided by its continuum first, so that a slope
 * or a curved response has no part in wide side bands. Of each pixel only the part inside a window counts. One
 * measurement a window, in their order.
 */
export function measureBands(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  { windows, resolution }: BandOptions,
): Measurement[] {
  const pixels = pixelsOf(spectrum, continuum)
  const flux = resolution
    ? smoothToFwhm(pixels.wavelength, pixels.flux, spectrum.usable, {
        from: resolution.current ?? 0,
        to: resolution.common,
      })
    : pixels.flux
  return windows.map((window) => measureBand(pixels, flux, 1 + frame.velocity / SPEED_OF_LIGHT, window))
}

function measureBand(pixels: Pixels, flux: Float64Array, stretch: number, window: BandWindow): Measurement {
  const { feature, species, wavelength: wavelengthRest, unit } = window
  const base = { feature, species, wavelengthRest, unit, method: 'side bands' } as const
  const mean = ([lo, hi]: readonly [number, number]) => windowMean(pixels, lo * stretch, hi * stretch, flux)
  const blue = mean(window.blue)
  const red = mean(window.red)
  const band = mean(window.band)
  const failed = notMeasurable(window, blue, band, red)
  if (failed) return { ...base, ...failed }
  if (!(blue.mean > 0) || !(red.mean > 0))
    return { ...base, status: 'masked', reason: 'a side band has no positive mean flux' }
  const { width, depth, variance, byBlue, byRed } = integrateBand(pixels, flux, stretch, window, blue, red)
  const distance = (red.centre - blue.centre) / ((CONTINUUM_PERIOD * wavelengthRest * stretch) / 5000)
  const middle = Math.min(pixels.wavelength.length - 1, firstPixelAbove(pixels, wavelengthRest * stretch))
  const bend = pixels.levelError[middle] * Math.min(1, distance * distance) * (width - depth)
  const scale = unit === 'mag' ? MAG / (width - depth) : 1 / stretch
  const ew = unit === 'mag' ? -MAG * Math.log(1 - depth / width) : depth / stretch
  if (!Number.isFinite(ew)) return { ...base, status: 'masked', reason: 'the band has no positive mean flux' }
  const ewErrNoise = Math.sqrt(variance) * scale
  const ewErrContinuum = Math.sqrt(byBlue * byBlue * blue.variance + byRed * byRed * red.variance + bend * bend) * scale
  const ewErr = Math.hypot(ewErrNoise, ewErrContinuum)
  const found = { ...base, ew, ewErrNoise, ewErrContinuum, ewErr, depth: depth / width }
  return Math.abs(ew) >= 3 * ewErr
    ? { ...found, status: 'measured' }
    : { ...found, status: 'absent', reason: 'weaker than three standard errors', limit3sigma: 3 * ewErr }
}

/** ∫(1 − F/Fc) dλ over the band in the observed frame, its variance, and how it follows the two side-band means. */
function integrateBand(
  pixels: Pixels,
  flux: Float64Array,
  stretch: number,
  window: BandWindow,
  blue: WindowMean,
  red: WindowMean,
) {
  const { lower, upper, noise } = pixels
  const lo = window.band[0] * stretch
  const hi = window.band[1] * stretch
  const distance = red.centre - blue.centre
  const apart = distance > 1e-6 * lo
  const slope = apart ? (red.mean - blue.mean) / distance : 0
  const start = apart ? blue.mean : 0.5 * (blue.mean + red.mean)
  let light = 0
  let variance = 0
  let width = 0
  let byBlue = 0
  let byRed = 0
  for (let i = firstPixelAbove(pixels, lo); i < lower.length && lower[i] < hi; i++) {
    if (!(flux[i] === flux[i])) continue
    const from = lower[i] > lo ? lower[i] : lo
    const to = upper[i] < hi ? upper[i] : hi
    const part = to - from
    const place = 0.5 * (from + to) - blue.centre
    const level = start + slope * place
    const ratio = (part * (part < upper[i] - lower[i] ? partMean(pixels, flux, i, [from, to]) : flux[i])) / level
    const share = apart ? place / distance : 0.5
    light += ratio
    variance += ((part * noise[i]) / level) ** 2
    byBlue += (ratio / level) * (1 - share)
    byRed += (ratio / level) * share
    width += part
  }
  const whole = (hi - lo) / width
  return {
    width: hi - lo,
    depth: hi - lo - light * whole,
    variance: variance * whole * whole,
    byBlue: byBlue * whole,
    byRed: byRed * whole,
  }
}

function notMeasurable(window: BandWindow, blue: WindowMean, band: WindowMean, red: WindowMean) {
  const parts = [
    ['blue side band', window.blue, blue],
    ['band', window.band, band],
    ['red side band', window.red, red],
  ] as const
  for (const [name, [lo, hi], { covered }] of parts)
    if (covered < COVERED)
      return {
        status: 'uncovered',
        reason: `${name} ${lo}–${hi} Å lies outside the data by ${percent(1 - covered)}`,
      } as const
  for (const [name, [lo, hi], { used }] of parts)
    if (used < USED)
      return { status: 'masked', reason: `${name} ${lo}–${hi} Å has ${percent(used)} usable samples` } as const
  return undefined
}

function percent(share: number): string {
  return `${Math.round(100 * share)} %`
}
