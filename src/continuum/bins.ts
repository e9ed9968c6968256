import type { Spectrum } from '../spectrum/types.ts'

/** Means of a spectrum over bins of one width in ln λ. Empty bins have count 0 and mean NaN. */
export interface Bins {
  /** ln of the lower edge of the first bin [ln Å]. */
  readonly start: number
  /** Width of a bin [ln Å]. */
  readonly step: number
  readonly mean: Float64Array
  /** 1 σ of the mean, from the noise of the samples. */
  readonly error: Float64Array
  /** Mean of ln λ over the samples used, less the bin's middle, in bins. */
  readonly offset: Float64Array
  readonly count: Float64Array
}

/** A sample this many σ above both samples two places away is a spike and stays out of the means. */
const SPIKE = 6

/**
 * Bins of the usable samples; single spikes (cosmic rays) are left out.
 *
 * @param noise  shape (n) [flux unit], 1 σ
 * @param step   width of a bin [ln Å]
 */
export function binSpectrum(spectrum: Spectrum, noise: Float64Array, step: number): Bins {
  const { wavelength, flux, usable } = spectrum
  const n = flux.length
  const start = Math.log(wavelength[0]) - 1e-9
  const size = Math.floor((Math.log(wavelength[n - 1]) - start) / step) + 1
  const mean = new Float64Array(size)
  const error = new Float64Array(size)
  const offset = new Float64Array(size)
  const count = new Float64Array(size)
  let k = 0
  let edge = Math.exp(start + step)
  let width = edge - wavelength[0]
  for (let i = 0; i < n; i++) {
    while (wavelength[i] >= edge && k + 1 < size) {
      const next = Math.exp(start + (++k + 1) * step)
      width = next - edge
      edge = next
    }
    if (!usable[i] || isSpike(flux, noise[i], i)) continue
    mean[k] += flux[i]
    error[k] += noise[i] * noise[i]
    offset[k] += (wavelength[i] - edge) / width + 0.5
    count[k]++
  }
  for (k = 0; k < size; k++) {
    const used = count[k]
    mean[k] = used ? mean[k] / used : NaN
    error[k] = used ? Math.sqrt(error[k]) / used : NaN
    offset[k] = used ? offset[k] / used : 0
  }
  return { start, step, mean, error, offset, count }
}

function isSpike(flux: Float64Array, noise: number, i: number): boolean {
  if (i < 2 || i + 2 >= flux.length) return false
  const before = flux[i - 2]
  const after = flux[i + 2]
  const level = Math.max(before, after)
  return flux[i] - level > SPIKE * noise && flux[i] > 1.15 * level
}
