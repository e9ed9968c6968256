import { fitContinuum } from '../../../src/continuum/fitContinuum.ts'
import { median } from '../../../src/numeric/median.ts'
import { seededNormal, seededUniform } from '../../../src/numeric/random.ts'
import { smoothToFwhm } from '../../../src/numeric/smoothToFwhm.ts'
import type { Spectrum } from '../../../src/spectrum/types.ts'
import { SPEED_OF_LIGHT } from '../../../src/numeric/speedOfLight.ts'

/** A spectrum made worse on purpose; the seed is the star's own, so that the table is the same each time. */
export type Degrade = (spectrum: Spectrum, seed: number) => Spectrum

export interface Degradation {
  readonly name: string
  readonly group: string
  readonly degrade: Degrade
  /** Å, where the instrument's width is changed and known. */
  readonly fwhm?: number
}

/** Å, of the atlas (Jacoby, Hunter & Christian 1984). */
const OWN_FWHM = 4.5

function withFlux(spectrum: Spectrum, flux: (i: number) => number): Spectrum {
  return { ...spectrum, flux: spectrum.flux.map((_, i) => flux(i)) }
}

/** White noise for a signal-to-noise per Å, everywhere the same. */
function noisy(snr: number): Degrade {
  return (spectrum, seed) => {
    const { level } = fitContinuum(spectrum)
    const normal = seededNormal(seed)
    const { wavelength, flux } = spectrum
    const step = (wavelength[wavelength.length - 1] - wavelength[0]) / (wavelength.length - 1)
    return withFlux(spectrum, (i) => flux[i] + ((level[i] > 0 ? level[i] : 0) * normal()) / (snr * Math.sqrt(step)))
  }
}

function smoothed(fwhm: number): Degrade {
  return (spectrum) => ({
    ...spectrum,
    flux: smoothToFwhm(spectrum.wavelength, spectrum.flux, spectrum.usable, { from: OWN_FWHM, to: fwhm }),
  })
}

function cut(lo: number, hi: number): Degrade {
  return (spectrum) => {
    const first = spectrum.wavelength.findIndex((w) => w >= lo)
    const after = spectrum.wavelength.findIndex((w) => w > hi)
    const end = after < 0 ? spectrum.wavelength.length : after
    return {
      ...spectrum,
      wavelength: spectrum.wavelength.slice(first, end),
      flux: spectrum.flux.slice(first, end),
      usable: spectrum.usable.slice(first, end),
    }
  }
}

function scaled(factor: (wavelength: number) => number): Degrade {
  return (spectrum) => withFlux(spectrum, (i) => spectrum.flux[i] * factor(spectrum.wavelength[i]))
}

function moved(place: (wavelength: number, middle: number) => number): Degrade {
  return (spectrum) => {
    const { wavelength } = spectrum
    const middle = 0.5 * (wavelength[0] + wavelength[wavelength.length - 1])
    return { ...spectrum, wavelength: wavelength.map((w) => place(w, middle)) }
  }
}

/** Reddening in proportion to λ^−1.3 about 5500 Å (a fair fit to the mean law from 3500 to 7500 Å, from memory). */
const reddened = (av: number): Degrade => scaled((w) => 10 ** (-0.4 * av * (5500 / w) ** 1.3))
/** A steep blaze: a tenth of its peak at both ends of the atlas. */
const blaze = scaled((w) => Math.exp(-(((w - 5600) / 1300) ** 2)))
/** Fringes of 3 %, 350 Å long, that no flat field took out. */
const ripple = scaled((w) => 1 + 0.03 * Math.sin((2 * Math.PI * w) / 350))

const scattered: Degrade = (spectrum) => {
  const light = 0.05 * median(spectrum.flux)
  return withFlux(spectrum, (i) => spectrum.flux[i] + light)
}

/** On 1 % of samples, 0.2 to 5 times the median flux. */
const cosmicRays: Degrade = (spectrum, seed) => {
  const uniform = seededUniform(seed)
  const level = median(spectrum.flux)
  return withFlux(spectrum, (i) => spectrum.flux[i] + (uniform() < 0.01 ? level * (0.2 + 4.8 * uniform()) : 0))
}

/** What the atlas stars are degraded by, in the order of the validation table. */
export const DEGRADATIONS: readonly Degradation[] = [
  { group: 'as it is', name: 'FWHM 4.5 Å', degrade: (spectrum) => spectrum },
  ...[100, 50, 20, 10, 5].map((snr) => ({ group: 'S/N per Å', name: String(snr), degrade: noisy(snr) })),
  ...[6, 8, 12, 16].map((fwhm) => ({ group: 'FWHM', name: `${fwhm} Å`, degrade: smoothed(fwhm), fwhm })),
  ...(
    [
      [3850, 4600],
      [4000, 5500],
      [4500, 7000],
      [5800, 7400],
      [6400, 6750],
    ] as const
  ).map(([lo, hi]) => ({ group: 'only', name: `${lo}–${hi} Å`, degrade: cut(lo, hi) })),
  { group: 'response', name: 'steep blaze', degrade: blaze },
  { group: 'response', name: '3 % ripple', degrade: ripple },
  ...[2, 5].map((av) => ({ group: 'reddening', name: `A_V = ${av}`, degrade: reddened(av) })),
  ...[-600, -200, 200, 600].map((v) => ({
    group: 'velocity',
    name: `${v} km/s`,
    degrade: moved((w) => w * (1 + v / SPEED_OF_LIGHT)),
  })),
  { group: 'wavelengths', name: '1 Å off', degrade: moved((w) => w + 1) },
  { group: 'wavelengths', name: 'stretched by 0.1 %', degrade: moved((w, middle) => middle + (w - middle) * 1.001) },
  { group: 'scattered light', name: '5 %', degrade: scattered },
  { group: 'cosmic rays', name: '1 % of samples', degrade: cosmicRays },
]
