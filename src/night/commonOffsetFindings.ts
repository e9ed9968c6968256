import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { withError } from '../quality/figures.ts'
import type { Thresholds } from '../tables/types.ts'
import { commonOffset } from '../velocity/commonOffset.ts'
import type { NightSpectrum } from './exposures.ts'

/**
 * A finding when the stars of a night share a velocity no chance explains: barycentric velocities (as measured where
 * the correction is not known), one a target, five or more of them.
 */
export function commonOffsetFindings(spectra: readonly NightSpectrum[], thresholds: Thresholds): readonly Finding[] {
  const byObject = new Map<string, { readonly velocity: number; readonly error?: number }>()
  for (const { spectrum, file } of spectra) {
    const { restFrame, barycentricVelocity, facts } = spectrum
    if (!restFrame.trusted) continue
    const key = facts.object ?? file
    if (byObject.has(key)) continue
    byObject.set(key, {
      velocity: barycentricVelocity ?? restFrame.velocity,
      ...(restFrame.error === undefined ? {} : { error: restFrame.error }),
    })
  }
  const common = commonOffset([...byObject.values()])
  const limit = thresholds.commonOffset.value
  if (!common?.isCommon || Math.abs(common.offset) < limit) return []
  const { offset, error, stars, isMedium } = common
  const medium = isMedium ? '; 82 to 85 km/s is the difference between air and vacuum' : ''
  const text = `The ${stars} stars share a velocity of ${withError(offset, error)} km/s, so the wavelength scale is off${medium}`
  return [finding(NIGHT_RULES, 'common-wavelength-offset', text, { value: offset, limit })]
}
