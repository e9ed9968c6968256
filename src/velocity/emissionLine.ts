import { levenbergMarquardt } from '../numeric/levenbergMarquardt.ts'

const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2)

/** A Gaussian emission line on a level, as fitted. */
export interface EmissionLine {
  /** Å. */
  readonly centre: number
  readonly centreError: number
  /** Å. */
  readonly fwhm: number
  readonly fwhmError: number
  /** [flux] above the level. */
  readonly height: number
  /** Height over its error. */
  readonly significance: number
}

/**
 * The emission line nearest a wavelength, fitted by a Gaussian on a level; undefined when there are too few samples,
 * the fit fails or the line leaves its window. Errors are from the scatter about the fit.
 *
 * @param at    [Å] where the line is looked for
 * @param half  [Å] half the window that is fitted
 */
export function fitEmissionLine(
  wavelength: Float64Array,
  flux: Float64Array,
  at: number,
  half: number,
): EmissionLine | undefined {
  let from = 0
  while (from < wavelength.length && wavelength[from] < at - half) from++
  let to = from
  while (to < wavelength.length && wavelength[to] <= at + half) to++
  const n = to - from
  if (n < 6) return undefined
  let top = from
  let level = Infinity
  for (let i = from; i < to; i++) {
    if (!Number.isFinite(flux[i])) return undefined
    if (flux[i] > flux[top]) top = i
    level = Math.min(level, flux[i])
  }
  const height = flux[top] - level
  if (!(height > 0)) return undefined
  const step = (wavelength[to - 1] - wavelength[from]) / (n - 1)
  // scaled to a height of 1, so that the fit does not depend on the unit of the flux
  const y = Float64Array.from({ length: n }, (_, i) => (flux[from + i] - level) / height)
  const fit = levenbergMarquardt(
    (p, values, jacobian) => {
      for (let i = 0; i < n; i++) {
        const off = (wavelength[from + i] - p[1]) / p[2]
        const shape = Math.exp(-0.5 * off * off)
        values[i] = p[0] * shape + p[3]
        jacobian[4 * i] = shape
        jacobian[4 * i + 1] = (p[0] * shape * off) / p[2]
        jacobian[4 * i + 2] = (p[0] * shape * off * off) / p[2]
        jacobian[4 * i + 3] = 1
      }
    },
    y,
    new Float64Array(n).fill(1),
    { start: [1, wavelength[top], 1.2 * step, 0] },
  )
  const [peak, centre, width] = fit.parameters
  const variance = fit.chiSquare / (n - 4)
  const error = (j: number): number => Math.sqrt(fit.covariance[5 * j] * variance)
  if (!fit.converged || !(peak > 0) || Math.abs(centre - at) > half || !Number.isFinite(error(1))) return undefined
  return {
    centre,
    centreError: error(1),
    fwhm: FWHM_PER_SIGMA * Math.abs(width),
    fwhmError: FWHM_PER_SIGMA * error(2),
    height: peak * height,
    significance: peak / error(0),
  }
}
