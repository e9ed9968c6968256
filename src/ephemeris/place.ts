import { MakeTime, Observer, RotateVector, Rotation_EQJ_EQD, Vector } from 'astronomy-engine'
import type { AstroTime } from 'astronomy-engine'
import type { Site } from '../spectrum/types.ts'

/** MJD (UTC) of the epoch J2000.0, 2000 January 1 at noon. */
const MJD_J2000 = 51544.5

const DEGREE = Math.PI / 180

/** A moment, a direction (J2000, degrees) and where the telescope stands. */
export interface Pointing {
  /** MJD, UTC. */
  readonly mjd: number
  readonly ra: number
  readonly dec: number
  readonly site: Site
}

/** The library's time of an MJD (UTC). Throws RangeError unless the MJD is a number of the years 1900 to 2100. */
export function timeOf(mjd: number): AstroTime {
  // 1900 January 0 and 2100 December 31; outside, the library's Earth rotation is an extrapolation
  if (!(mjd >= 15019 && mjd <= 88434)) throw new RangeError(`mjd requires a date from 1900 to 2100, got ${mjd}`)
  return MakeTime(mjd - MJD_J2000)
}

/** The library's observer of a site. Throws RangeError when latitude or longitude is impossible. */
export function observerOf(site: Site): Observer {
  if (!(Math.abs(site.latitude) <= 90))
    throw new RangeError(`latitude requires −90 to 90 degrees, got ${site.latitude}`)
  if (!(Math.abs(site.longitude) <= 360))
    throw new RangeError(`longitude requires −360 to 360 degrees, got ${site.longitude}`)
  return new Observer(site.latitude, site.longitude, Number.isFinite(site.height) ? site.height : 0)
}

/** Unit vector of a direction [degrees]; x to the equinox, z to the pole. */
export function unitVector(ra: number, dec: number): [number, number, number] {
  const cosDec = Math.cos(dec * DEGREE)
  return [cosDec * Math.cos(ra * DEGREE), cosDec * Math.sin(ra * DEGREE), Math.sin(dec * DEGREE)]
}

/** Direction [degrees, right ascension from 0 to 360] of a vector of any length. */
export function directionOf([x, y, z]: readonly [number, number, number]): { ra: number; dec: number } {
  const ra = Math.atan2(y, x) / DEGREE
  return { ra: ra < 0 ? ra + 360 : ra, dec: Math.atan2(z, Math.hypot(x, y)) / DEGREE }
}

/** A J2000 direction in the true equator and equinox of the moment (precession and nutation; no aberration). */
export function directionOfDate(
  { ra, dec }: { readonly ra: number; readonly dec: number },
  time: AstroTime,
): {
  ra: number
  dec: number
} {
  const [x, y, z] = unitVector(ra, dec)
  const turned = RotateVector(Rotation_EQJ_EQD(time), new Vector(x, y, z, time))
  return directionOf([turned.x, turned.y, turned.z])
}
