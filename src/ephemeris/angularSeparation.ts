import { unitVector } from './place.ts'

/** A place on the sky [degrees]. */
export interface Direction {
  readonly ra: number
  readonly dec: number
}

/** Angle between two directions of one equinox [degrees, 0 to 180], exact for very small and very large angles too. */
export function angularSeparation(a: Direction, b: Direction): number {
  const [ax, ay, az] = unitVector(a.ra, a.dec)
  const [bx, by, bz] = unitVector(b.ra, b.dec)
  const cross = Math.hypot(ay * bz - az * by, az * bx - ax * bz, ax * by - ay * bx)
  return (Math.atan2(cross, ax * bx + ay * by + az * bz) * 180) / Math.PI
}
