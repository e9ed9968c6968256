import { Body, Equator, Horizon } from 'astronomy-engine'
import type { Site } from '../spectrum/types.ts'
import { observerOf, timeOf } from './place.ts'

/**
 * Altitude of the Sun's centre [degrees, without refraction] at an MJD (UTC). Twilight is civil above −6, nautical
 * above −12, astronomical above −18. Throws RangeError on an impossible date or site.
 */
export function sunAltitude({ mjd, site }: { readonly mjd: number; readonly site: Site }): number {
  const time = timeOf(mjd)
  const observer = observerOf(site)
  const { ra, dec } = Equator(Body.Sun, time, observer, true, true)
  return Horizon(time, observer, ra, dec).altitude
}
