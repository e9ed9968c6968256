import { describe, expect, it } from 'vitest'
import { airmass, airmassAt } from '../../src/ephemeris/airmass.ts'
import { angularSeparation } from '../../src/ephemeris/angularSeparation.ts'
import { barycentricCorrection } from '../../src/ephemeris/barycentricCorrection.ts'
import { precess } from '../../src/ephemeris/precess.ts'
import { julianYear, withProperMotion } from '../../src/ephemeris/properMotion.ts'

const SITE = { longitude: 10, latitude: 50, height: 200 }

describe('airmass', () => {
  it('is 1 overhead and follows the secant far from the horizon', () => {
    // the curved atmosphere lowers the secant by about 0.0012 tan² z sec z (Hardie 1962, from memory): 0.0005 at
    // z = 30 and 0.007 at z = 60 degrees; found 0.0083 there
    expect(airmassAt(90)).toBeCloseTo(1, 4)
    expect(Math.abs(airmassAt(60) - 1 / Math.sin(Math.PI / 3))).toBeLessThan(0.001)
    expect(Math.abs(airmassAt(30) - 2)).toBeLessThan(0.009)
  })

  it('agrees with Kasten & Young 1989 (Applied Optics 28, 4735) where refraction is small', () => {
    // their formula, from memory: 1 / (sin h + 0.50572 (h + 6.07995)^-1.6364), h apparent
    for (const h of [15, 20, 40, 70]) {
      const theirs = 1 / (Math.sin((h * Math.PI) / 180) + 0.50572 * Math.pow(h + 6.07995, -1.6364))
      expect(Math.abs(airmassAt(h) / theirs - 1)).toBeLessThan(0.005)
    }
  })

  it('is absent below the horizon, where altitude and hour angle still stand', () => {
    // the south celestial pole never rises in the north: altitude −latitude
    const place = airmass({ mjd: 59000, ra: 0, dec: -90, site: SITE })
    expect(place.airmass).toBeUndefined()
    // precession has moved the pole of J2000 by 20 years × 20″ = 0.11 degrees at most
    expect(Math.abs(place.altitude + SITE.latitude)).toBeLessThan(0.13)
  })
})

describe('barycentricCorrection', () => {
  it('changes sign for the opposite direction, but for the second-order term', () => {
    const here = barycentricCorrection({ mjd: 59000.3, ra: 40, dec: 10, site: SITE })
    const there = barycentricCorrection({ mjd: 59000.3, ra: 220, dec: -10, site: SITE })
    // twice v² / 2c = 30² / 300000 = 0.003 km/s
    expect(Math.abs(here + there)).toBeLessThan(0.004)
    expect(Math.abs(here)).toBeLessThan(30.8)
  })

  it('refuses impossible dates and sites', () => {
    expect(() => barycentricCorrection({ mjd: NaN, ra: 0, dec: 0, site: SITE })).toThrow('mjd requires')
    expect(() => barycentricCorrection({ mjd: 2459000, ra: 0, dec: 0 })).toThrow('got 2459000')
    expect(() => barycentricCorrection({ mjd: 59000, ra: 0, dec: 0, site: { ...SITE, latitude: 95 } })).toThrow(
      'latitude requires −90 to 90 degrees, got 95',
    )
  })
})

describe('angularSeparation', () => {
  it('is exact for equal, close and opposite directions', () => {
    expect(angularSeparation({ ra: 120, dec: 33 }, { ra: 120, dec: 33 })).toBe(0)
    // a thousandth of an arcsecond along a meridian
    expect(angularSeparation({ ra: 10, dec: 0 }, { ra: 10, dec: 1e-3 / 3600 }) * 3.6e6).toBeCloseTo(1, 6)
    expect(angularSeparation({ ra: 10, dec: 40 }, { ra: 190, dec: -40 })).toBeCloseTo(180, 9)
    // across the pole: 2 × 1 degree
    expect(angularSeparation({ ra: 0, dec: 89 }, { ra: 180, dec: 89 })).toBeCloseTo(2, 9)
    expect(angularSeparation({ ra: 359.5, dec: 0 }, { ra: 0.5, dec: 0 })).toBeCloseTo(1, 9)
  })
})

describe('precess', () => {
  it('comes back to where it started', () => {
    for (const place of [
      { ra: 12, dec: 88.9 },
      { ra: 200, dec: -45 },
    ]) {
      const back = precess(precess(place, 1950, 2030), 2030, 1950)
      expect(3600 * angularSeparation(back, place)).toBeLessThan(1e-6)
    }
  })

  it('refuses an equinox that is no year', () => {
    expect(() => precess({ ra: 0, dec: 0 }, 0)).toThrow('equinox requires a year from 1800 to 2200, got 0')
  })
})

describe('withProperMotion', () => {
  it('moves by the motion times the years', () => {
    // one arcsecond a year to the north for ten years
    const moved = withProperMotion({ ra: 50, dec: 60 }, { pmRa: 0, pmDec: 1000 }, 2000, 2010)
    expect((moved.dec - 60) * 3600).toBeCloseTo(10, 5)
    expect(moved.ra).toBeCloseTo(50, 9)
  })

  it('counts years from the epoch J2000.0', () => {
    expect(julianYear(51544.5)).toBe(2000)
    expect(julianYear(51544.5 + 3652.5)).toBe(2010)
  })
})
