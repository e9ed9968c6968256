import { Body, Equator, Horizon, Illumination } from 'astronomy-engine'
import { angularSeparation } from './angularSeparation.ts'
import type { Pointing } from './place.ts'
import { observerOf, timeOf } from './place.ts'

/** Where the Moon stands and how full it is. */
export interface MoonPlace {
  /** Degrees, without refraction, seen from the site. */
  readonly altitude: number
  /** Degrees from the direction pointed at. */
  readonly separation: number
  /** Fraction of the disc that is lit, 0 to 1. */
  readonly illuminated: number
}

/** Where the Moon stands, how far from a J2000 direction, and how full. Throws RangeError on an impossible date or site. */
export function moon({ mjd, ra, dec, site }: Pointing): MoonPlace {
  const time = timeOf(mjd)
  const observer = observerOf(site)
  const ofDate = Equator(Body.Moon, time, observer, true, true)
  const j2000 = Equator(Body.Moon, time, observer, false, true)
  return {
    altitude: Horizon(time, observer, ofDate.ra, ofDate.dec).altitude,
    separation: angularSeparation({ ra, dec }, { ra: 15 * j2000.ra, dec: j2000.dec }),
    illuminated: Illumination(Body.Moon, time).phase_fraction,
  }
}
