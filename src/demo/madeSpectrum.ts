import { seededNormal } from '../numeric/random.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { blurredAt } from './grid.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** How a made spectrum is sampled. */
export interface MadeOptions {
  /** Å: first sample, last sample at most, step, FWHM of the profile. */
  readonly first?: number
  readonly last?: number
  readonly step?: number
  readonly fwhm?: number
  /** Signal-to-noise ratio of a sample of mean level; no noise when left out. */
  readonly snr?: number
  readonly seed?: number
  /** km/s. */
  readonly velocity?: number
}

/**
 * Light on the fine grid as a spectrum in air, with its noise in `sigma`: what a reader of files would hand on. For
 * tests that want a spectrum of known content without a file.
 */
export function madeSpectrum(light: Float64Array, options: MadeOptions = {}): Spectrum {
  const { first = 3700, last = 9000, step = 1.5, fwhm = 5, snr, seed = 1, velocity = 0 } = options
  const samples = Math.floor((last - first) / step) + 1
  const wavelength = Float64Array.from({ length: samples }, (_, i) => first + step * i)
  const atRest = wavelength.map((x) => x / (1 + velocity / SPEED_OF_LIGHT))
  const clean = blurredAt(light, atRest, fwhm)
  const mean = clean.reduce((sum, value) => sum + value, 0) / samples
  const normal = seededNormal(seed)
  // photon noise: variance in proportion to the light
  const sigma = clean.map((value) => (snr === undefined ? 0 : (Math.sqrt(Math.max(value, 0) / mean) * mean) / snr))
  const flux = clean.map((value, i) => value + sigma[i] * normal())
  return {
    wavelength,
    flux,
    ...(snr === undefined ? {} : { sigma }),
    usable: new Uint8Array(samples).fill(1),
    hdu: 0,
    medium: 'air',
    mediumHow: 'declared',
    frame: 'topocentric',
    fluxUnit: 'photon',
    fluxKind: 'counts',
    uncertainty: snr === undefined ? 'none' : 'sigma',
    convention: 'made in memory',
    role: 'star',
    facts: {},
    asStored: {
      samples,
      medium: 'air',
      first: wavelength[0],
      last: wavelength[samples - 1],
      fluxFirst: flux[0],
      fluxLast: flux[samples - 1],
      nonfinite: 0,
    },
    notes: [],
  }
}
