import type { Spectrum } from '../spectrum/types.ts'
import type { BandWindow } from '../tables/types.ts'

/**
 * Local equivalent width after Pickles 1998, PASP 110, 863: w·(1 − 2 F_line / (F_blue + F_red)) with mean fluxes over
 * whole pixels, both end pixels counted, and w the width of the pixels of the line window [Å]; for a window in
 * magnitudes −2.5 log₁₀ of the ratio. This is the rule that reproduces the values published with it (the width is one
 * pixel more than the window's). NaN where a window has no usable pixel. For comparison with that work only; see
 * `measureBands` for the program's own measure.
 */
export function localEquivalentWidth(spectrum: Spectrum, { blue, band, red, unit }: BandWindow): number {
  const line = meanOfWholePixels(spectrum, band)
  const level = 0.5 * (meanOfWholePixels(spectrum, blue).mean + meanOfWholePixels(spectrum, red).mean)
  return unit === 'mag' ? -2.5 * Math.log10(line.mean / level) : line.width * (1 - line.mean / level)
}

function meanOfWholePixels({ wavelength, flux, usable }: Spectrum, [lo, hi]: readonly [number, number]) {
  let sum = 0
  let width = 0
  let count = 0
  for (let i = 1; i + 1 < wavelength.length; i++) {
    if (wavelength[i] < lo || wavelength[i] > hi || !usable[i]) continue
    sum += flux[i]
    width += 0.5 * (wavelength[i + 1] - wavelength[i - 1])
    count++
  }
  return { mean: sum / count, width }
}
