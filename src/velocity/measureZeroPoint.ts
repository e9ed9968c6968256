import type { Continuum } from '../continuum/types.ts'
import { median } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { LinePattern, SkyLine } from '../tables/types.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'
import { findSkyLines } from './skyLines.ts'
import { matchTelluric } from './telluricMatch.ts'
import type { ZeroPoint } from './types.ts'

/** Lines of the air and the sky whose place tells the zero point. */
export interface ZeroPointOptions {
  /** Bands of the air, line by line. */
  readonly telluric: readonly LinePattern[]
  readonly skyLines: readonly SkyLine[]
}

/** [km/s] least error of a line that is a blend at the resolution of these spectra, and of one that is not. */
const LEAST_ERROR = { blend: 8, single: 1 } as const

/**
 * How far the wavelength scale is off, from the bands of the Earth's air and the lines of the night sky: the weighted
 * mean of all that are found, those far from their median left out, with the larger of the formal error and the
 * scatter. Undefined where none is found, or where the file's wavelengths were moved to another frame than the
 * telescope's, since these lines then move along.
 */
export function measureZeroPoint(
  spectrum: Spectrum,
  continuum: Continuum,
  { telluric, skyLines }: ZeroPointOptions,
): ZeroPoint | undefined {
  if (spectrum.frame !== 'topocentric' && spectrum.frame !== 'geocentric' && spectrum.frame !== 'unknown')
    return undefined
  const found: { readonly offset: number; readonly error: number; readonly from: string }[] = []
  for (const band of telluric) {
    const match = spectrum.role === 'sky' ? undefined : matchTelluric(spectrum, continuum, band)
    if (match) found.push({ offset: match.offset, error: match.error, from: match.name })
  }
  for (const { line, centre, centreError } of findSkyLines(spectrum, skyLines)) {
    const least = line.isBlend ? LEAST_ERROR.blend : LEAST_ERROR.single
    found.push({
      offset: SPEED_OF_LIGHT * (centre / line.wavelength - 1),
      error: Math.hypot(SPEED_OF_LIGHT * (centreError / line.wavelength), least),
      from: `${line.species} ${line.wavelength.toFixed(0)}`,
    })
  }
  if (found.length === 0) return undefined
  const middle = median(found.map(({ offset }) => offset))
  const spread = median(found.map(({ offset }) => Math.abs(offset - middle)))
  const kept = found.filter(({ offset, error }) => Math.abs(offset - middle) <= 4 * Math.hypot(error, spread))
  let weights = 0
  let sum = 0
  for (const { offset, error } of kept) {
    weights += 1 / (error * error)
    sum += offset / (error * error)
  }
  const offset = sum / weights
  let chiSquare = 0
  for (const one of kept) chiSquare += ((one.offset - offset) / one.error) ** 2
  const inflation = kept.length > 1 ? Math.max(1, Math.sqrt(chiSquare / (kept.length - 1))) : 1
  return { offset, error: inflation / Math.sqrt(weights), from: kept.map(({ from }) => from).join(', ') }
}
