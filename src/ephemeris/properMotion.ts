import type { Direction } from './angularSeparation.ts'
import { directionOf, unitVector } from './place.ts'

const MILLIARCSECOND = Math.PI / 648000000
const DEGREE = Math.PI / 180

/**
 * A direction moved along its proper motion from one epoch to another [Julian years], as straight motion in space
 * without a radial part.
 *
 * @param motion  milliarcseconds a year; pmRa is the motion along the sky, with the cosine of the declination in it
 */
export function withProperMotion(
  place: Direction,
  motion: { readonly pmRa: number; readonly pmDec: number },
  from: number,
  to: number,
): Direction {
  const [x, y, z] = unitVector(place.ra, place.dec)
  const east = MILLIARCSECOND * motion.pmRa * (to - from)
  const north = MILLIARCSECOND * motion.pmDec * (to - from)
  const sinRa = Math.sin(place.ra * DEGREE)
  const cosRa = Math.cos(place.ra * DEGREE)
  const sinDec = Math.sin(place.dec * DEGREE)
  const cosDec = Math.cos(place.dec * DEGREE)
  return directionOf([
    x - sinRa * east - sinDec * cosRa * north,
    y + cosRa * east - sinDec * sinRa * north,
    z + cosDec * north,
  ])
}

/** Julian year of an MJD, for epochs of proper motion. */
export function julianYear(mjd: number): number {
  return 2000 + (mjd - 51544.5) / 365.25
}
