import { firstNotBelow } from '../numeric/firstNotBelow.ts'
import type { Continuum } from '../continuum/types.ts'
import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { median } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { figure } from './figures.ts'
import type { Limits } from './samples.ts'
import type { SignalToNoise } from './types.ts'

/** Å: centres of the bands in which signal-to-noise is given, and half their width. */
const BANDS = { blue: 4500, visual: 5500, red: 6500 } as const
const HALF_WIDTH = 150
/** Samples a band needs, and the share of it that must be covered. */
const FEWEST = 8
const COVERED = 0.5

/**
 * Signal-to-noise per Å about 4500, 5500 and 6500 Å: the median of level ÷ noise of the usable samples (flux ÷ noise
 * where no level could be set), times √(samples per Å). A band covered by less than half, or without a known noise, is
 * left out.
 */
export function signalToNoise(spectrum: Spectrum, continuum: Continuum): SignalToNoise {
  const found: { -readonly [band in keyof SignalToNoise]: number } = {}
  for (const [band, centre] of Object.entries(BANDS) as [keyof typeof BANDS, number][]) {
    const value = inRange(spectrum, continuum, centre - HALF_WIDTH, centre + HALF_WIDTH)
    if (value !== undefined) found[band] = value
  }
  return found
}

/** The best signal-to-noise per Å: of the three bands, else of the whole spectrum; undefined without a known noise. */
export function bestSignalToNoise(spectrum: Spectrum, continuum: Continuum, snr: SignalToNoise): number | undefined {
  const known = [snr.blue, snr.visual, snr.red].filter((value) => value !== undefined)
  if (known.length) return Math.max(...known)
  const { wavelength } = spectrum
  return wavelength.length < FEWEST
    ? undefined
    : inRange(spectrum, continuum, wavelength[0], wavelength[wavelength.length - 1] + 1e-6)
}

function inRange(spectrum: Spectrum, continuum: Continuum, from: number, to: number): number | undefined {
  const { wavelength, flux, usable } = spectrum
  const first = firstNotBelow(wavelength, from)
  const last = firstNotBelow(wavelength, to)
  const ratios: number[] = []
  for (let i = first; i < last; i++) {
    const noise = continuum.noise[i]
    if (!usable[i] || !(noise > 0)) continue
    const ratio = (continuum.level[i] > 0 ? continuum.level[i] : flux[i]) / noise
    if (Number.isFinite(ratio)) ratios.push(ratio)
  }
  if (ratios.length < FEWEST) return undefined
  const covered = wavelength[last - 1] - wavelength[first]
  if (covered < COVERED * (to - from) || ratios.length < COVERED * (last - first)) return undefined
  return Math.max(0, median(ratios)) * Math.sqrt((last - first - 1) / covered)
}

/** Says where the signal is too weak for a type. */
export function checkSignal(best: number | undefined, limit: Limits): readonly Finding[] {
  if (best === undefined)
    return [finding(QUALITY_RULES, 'noise-unknown', 'The noise could not be measured, so signal-to-noise is not known')]
  if (best < limit('snrUnusable')) {
    const text = `The best signal-to-noise is ${figure(best)} per Å, below ${limit('snrUnusable')} nothing can be told`
    return [finding(QUALITY_RULES, 'too-faint', text, { value: best, limit: limit('snrUnusable') })]
  }
  if (best < limit('snrMinimum')) {
    const text = `The best signal-to-noise is ${figure(best)} per Å, a subclass needs ${limit('snrMinimum')}`
    return [finding(QUALITY_RULES, 'low-signal-to-noise', text, { value: best, limit: limit('snrMinimum') })]
  }
  return []
}
