import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { median, robustSigma } from '../numeric/median.ts'
import { figure } from '../quality/figures.ts'
import type { Thresholds } from '../tables/types.ts'
import type { NightSpectrum } from './exposures.ts'

/** Stars needed before a common velocity says anything of the instrument. */
const FEWEST = 4
/** Sigmas of the median. */
const SURE = 4
/** km/s: scatter of the velocities of stars near the Sun; common practice, no source. */
const STARS = 30

/**
 * A finding when the stars of a night share a velocity no chance explains: the median of barycentric velocities (as
 * measured where the correction is not known), one a target, against its error with the scatter of stars in it.
 */
export function commonOffsetFindings(spectra: readonly NightSpectrum[], thresholds: Thresholds): readonly Finding[] {
  const byObject = new Map<string, number>()
  for (const { spectrum, file } of spectra) {
    const { restFrame, barycentricVelocity, facts } = spectrum
    if (!restFrame.trusted || (restFrame.error ?? 0) > 100) continue
    const key = facts.object ?? file
    if (!byObject.has(key)) byObject.set(key, barycentricVelocity ?? restFrame.velocity)
  }
  const velocities = [...byObject.values()]
  if (velocities.length < FEWEST) return []
  const offset = median(velocities)
  const error = (1.253 * Math.max(robustSigma(velocities), STARS)) / Math.sqrt(velocities.length)
  if (Math.abs(offset) < thresholds.commonOffset.value || Math.abs(offset) < SURE * error) return []
  const isAir = Math.abs(Math.abs(offset) - 83.5) < 3 * error + 2
  const text = `The ${velocities.length} stars share a velocity of ${figure(offset)} ± ${figure(error)} km/s, so the wavelength scale is off${isAir ? '; 82 to 85 km/s is the difference between air and vacuum' : ''}`
  return [
    finding(NIGHT_RULES, 'common-wavelength-offset', text, {
      value: offset,
      limit: Math.max(thresholds.commonOffset.value, SURE * error),
    }),
  ]
}
