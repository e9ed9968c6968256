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

/** Half width of the stretch that is summed for each sample, in standard deviations of the profile. */
const PROFILE_REACH = 4

/**
 * An array on the fine grid as an instrument with a Gaussian profile shows it at the given wavelengths; the ends of
 * the grid are continued flat.
 *
 * @param wavelengths  shape (n) [Å]
 * @param fwhm         full width of the profile at half its height [Å], more than a step of the grid
 * @returns            shape (n), the unit of `values`
 */
export function blurredAt(values: Float64Array, wavelengths: Float64Array, fwhm: number): Float64Array {
  const sigma = fwhm / (2 * Math.sqrt(2 * Math.LN2)) / FINE_STEP
  const last = values.length - 1
  return wavelengths.map((wavelength) => {
    const centre = (wavelength - FINE_FIRST) / FINE_STEP
    let sum = 0
    let total = 0
    for (let i = Math.ceil(centre - PROFILE_REACH * sigma); i <= centre + PROFILE_REACH * sigma; i++) {
      const weight = Math.exp(-0.5 * ((i - centre) / sigma) ** 2)
      sum += weight * values[Math.min(last, Math.max(0, i))]
      total += weight
    }
    return sum / total
  })
}
