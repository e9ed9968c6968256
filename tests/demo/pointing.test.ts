import { describe, expect, it } from 'vitest'
import { pointingAt } from '../../src/demo/pointing.ts'
import { starNamed } from '../../src/demo/schedule.ts'

// astropy 5.2.1: secz of AltAz without refraction, apparent sidereal time less TETE right ascension [degrees],
// radial_velocity_correction [km/s], for longitude −70.31, latitude −27.46, height 2180 m
const ASTROPY = [
  { name: 'Adrisel', mjd: 61176.97548611111, airmass: 1.10276, hourAngle: 26.8888, barycentric: -17.3134 },
  { name: 'Mirovel', mjd: 61177.12395833333, airmass: 1.09862, hourAngle: 1.6501, barycentric: -14.137 },
  { name: 'Dorvath', mjd: 61177.37099537037, airmass: 1.19453, hourAngle: -8.1441, barycentric: 19.0424 },
]

describe('pointingAt', () => {
  it.each(ASTROPY)('agrees with another implementation: $name', ({ name, mjd, airmass, hourAngle, barycentric }) => {
    const found = pointingAt(starNamed(name), mjd, 0, () => 0.5)
    // Young's airmass lies 0.0004 to 0.0008 below the secant here; aberration, left out, is 20″ = 0.0057°
    expect(Math.abs(found.airmass - airmass)).toBeLessThan(0.001)
    expect(Math.abs(found.hourAngle - hourAngle)).toBeLessThan(0.01)
    expect(Math.abs(found.barycentric - barycentric)).toBeLessThan(0.005)
  })

  it('points east of the star by the angle asked for', () => {
    const star = starNamed('Pellandor')
    const [right, wrong] = [0, 0.1].map((east) => pointingAt(star, 61177.155, east, () => 0.5))
    expect((wrong.ra - right.ra) * Math.cos((star.dec * Math.PI) / 180)).toBeCloseTo(0.1, 9)
    expect(wrong.dec).toBe(right.dec)
  })

  it('refuses a star below the horizon', () => {
    // Dorvath has its upper transit near 09 h UTC; twelve hours later it is down (declination −60°: lowest at 2° below)
    const star = { ...starNamed('Dorvath'), dec: 20 }
    expect(() => pointingAt(star, 61176.88, 0, () => 0.5)).toThrow(/star requires an altitude above 0 degrees, got -/)
  })
})
