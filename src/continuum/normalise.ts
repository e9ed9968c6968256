import type { Spectrum } from '../spectrum/types.ts'
import type { Continuum } from './types.ts'

/** Flux ÷ level, shape (n); NaN where a sample is not usable or has no level. */
export function normalise(spectrum: Spectrum, continuum: Continuum): Float64Array {
  const { flux, usable } = spectrum
  const out = new Float64Array(flux.length)
  for (let i = 0; i < out.length; i++) out[i] = usable[i] && continuum.level[i] > 0 ? flux[i] / continuum.level[i] : NaN
  return out
}
