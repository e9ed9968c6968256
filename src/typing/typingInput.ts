import type { Continuum } from '../continuum/types.ts'
import { measureBands } from '../features/measureBands.ts'
import type { Measurement } from '../features/types.ts'
import { median } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { BandWindow } from '../tables/types.ts'
import type { Resolution, RestFrame } from '../velocity/types.ts'

/** All that a type is told from: plain data, without any type that somebody expected. */
export interface TypingInput {
  /** Side-band features at the calibration's common resolution, in the star's rest frame. */
  readonly measurements: readonly Measurement[]
  /** False where no velocity could be found and the file's own wavelengths were used. */
  readonly isRestTrusted: boolean
  /** km/s, 1 σ, where trusted. */
  readonly velocityError?: number
  /** Name of the line pattern that the velocity was found with. */
  readonly pattern?: string
  /** Number of usable samples. */
  readonly samples: number
}

/** Which features a type is told from, and the resolution they are measured at. */
export interface TypingInputOptions {
  readonly windows: readonly BandWindow[]
  /** Å, FWHM that the calibration's features are measured at. */
  readonly commonFwhm: number
  readonly resolution?: Resolution
}

/** Samples to a FWHM in most spectrographs (Nyquist, with a little room); common practice, no source. */
const SAMPLES_PER_FWHM = 2.2
/** Ranges [Å] that have their own sampling in files joined from arms. */
const RANGE_EDGES = [0, 4700, 5550, 6900, Infinity]

/** The typing input of a spectrum: its side-band features at the common resolution, at rest. */
export function typingInput(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  { windows, commonFwhm, resolution }: TypingInputOptions,
): TypingInput {
  const measurements: Measurement[] = new Array<Measurement>(windows.length)
  const widths = RANGE_EDGES.slice(1).map((edge, i) => ownFwhm(spectrum, [RANGE_EDGES[i], edge], resolution))
  for (const width of new Set(widths)) {
    const chosen = windows
      .map((window, at) => ({ window, at }))
      .filter(({ window }) => widths[RANGE_EDGES.findIndex((edge) => edge > window.wavelength) - 1] === width)
    if (chosen.length === 0) continue
    const found = measureBands(spectrum, continuum, frame, {
      windows: chosen.map(({ window }) => window),
      resolution: { current: width, common: commonFwhm },
    })
    chosen.forEach(({ at }, k) => (measurements[at] = found[k]))
  }
  let samples = 0
  for (const flag of spectrum.usable) samples += flag
  return {
    measurements,
    isRestTrusted: frame.trusted,
    ...(frame.error === undefined ? {} : { velocityError: frame.error }),
    ...(frame.pattern === undefined ? {} : { pattern: frame.pattern }),
    samples,
  }
}

/**
 * Å, FWHM of the instrument in a range: as told by the header or by lines of sky and lamp, else from the sampling. The
 * width of stellar lines is no guide, since a fast rotator would then be smoothed less than its neighbours.
 */
function ownFwhm(spectrum: Spectrum, [lo, hi]: readonly [number, number], resolution?: Resolution): number {
  if (resolution && !resolution.isUpperLimit && !resolution.how.startsWith('sampling')) return resolution.fwhm
  const steps: number[] = []
  const { wavelength } = spectrum
  for (let i = 1; i < wavelength.length; i++)
    if (wavelength[i] >= lo && wavelength[i] < hi) steps.push(wavelength[i] - wavelength[i - 1])
  if (steps.length < 8) for (let i = 1; i < wavelength.length; i++) steps.push(wavelength[i] - wavelength[i - 1])
  return Number((SAMPLES_PER_FWHM * median(steps)).toPrecision(2))
}
