import { airmass } from '../ephemeris/airmass.ts'
import { barycentricCorrection } from '../ephemeris/barycentricCorrection.ts'
import { julianYear, withProperMotion } from '../ephemeris/properMotion.ts'
import type { Site } from '../spectrum/types.ts'
import { DEMO_SITE } from '../tables/demoNight.ts'
import type { DemoStar } from '../tables/demoNight.ts'

/** Where the header says the telescope pointed, and what the sky above the invented site makes of it. */
export interface DemoPointing {
  /** Degrees, J2000, at the time of the exposure. */
  readonly ra: number
  readonly dec: number
  readonly airmass: number
  /** Degrees, west positive. */
  readonly hourAngle: number
  /** km/s to add to a velocity measured here to refer it to the barycentre. */
  readonly barycentric: number
}

const SITE: Site = { longitude: DEMO_SITE.longitude, latitude: DEMO_SITE.latitude, height: DEMO_SITE.height }
/** Largest error of the pointing on each axis [degrees]: 3″. */
const POINTING_ERROR = 3 / 3600

/**
 * Pointing of an exposure of a star, at the star's place at that date.
 *
 * @param mjd      UTC, middle of the exposure
 * @param east     degrees on the sky by which the telescope stands east of the star
 * @param uniform  source of uniform numbers for the pointing error
 * @throws         RangeError when the star is below the horizon
 */
export function pointingAt(star: DemoStar, mjd: number, east: number, uniform: () => number): DemoPointing {
  const epoch = julianYear(mjd)
  const place = withProperMotion(star, { pmRa: star.pmRa ?? 0, pmDec: star.pmDec ?? 0 }, 2000, epoch)
  const ra = place.ra + (east + POINTING_ERROR * (2 * uniform() - 1)) / Math.cos((place.dec * Math.PI) / 180)
  const dec = place.dec + POINTING_ERROR * (2 * uniform() - 1)
  const seen = airmass({ mjd, ra, dec, site: SITE })
  if (seen.airmass === undefined)
    throw new RangeError(`star requires an altitude above 0 degrees, got ${seen.altitude}`)
  const barycentric = barycentricCorrection({ mjd, ra, dec, site: SITE })
  return { ra, dec, airmass: seen.airmass, hourAngle: seen.hourAngle, barycentric }
}
