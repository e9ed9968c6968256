import { median, robustSigma } from '../numeric/median.ts'
import { fitEmissionLine } from './emissionLine.ts'
import type { Resolution } from './types.ts'

/** Lines are taken from this many sigmas of the scatter between neighbouring samples up. */
const SIGMAS = 12
/** Fewest lines that tell a width. */
const FEWEST = 3
/** At most this many, the brightest. */
const MOST = 60

/**
 * The instrument's FWHM [Å] from the lines of a lamp: the median of Gaussian fits to isolated, unsaturated lines, with
 * the error of that median; undefined when fewer than three lines can be measured.
 *
 * @param wavelength  shape (n) [Å], increasing
 * @param flux        shape (n)
 */
export function arcResolution(wavelength: Float64Array, flux: Float64Array): Resolution | undefined {
  const peaks = brightPeaks(flux)
  const widths: number[] = []
  for (const i of peaks.slice(0, MOST)) {
    const step = (wavelength[i + 1] - wavelength[i - 1]) / 2
    const nearest = Math.min(...peaks.filter((j) => j !== i).map((j) => Math.abs(j - i)))
    const first = fitEmissionLine(wavelength, flux, wavelength[i], 5 * step)
    if (first === undefined || !(first.fwhm > 1.2 * step) || nearest * step < 2.5 * first.fwhm) continue
    const line = fitEmissionLine(wavelength, flux, first.centre, Math.max(4 * step, 1.6 * first.fwhm))
    if (line && line.significance > SIGMAS && line.fwhmError < 0.15 * line.fwhm) widths.push(line.fwhm)
  }
  if (widths.length < FEWEST) return undefined
  return {
    fwhm: median(widths),
    error: Math.max((1.253 * robustSigma(widths)) / Math.sqrt(widths.length), 0.01 * median(widths)),
    how: 'arc lines',
    isUpperLimit: false,
  }
}

/** Indices of peaks well above the scatter, brightest first; flat tops are saturated and left out. */
function brightPeaks(flux: Float64Array): number[] {
  const differences = Float64Array.from({ length: Math.max(0, flux.length - 1) }, (_, i) => flux[i + 1] - flux[i])
  const noise = robustSigma(differences) / Math.SQRT2
  const level = median(flux)
  const peaks: number[] = []
  for (let i = 2; i < flux.length - 2; i++) {
    const isPeak = flux[i] > flux[i - 1] && flux[i] > flux[i + 1] && flux[i] > flux[i - 2] && flux[i] > flux[i + 2]
    if (isPeak && flux[i] - level > SIGMAS * noise) peaks.push(i)
  }
  return peaks.sort((a, b) => flux[b] - flux[a])
}
