import type { LinePattern } from '../tables/types.ts'

const SIGMAS_PER_FWHM = 2 * Math.sqrt(2 * Math.log(2))

/** Cells of equal width in ln wavelength. */
export interface LogCells {
  /** ln wavelength [Å] of the left edge of cell 0. */
  readonly start: number
  readonly step: number
  readonly count: number
}

/**
 * Depth of a pattern at rest in cells of equal ln wavelength, each line a Gaussian of its own width and the
 * instrument's in quadrature.
 *
 * @param fwhm  [Å] of the instrument
 */
export function patternDepth(pattern: LinePattern, { start, step, count }: LogCells, fwhm: number): Float64Array {
  const depth = new Float64Array(count)
  const { bins } = pattern
  if (bins) {
    const last = bins.depth.length - 1
    const ratio = Math.exp(step)
    let wavelength = Math.exp(start + step / 2)
    for (let i = 0; i < count; i++, wavelength *= ratio) {
      const position = (wavelength - bins.first) / bins.step
      if (position < 0 || position >= last) continue
      const bin = Math.floor(position)
      depth[i] = bins.depth[bin] + (position - bin) * (bins.depth[bin + 1] - bins.depth[bin])
    }
  }
  const end = start + count * step
  for (const [wavelength, width, own] of pattern.lines) {
    const centre = Math.log(wavelength)
    if (centre < start || centre > end) continue
    // in cells, Δ ln λ = Δλ / λ; a cell itself is a box of variance 1/12
    const full = Math.hypot(own, fwhm) / SIGMAS_PER_FWHM / wavelength / step
    const sigma = Math.sqrt(full * full + 1 / 12)
    addGaussian(
      depth,
      (centre - start) / step - 0.5,
      sigma,
      width / (sigma * step * wavelength * Math.sqrt(2 * Math.PI)),
    )
  }
  return depth
}

/** Adds a Gaussian out to 3.5 sigmas, by the recurrence that needs two exponentials instead of one a cell. */
function addGaussian(depth: Float64Array, centre: number, sigma: number, peak: number): void {
  const from = Math.max(0, Math.ceil(centre - 3.5 * sigma))
  const to = Math.min(depth.length - 1, Math.floor(centre + 3.5 * sigma))
  const off = (from - centre) / sigma
  let value = peak * Math.exp(-0.5 * off * off)
  // ratio of neighbours: exp(−(2 off + 1/σ) / 2σ), itself falling by exp(−1/σ²) from cell to cell
  let ratio = Math.exp(-(off + 0.5 / sigma) / sigma)
  const fall = Math.exp(-1 / (sigma * sigma))
  for (let i = from; i <= to; i++) {
    depth[i] += value
    value *= ratio
    ratio *= fall
  }
}
