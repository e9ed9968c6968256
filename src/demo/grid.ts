/**
 * Wavelengths of the fine grid on which demo light is made [Å, air]: uniform, so that smoothing is one pass.
 * It reaches past both set-ups by more than any shift or profile.
 */
export const FINE_FIRST = 3400
export const FINE_STEP = 0.5
export const FINE_SAMPLES = 11401

/** The fine grid itself, shape (FINE_SAMPLES) [Å]. */
export function fineGrid(): Float64Array {
  return Float64Array.from({ length: FINE_SAMPLES }, (_, i) => FINE_FIRST + FINE_STEP * i)
}

/** Value of an array on the fine grid at a wavelength, linear between samples, its end values beyond. */
export function valueAt(values: Float64Array, wavelength: number): number {
  const position = (wavelength - FINE_FIRST) / FINE_STEP
  if (position <= 0) return values[0]
  if (position >= values.length - 1) return values[values.length - 1]
  const i = Math.floor(position)
  return values[i] + (values[i + 1] - values[i]) * (position - i)
}

/**
 * An array on the fine grid as an instrument with a Gaussian profile would show it; the ends are continued flat.
 *
 * @param fwhm  full width of the profile at half its height [Å]
 */
export function blurred(values: Float64Array, fwhm: number): Float64Array {
  const sigma = fwhm / (2 * Math.sqrt(2 * Math.LN2)) / FINE_STEP
  const reach = Math.ceil(4 * sigma)
  const weights = Float64Array.from({ length: 2 * reach + 1 }, (_, k) => Math.exp(-0.5 * ((k - reach) / sigma) ** 2))
  const total = weights.reduce((sum, weight) => sum + weight, 0)
  const out = new Float64Array(values.length)
  for (let i = 0; i < values.length; i++) {
    let sum = 0
    for (let k = -reach; k <= reach; k++) {
      const j = Math.min(values.length - 1, Math.max(0, i + k))
      sum += weights[k + reach] * values[j]
    }
    out[i] = sum / total
  }
  return out
}
