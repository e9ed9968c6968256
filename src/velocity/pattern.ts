import type { LinePattern } from '../tables/types.ts'

const SIGMAS_PER_FWHM = 2 * Math.sqrt(2 * Math.log(2))

/**
 * Depth of a pattern at rest on a grid of equal steps in ln wavelength, each line a Gaussian of its own width and the
 * instrument's in quadrature.
 *
 * @param start  ln wavelength [Å] of the left edge of cell 0
 * @param count  number of cells
 * @param fwhm   [Å] of the instrument
 */
export function patternDepth(
  pattern: LinePattern,
  {
    start,
    step,
    count,
    fwhm,
  }: { readonly start: number; readonly step: number; readonly count: number; readonly fwhm: number },
): Float64Array {
  const depth = new Float64Array(count)
  const { bins } = pattern
  if (bins) {
    const last = bins.depth.length - 1
    for (let i = 0; i < count; i++) {
      const position = (Math.exp(start + (i + 0.5) * step) - bins.first) / bins.step
      if (position < 0 || position >= last) continue
      const bin = Math.floor(position)
      depth[i] = bins.depth[bin] + (position - bin) * (bins.depth[bin + 1] - bins.depth[bin])
    }
  }
  for (const [wavelength, width, own] of pattern.lines) {
    const full = Math.hypot(own, fwhm)
    // in cells: Δ ln λ = Δλ / λ
    const sigma = full / SIGMAS_PER_FWHM / wavelength / step
    const peak = width / (sigma * step * wavelength * Math.sqrt(2 * Math.PI))
    const centre = (Math.log(wavelength) - start) / step - 0.5
    const from = Math.max(0, Math.ceil(centre - 3.5 * sigma))
    const to = Math.min(count - 1, Math.floor(centre + 3.5 * sigma))
    for (let i = from; i <= to; i++) {
      const off = (i - centre) / sigma
      depth[i] += peak * Math.exp(-0.5 * off * off)
    }
  }
  return depth
}
