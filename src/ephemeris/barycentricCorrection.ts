import { BaryState, Body, C_AUDAY, ObserverState } from 'astronomy-engine'
import type { Site } from '../spectrum/types.ts'
import { observerOf, timeOf, unitVector } from './place.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/**
 * Velocity to add to a measured velocity to refer it to the barycentre of the solar system [km/s]: the observer's
 * own barycentric velocity toward the star, with the second-order Doppler term. Exactly,
 * 1 + z = (1 + z measured) (1 + correction / c) (Wright & Eastman 2014, PASP 126, 838); for stars the sum will do.
 * Without a site the Earth's centre stands in for the telescope, which is wrong by up to 0.47 km/s.
 *
 * @param mjd  UTC, middle of the exposure
 * @param ra   degrees, J2000 (as dec)
 * @throws     RangeError on an impossible date or site
 */
export function barycentricCorrection({
  mjd,
  ra,
  dec,
  site,
}: {
  readonly mjd: number
  readonly ra: number
  readonly dec: number
  readonly site?: Site
}): number {
  const time = timeOf(mjd)
  const earth = BaryState(Body.Earth, time)
  const turn = site === undefined ? { vx: 0, vy: 0, vz: 0 } : ObserverState(time, observerOf(site), false)
  const [x, y, z] = unitVector(ra, dec)
  // astronomical units a day, in units of the speed of light
  const vx = (earth.vx + turn.vx) / C_AUDAY
  const vy = (earth.vy + turn.vy) / C_AUDAY
  const vz = (earth.vz + turn.vz) / C_AUDAY
  const towards = vx * x + vy * y + vz * z
  const lorentz = 1 / Math.sqrt(1 - (vx * vx + vy * vy + vz * vz))
  return SPEED_OF_LIGHT * (lorentz * (1 + towards) - 1)
}
