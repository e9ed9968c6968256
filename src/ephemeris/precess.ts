import type { Direction } from './angularSeparation.ts'
import { directionOf, unitVector } from './place.ts'

const ARCSECOND = Math.PI / 648000

type Vector = readonly [number, number, number]

/**
 * A mean direction [degrees] of one equinox in another [Julian years]: precession of IAU 2006 (Capitaine, Wallace &
 * Chapront 2003, A&A 412, 567; coefficients from memory, checked against another implementation). For positions of
 * B1950 in the FK4 system it is good to about 2″, as the E-terms and the different system are left out.
 *
 * @throws RangeError for an equinox outside 1800 to 2200
 */
export function precess(place: Direction, from: number, to = 2000): Direction {
  for (const equinox of [from, to])
    if (!(equinox >= 1800 && equinox <= 2200))
      throw new RangeError(`equinox requires a year from 1800 to 2200, got ${equinox}`)
  if (from === to) return { ra: place.ra, dec: place.dec }
  const start = unitVector(place.ra, place.dec)
  const j2000 = from === 2000 ? start : turn(start, anglesOf(from), -1)
  return directionOf(to === 2000 ? j2000 : turn(j2000, anglesOf(to), 1))
}

/** ζ, z, θ [radians] from J2000 to an equinox. */
function anglesOf(equinox: number): Vector {
  const t = (equinox - 2000) / 100
  const zeta = 2.650545 + t * (2306.083227 + t * (0.2988499 + t * 0.01801828))
  const z = -2.650545 + t * (2306.077181 + t * (1.0927348 + t * 0.01826837))
  const theta = t * (2004.191903 - t * (0.4294934 + t * 0.04182264))
  return [zeta * ARCSECOND, z * ARCSECOND, theta * ARCSECOND]
}

/** R₃(−z) R₂(θ) R₃(−ζ) applied to a vector, or its inverse. */
function turn(vector: Vector, [zeta, z, theta]: Vector, sense: 1 | -1): Vector {
  return sense === 1
    ? about3(about2(about3(vector, -zeta), theta), -z)
    : about3(about2(about3(vector, z), -theta), zeta)
}

function about3([x, y, z]: Vector, angle: number): Vector {
  return [Math.cos(angle) * x + Math.sin(angle) * y, -Math.sin(angle) * x + Math.cos(angle) * y, z]
}

function about2([x, y, z]: Vector, angle: number): Vector {
  return [Math.cos(angle) * x - Math.sin(angle) * z, y, Math.sin(angle) * x + Math.cos(angle) * z]
}
