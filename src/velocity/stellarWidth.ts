import type { Continuum } from '../continuum/types.ts'
import { median } from '../numeric/median.ts'
import { powerSpectrum } from '../numeric/powerSpectrum.ts'
import { subtractRunningMean } from '../numeric/runningMean.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { starLight } from './starLight.ts'

/** Where lines are many in every type; used when at least `least` Å of it are there, else the whole spectrum [Å]. */
const CROWDED = { first: 3900, last: 5500, least: 400 } as const

/** Slopes over more than this [Å] are taken out first. */
const SLOPE = 60

/**
 * The logarithm of the power is fitted against the square of the angular frequency between these fractions of 1 / σ:
 * below them the lines' own places and widths tell, above them noise. Chosen on spectra smoothed to 4.5 to 10 Å.
 */
const FITTED = { from: 0.8, to: 2.4, overNoise: 5 } as const
/** In noise fewer frequencies are left; then broader structure must do, which gives wider limits. */
const FITTED_IN_NOISE = { from: 0.4, to: 2.4, overNoise: 2 } as const

const BINS = 60
/** Share of the highest frequencies whose median is taken for the noise. */
const NOISE_SHARE = 0.15
const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2)
/** Samples a line must be wide to be told from noise. */
const NARROWEST = 1.9
/** Found scatter of single stars about the known width, as a fraction. */
const SCATTER = 0.15

/**
 * FWHM [Å] of the narrowest structure of a star's spectrum, or undefined where nothing stands above the noise. Crowded
 * lines without width of their own have a flat power spectrum; an instrument of Gaussian profile multiplies it by
 * exp(−σ² k²), which is what is fitted. Rotation, and lines with width of their own, look the same.
 */
export function stellarWidth(
  spectrum: Spectrum,
  continuum: Continuum,
): { readonly fwhm: number; readonly error: number } | undefined {
  const series = evenDepth(spectrum, continuum)
  if (series === undefined) return undefined
  const { depth, variance, step } = series
  const n = depth.length
  const flat = subtractRunningMean(depth, undefined, Math.max(2, Math.round(SLOPE / 2 / step)))
  const power = powerSpectrum(flat.map((d, i) => d * (0.5 - 0.5 * Math.cos((2 * Math.PI * (i + 0.5)) / n))))
  const { frequency, mean } = binned(power, step)
  const expected = variance * (3 / 8) * n
  const noise = Math.max(expected, median(mean.subarray(Math.round(BINS * (1 - NOISE_SHARE)))))
  const sigma =
    convergedSigma(frequency, mean, { ...FITTED, noise, start: 1.5 * step }) ??
    convergedSigma(frequency, mean, { ...FITTED_IN_NOISE, noise, start: 1.5 * step })
  // narrower than two samples is noise, not a line
  if (sigma === undefined || FWHM_PER_SIGMA * sigma < NARROWEST * step) return undefined
  const fwhm = FWHM_PER_SIGMA * sigma
  return { fwhm, error: SCATTER * fwhm }
}

interface FitRange {
  readonly from: number
  readonly to: number
  readonly overNoise: number
  readonly noise: number
  readonly start: number
}

function convergedSigma(frequency: Float64Array, mean: Float64Array, range: FitRange): number | undefined {
  let sigma = range.start
  for (let round = 0; round < 20; round++) {
    const found = fitSigma(frequency, mean, sigma, range)
    if (found === undefined) return undefined
    if (Math.abs(found - sigma) < 0.01 * sigma) return found
    sigma = (sigma + found) / 2
  }
  return sigma
}

/** Depth below the continuum at even steps of wavelength, straight lines across what is not used. */
function evenDepth(
  spectrum: Spectrum,
  continuum: Continuum,
): { readonly depth: Float64Array; readonly variance: number; readonly step: number } | undefined {
  const { wavelength } = spectrum
  const { depth, variance, used } = starLight(spectrum, continuum)
  const end = wavelength[wavelength.length - 1]
  const isCrowded = Math.min(end, CROWDED.last) - Math.max(wavelength[0], CROWDED.first) >= CROWDED.least
  const first = isCrowded ? CROWDED.first : -Infinity
  const last = isCrowded ? CROWDED.last : Infinity
  const kept: number[] = []
  for (let i = 0; i < wavelength.length; i++)
    if (used[i] === 1 && wavelength[i] >= first && wavelength[i] <= last) kept.push(i)
  if (kept.length < 2 * BINS) return undefined
  const from = wavelength[kept[0]]
  const to = wavelength[kept[kept.length - 1]]
  const step = (to - from) / (kept[kept.length - 1] - kept[0])
  const out = new Float64Array(Math.floor((to - from) / step) + 1)
  for (let i = 0, k = 0; i < out.length; i++) {
    const at = from + i * step
    while (k < kept.length - 2 && wavelength[kept[k + 1]] < at) k++
    const [left, right] = [kept[k], kept[k + 1]]
    const share = (at - wavelength[left]) / (wavelength[right] - wavelength[left])
    out[i] = depth[left] + share * (depth[right] - depth[left])
  }
  return { depth: out, variance: median(kept.map((i) => variance[i])), step }
}

/** Mean power in bins of equal width, with their middle angular frequency [1/Å]. */
function binned(power: Float64Array, step: number): { readonly frequency: Float64Array; readonly mean: Float64Array } {
  const frequency = new Float64Array(BINS)
  const mean = new Float64Array(BINS)
  for (let bin = 0; bin < BINS; bin++) {
    const from = Math.round((bin * power.length) / BINS)
    const to = Math.max(from + 1, Math.round(((bin + 1) * power.length) / BINS))
    for (let i = from; i < to; i++) mean[bin] += power[i] / (to - from)
    frequency[bin] = (Math.PI * (bin + 0.5)) / BINS / step
  }
  return { frequency, mean }
}

/** Slope of ln(power − noise) against k², as σ; undefined where fewer than three bins stand above the noise. */
function fitSigma(
  frequency: Float64Array,
  mean: Float64Array,
  sigma: number,
  { from, to, overNoise, noise }: FitRange,
): number | undefined {
  let n = 0
  let sx = 0
  let sy = 0
  let sxx = 0
  let sxy = 0
  for (let i = 0; i < frequency.length; i++) {
    const k = frequency[i]
    if (k * sigma < from || k * sigma > to || !(mean[i] > overNoise * noise)) continue
    const x = k * k
    const y = Math.log(mean[i] - noise)
    n++
    sx += x
    sy += y
    sxx += x * x
    sxy += x * y
  }
  if (n < 3) return undefined
  const slope = (n * sxy - sx * sy) / (n * sxx - sx * sx)
  return slope < 0 ? Math.sqrt(-slope) : undefined
}
