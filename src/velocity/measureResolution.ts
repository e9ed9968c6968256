import type { Continuum } from '../continuum/types.ts'
import { median, robustSigma } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { LinePattern, SkyLine } from '../tables/types.ts'
import { arcResolution } from './arcResolution.ts'
import { findSkyLines } from './skyLines.ts'
import { stellarWidth } from './stellarWidth.ts'
import { matchTelluric } from './telluricMatch.ts'
import type { Resolution, RestFrame } from './types.ts'

/** Lines of the air and the sky whose width tells the resolution. */
export interface ResolutionOptions {
  readonly telluric: readonly LinePattern[]
  readonly skyLines: readonly SkyLine[]
}

/** Å: where a resolving power of the header is turned into a width, kept within the spectrum. */
const MIDDLE = 5500

/** Å. */
const VISUAL = [3800, 6800] as const

/** The header is not believed where the star's own lines are this many times narrower than it says. */
const NARROWER = 0.7

/**
 * Width of the instrument's profile, by the best means the file offers: the lines of a lamp; night-sky lines; bands of
 * the air; the header; the narrowest structure of the star, which is an upper limit; two samples, a lower limit.
 * A header that the star's own lines contradict, being narrower than it allows, is passed over.
 */
export function measureResolution(
  spectrum: Spectrum,
  continuum: Continuum,
  _frame: RestFrame,
  { telluric, skyLines }: ResolutionOptions,
): Resolution {
  const { wavelength, flux, role } = spectrum
  const sampling: Resolution = { fwhm: 2 * visualStep(wavelength), how: 'sampling (lower limit)', isUpperLimit: false }
  if (role === 'lamp') return arcResolution(wavelength, flux) ?? ofHeader(spectrum) ?? sampling
  const sky = ofSky(spectrum, skyLines)
  if (sky) return sky
  const air = role === 'sky' ? undefined : ofAir(spectrum, continuum, telluric)
  if (air) return air
  const header = ofHeader(spectrum)
  const width = role === 'sky' ? undefined : stellarWidth(spectrum, continuum)
  if (header && !(width && width.fwhm < NARROWER * header.fwhm)) return header
  return width ? { ...width, how: 'stellar lines (upper limit)', isUpperLimit: true } : sampling
}

/** Distance of samples [Å] in the range of light the features lie in, or of the whole spectrum where there is none. */
function visualStep(wavelength: Float64Array): number {
  const steps: number[] = []
  const all: number[] = []
  for (let i = 1; i < wavelength.length; i++) {
    const step = wavelength[i] - wavelength[i - 1]
    all.push(step)
    if (wavelength[i] > VISUAL[0] && wavelength[i] < VISUAL[1]) steps.push(step)
  }
  return median(steps.length > 1 ? steps : all)
}

function ofHeader({ facts, wavelength }: Spectrum): Resolution | undefined {
  const middle = Math.min(Math.max(MIDDLE, wavelength[0]), wavelength[wavelength.length - 1])
  const power = facts.resolvingPower
  const fwhm = facts.resolutionFwhm ?? (power !== undefined && power > 0 ? middle / power : undefined)
  return fwhm !== undefined && fwhm > 0 ? { fwhm, how: 'header', isUpperLimit: false } : undefined
}

/** Unblended lines when there are any, else the narrowest half of the blends. */
function ofSky(spectrum: Spectrum, lines: readonly SkyLine[]): Resolution | undefined {
  const found = findSkyLines(spectrum, lines)
  const single = found.filter(({ line }) => !line.isBlend).map(({ fwhm }) => fwhm)
  const sorted = found.map(({ fwhm }) => fwhm).sort((a, b) => a - b)
  const widths = single.length > 0 ? single : sorted.slice(0, Math.ceil(sorted.length / 2))
  if (widths.length === 0) return undefined
  const least = Math.min(...found.map(({ fwhmError }) => fwhmError))
  const error = widths.length > 2 ? (1.253 * robustSigma(widths)) / Math.sqrt(widths.length) : least
  return { fwhm: median(widths), error: Math.max(error, least), how: 'sky lines', isUpperLimit: false }
}

function ofAir(spectrum: Spectrum, continuum: Continuum, telluric: readonly LinePattern[]): Resolution | undefined {
  const widths = telluric.flatMap((band) => matchTelluric(spectrum, continuum, band)?.fwhm ?? [])
  if (widths.length === 0) return undefined
  // the shape of a band leaves its width uncertain by a tenth
  return { fwhm: median(widths), error: 0.1 * median(widths), how: 'telluric lines', isUpperLimit: false }
}
