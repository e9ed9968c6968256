import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { VELOCITY_RULES } from '../findings/velocity.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { RestFrame, ZeroPoint } from './types.ts'

/** [km/s] what air and vacuum wavelengths differ by from 4000 to 8000 Å (Ciddor 1996: 84.8 to 82.5). */
export const AIR_VACUUM = { smallest: 82, largest: 85 } as const

/** Sigmas within which a velocity may be that difference, and beyond which it is not another. */
const SIGMAS = 3

/** [km/s] worst error that still tells the difference from nothing. */
const WORST_ERROR = 20

/** [km/s] by which stars, the Earth and the instrument may differ from a known velocity without a finding. */
const TOLERANCE = 40

/** True where a velocity is, within its error, what a mix-up of air and vacuum gives, and surely not zero. */
export function looksLikeMedium(velocity: number, error: number): boolean {
  const size = Math.abs(velocity)
  const room = Math.min(SIGMAS * error, 15)
  return error < WORST_ERROR && size > AIR_VACUUM.smallest - room && size < AIR_VACUUM.largest + room
}

/**
 * Findings on whether air and vacuum wavelengths were mixed up. A zero point from sky or air is left to the checks of
 * the wavelength scale: where there is one this says nothing. Else a known velocity decides; without one, a velocity
 * of 82 to 85 km/s in a file that does not declare its medium is only noted, as the star may move that fast.
 */
export function checkMedium(
  spectrum: Pick<Spectrum, 'mediumHow'>,
  frame: RestFrame,
  { zeroPoint, knownVelocity }: { readonly zeroPoint?: ZeroPoint; readonly knownVelocity?: number },
): readonly Finding[] {
  const { velocity, error } = frame
  if (!frame.trusted || error === undefined || zeroPoint !== undefined) return []
  const said = `${velocity.toFixed(0)} ± ${error.toFixed(0)} km/s`
  if (knownVelocity !== undefined) {
    const difference = velocity - knownVelocity
    const limit = Math.max(TOLERANCE, SIGMAS * error)
    const figures = { value: difference, limit }
    if (Math.abs(difference) <= limit) return []
    const text = `The velocity is ${said}, ${difference.toFixed(0)} km/s from the known ${knownVelocity.toFixed(0)} km/s`
    return looksLikeMedium(difference, error)
      ? [finding(VELOCITY_RULES, 'air-vacuum-by-velocity', `${text}: air and vacuum differ by 82 to 85 km/s`, figures)]
      : [finding(VELOCITY_RULES, 'velocity-differs-from-known', text, figures)]
  }
  if (spectrum.mediumHow !== 'guessed' || !looksLikeMedium(velocity, error)) return []
  const text = `The velocity is ${said}; wavelengths in air taken for vacuum, or the other way, would give 82 to 85 km/s`
  return [finding(VELOCITY_RULES, 'air-vacuum-possible', text, { value: velocity, limit: AIR_VACUUM.smallest })]
}
