import type { Spectrum } from './types.ts'

/**
 * The part of a spectrum with `from` ≤ wavelength ≤ `to` [Å, air]; the spectrum itself when it lies within. What the
 * file stores (`asStored`) stays as it is. Arrays are views where they can be.
 */
export function withinRange(spectrum: Spectrum, from: number, to: number): Spectrum {
  const { wavelength } = spectrum
  const n = wavelength.length
  let first = 0
  let end = n
  while (first < n && wavelength[first] < from) first++
  while (end > first && wavelength[end - 1] > to) end--
  if (first === 0 && end === n) return spectrum
  return {
    ...spectrum,
    wavelength: wavelength.subarray(first, end),
    flux: spectrum.flux.subarray(first, end),
    usable: spectrum.usable.subarray(first, end),
    ...(spectrum.sigma ? { sigma: spectrum.sigma.subarray(first, end) } : {}),
    ...(spectrum.sky ? { sky: spectrum.sky.subarray(first, end) } : {}),
  }
}
