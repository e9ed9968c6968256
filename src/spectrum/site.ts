import type { KnownSite } from '../tables/types.ts'
import type { Site } from './types.ts'

/** Semi-axes of the Earth's ellipsoid of GRS 80 [m] (Moritz 1980, as used by the ITRS; from memory). */
const EARTH = { equatorial: 6378137, flattening: 1 / 298.257222101 } as const

/** Geodetic place of geocentric coordinates [m] (OBSGEO-X, -Y, -Z); undefined when they lie far from the surface. */
export function geodetic(x: number, y: number, z: number): Site | undefined {
  const { equatorial, flattening } = EARTH
  const squared = flattening * (2 - flattening)
  const across = Math.hypot(x, y)
  const size = Math.hypot(across, z)
  if (!(size > 6.3e6 && size < 6.5e6)) return undefined
  let latitude = Math.atan2(z, across * (1 - squared))
  let height = 0
  for (let round = 0; round < 5; round++) {
    const normal = equatorial / Math.sqrt(1 - squared * Math.sin(latitude) ** 2)
    height = across * Math.cos(latitude) + z * Math.sin(latitude) - equatorial ** 2 / normal
    latitude = Math.atan2(z, across * (1 - (squared * normal) / (normal + height)))
  }
  const degree = 180 / Math.PI
  return { longitude: Math.atan2(y, x) * degree, latitude: latitude * degree, height }
}

/** The known telescope that a header's words name; undefined when none or more than one place fits. */
export function knownSite(sites: readonly KnownSite[], words: readonly string[]): KnownSite | undefined {
  for (const word of words) {
    const found = sites.find(({ pattern }) => new RegExp(pattern, 'i').test(word))
    if (found) return found
  }
  return undefined
}

/** Longitude from −180 to 180 degrees. */
export function wrapLongitude(degrees: number): number {
  if (degrees >= -180 && degrees <= 180) return degrees
  const turn = ((degrees % 360) + 360) % 360
  return turn > 180 ? turn - 360 : turn
}

/** Largest difference [degrees] at which a place counts as the known one. */
const SAME_PLACE = 0.5

/**
 * Longitude, east positive, of a header whose sign may follow either custom: by the known telescope where one fits,
 * else as the card's comment says, else as it stands. `judged` says how when it was turned or its comment set aside.
 */
export function eastLongitude(
  degrees: number,
  { isWest, known, latitude }: { isWest: boolean; known: KnownSite | undefined; latitude: number },
): { readonly longitude: number; readonly judged?: string } {
  const east = wrapLongitude(degrees)
  const turned = wrapLongitude(-degrees)
  if (known && Math.abs(known.latitude - latitude) < SAME_PLACE) {
    const isEast = Math.abs(wrapLongitude(east - known.longitude)) < SAME_PLACE
    const isTurned = Math.abs(wrapLongitude(turned - known.longitude)) < SAME_PLACE
    if (isEast && isWest)
      return { longitude: east, judged: `east positive although its comment says west: so ${known.name} lies` }
    if (isEast) return { longitude: east }
    if (isTurned) return { longitude: turned, judged: `west positive: so ${known.name} lies` }
  }
  return isWest ? { longitude: turned, judged: 'west positive by its comment or custom' } : { longitude: east }
}
