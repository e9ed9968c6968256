import type { Continuum } from '../continuum/types.ts'
import type { Measurement } from '../features/types.ts'
import { median } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { Threshold, ThresholdName } from '../tables/types.ts'
import type { TypePosterior } from '../typing/types.ts'
import type { Resolution, RestFrame, ZeroPoint } from '../velocity/types.ts'

/** What the checks of a spectrum look at: the spectrum and what was measured from it. */
export interface SpectrumInput {
  readonly spectrum: Spectrum
  readonly continuum: Continuum
  readonly restFrame: RestFrame
  readonly resolution?: Resolution
  readonly zeroPoint?: ZeroPoint
  readonly measurements: readonly Measurement[]
  readonly type: TypePosterior
}

/** The limits a check needs, by name. */
export type Limits = (name: ThresholdName) => number

/** Limits by name out of the table of thresholds. */
export function limitsOf(thresholds: Readonly<Record<ThresholdName, Threshold>>): Limits {
  return (name) => thresholds[name].value
}

/** Usable samples with a flux, a level above zero and a noise, packed; wavelengths [Å, air, as observed]. */
export interface Samples {
  readonly n: number
  /** Index in the spectrum, shape (n). */
  readonly index: Int32Array
  readonly wavelength: Float64Array
  readonly flux: Float64Array
  /** Flux ÷ level − 1. */
  readonly residual: Float64Array
  /** Noise ÷ level. */
  readonly noise: Float64Array
  /** Å per sample, median. */
  readonly step: number
}

/** Type number from which molecular bands cut the spectrum into steps (late K). */
const MOLECULAR = 57

/** True where the type's bands of molecules look like steps and disturb the levels beside the oxygen bands. */
export function isMolecular(type: TypePosterior): boolean {
  return type.typeNumber !== undefined && type.typeNumber >= MOLECULAR
}

/** Å: what optical spectrographs and silicon detectors see; outside it the checks below mean nothing. */
const OPTICAL = [3000, 10100] as const

/** Packs the samples the checks can use; `n` is 0 where no level could be set. */
export function samplesOf(spectrum: Spectrum, continuum: Continuum): Samples {
  const total = spectrum.flux.length
  const index = new Int32Array(total)
  let n = 0
  for (let i = 0; i < total; i++) {
    if (spectrum.wavelength[i] < OPTICAL[0] || spectrum.wavelength[i] > OPTICAL[1]) continue
    if (spectrum.usable[i] && Number.isFinite(spectrum.flux[i]) && continuum.level[i] > 0) index[n++] = i
  }
  const wavelength = new Float64Array(n)
  const flux = new Float64Array(n)
  const residual = new Float64Array(n)
  const noise = new Float64Array(n)
  for (let k = 0; k < n; k++) {
    const i = index[k]
    wavelength[k] = spectrum.wavelength[i]
    flux[k] = spectrum.flux[i]
    residual[k] = spectrum.flux[i] / continuum.level[i] - 1
    noise[k] = continuum.noise[i] / continuum.level[i]
  }
  return { n, index: index.subarray(0, n), wavelength, flux, residual, noise, step: stepOf(spectrum.wavelength) }
}

/** Median step of increasing wavelengths, from some two hundred of the steps. */
function stepOf(wavelength: Float64Array): number {
  const stride = Math.max(1, Math.floor(wavelength.length / 200))
  const steps: number[] = []
  for (let i = 1; i < wavelength.length; i += stride) steps.push(wavelength[i] - wavelength[i - 1])
  return median(steps)
}
