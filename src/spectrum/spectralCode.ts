import { airToVacuum, vacuumToAir } from './air.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'
import { HC_EV_ANGSTROM } from './unit.ts'

/**
 * A type of spectral axis of FITS WCS Paper III (Greisen et al. 2006, A&A 446, 747, table 1): how its value gives the
 * vacuum wavelength. Values are in Hz, eV, cm⁻¹, km/s, Å or 1, wavelengths in Å.
 */
export interface SpectralCode {
  readonly quantity: 'frequency' | 'energy' | 'wavenumber' | 'velocity' | 'wavelength' | 'ratio'
  readonly words: string
  readonly needsRest: boolean
  /** Vacuum wavelength of a value; `rest` is the rest wavelength in vacuum. */
  toVacuum(value: number, rest: number): number
  /** Derivative of that by the value. */
  slope(value: number, rest: number): number
}

const inverse = (constant: number): Pick<SpectralCode, 'toVacuum' | 'slope'> => ({
  toVacuum: (value) => constant / value,
  slope: (value) => -constant / value ** 2,
})

/** The codes by their four letters. */
export const SPECTRAL_CODES: Readonly<Record<string, SpectralCode>> = {
  FREQ: { quantity: 'frequency', words: 'frequency axis', needsRest: false, ...inverse(SPEED_OF_LIGHT * 1e13) },
  ENER: { quantity: 'energy', words: 'photon energy axis', needsRest: false, ...inverse(HC_EV_ANGSTROM) },
  WAVN: { quantity: 'wavenumber', words: 'wavenumber axis', needsRest: false, ...inverse(1e8) },
  WAVE: {
    quantity: 'wavelength',
    words: 'vacuum wavelength axis',
    needsRest: false,
    toVacuum: (value) => value,
    slope: () => 1,
  },
  AWAV: {
    quantity: 'wavelength',
    words: 'air wavelength axis',
    needsRest: false,
    toVacuum: airToVacuum,
    slope: (value) => (airToVacuum(value + 0.5) - airToVacuum(value - 0.5)) / 1,
  },
  VRAD: {
    quantity: 'velocity',
    words: 'radio velocity axis',
    needsRest: true,
    toVacuum: (value, rest) => rest / (1 - value / SPEED_OF_LIGHT),
    slope: (value, rest) => rest / SPEED_OF_LIGHT / (1 - value / SPEED_OF_LIGHT) ** 2,
  },
  VOPT: {
    quantity: 'velocity',
    words: 'optical velocity axis',
    needsRest: true,
    toVacuum: (value, rest) => rest * (1 + value / SPEED_OF_LIGHT),
    slope: (_value, rest) => rest / SPEED_OF_LIGHT,
  },
  ZOPT: {
    quantity: 'ratio',
    words: 'redshift axis',
    needsRest: true,
    toVacuum: (value, rest) => rest * (1 + value),
    slope: (_value, rest) => rest,
  },
  VELO: {
    quantity: 'velocity',
    words: 'relativistic velocity axis',
    needsRest: true,
    toVacuum: (value, rest) => doppler(value / SPEED_OF_LIGHT, rest),
    slope: (value, rest) => dopplerSlope(value / SPEED_OF_LIGHT, rest) / SPEED_OF_LIGHT,
  },
  BETA: {
    quantity: 'ratio',
    words: 'relativistic velocity axis (v/c)',
    needsRest: true,
    toVacuum: doppler,
    slope: dopplerSlope,
  },
}

function doppler(beta: number, rest: number): number {
  return rest * Math.sqrt((1 + beta) / (1 - beta))
}

function dopplerSlope(beta: number, rest: number): number {
  return doppler(beta, rest) / (1 - beta ** 2)
}

/** A variable in which an axis may be sampled evenly (third letter of `-F2W` and the like). */
export interface SamplingVariable {
  readonly words: string
  /** Value at a vacuum wavelength [Å]. */
  of(vacuum: number, rest: number): number
  /** Derivative of that by the vacuum wavelength. */
  slope(vacuum: number, rest: number): number
  /** The vacuum wavelength [Å] back. */
  toVacuum(value: number, rest: number): number
}

/** The sampling variables by their letter: frequency, vacuum wavelength, air wavelength, velocity. */
export const SAMPLING: Readonly<Record<string, SamplingVariable>> = {
  F: { words: 'frequency', of: (w) => 1 / w, slope: (w) => -1 / w ** 2, toVacuum: (value) => 1 / value },
  W: { words: 'vacuum wavelength', of: (w) => w, slope: () => 1, toVacuum: (value) => value },
  A: {
    words: 'air wavelength',
    of: (w) => vacuumToAir(w),
    slope: (w) => vacuumToAir(w + 0.5) - vacuumToAir(w - 0.5),
    toVacuum: airToVacuum,
  },
  V: {
    words: 'velocity',
    of: (w, rest) => (w ** 2 - rest ** 2) / (w ** 2 + rest ** 2),
    slope: (w, rest) => (4 * w * rest ** 2) / (w ** 2 + rest ** 2) ** 2,
    toVacuum: doppler,
  },
}
