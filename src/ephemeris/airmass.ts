import { Horizon, SiderealTime } from 'astronomy-engine'
import type { Pointing } from './place.ts'
import { directionOfDate, observerOf, timeOf } from './place.ts'

/** Where a direction stands in the sky. */
export interface SkyPlace {
  /** Undefined below the horizon. */
  readonly airmass?: number
  /** Degrees, without refraction. */
  readonly altitude: number
  /** Degrees, −180 to 180, west positive. */
  readonly hourAngle: number
}

/** Airmass, altitude and hour angle of a J2000 direction at a moment. Throws RangeError on an impossible date or site. */
export function airmass({ mjd, ra, dec, site }: Pointing): SkyPlace {
  const time = timeOf(mjd)
  const ofDate = directionOfDate({ ra, dec }, time)
  const { altitude } = Horizon(time, observerOf(site), ofDate.ra / 15, ofDate.dec)
  const angle = 15 * SiderealTime(time) + site.longitude - ofDate.ra
  const hourAngle = angle - 360 * Math.round(angle / 360)
  return { altitude, hourAngle, ...(altitude >= 0 ? { airmass: airmassAt(altitude) } : {}) }
}

/**
 * Relative airmass at a true altitude (without refraction) [degrees, 0 to 90]: Young 1994, Applied Optics 33, 1108,
 * equation 1 (from memory), good to 0.0037 at the horizon.
 */
export function airmassAt(altitude: number): number {
  const c = Math.sin((altitude * Math.PI) / 180)
  return (1.002432 * c * c + 0.148386 * c + 0.0096467) / (c * c * c + 0.149864 * c * c + 0.0102963 * c + 0.000303978)
}
