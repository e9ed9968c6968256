import { describe, expect, it } from 'vitest'
import { matchTargets } from '../../src/night/matchTargets.ts'
import { plainName } from '../../src/night/targetName.ts'

describe('plainName', () => {
  it('makes one of the spellings of a name', () => {
    for (const [a, b] of [
      ['HD 12345', 'hd_12345'],
      ['HD 12345', 'HD12345'],
      ['HD 12345', 'HD-12345'],
      ['HD 012345', 'hd 12345'],
      ['BD+19 1947', 'bd+191947'],
      ['BD−00 3227', 'bd-003227'],
      ['Alpha Cen A', 'alpha_cen_a'],
      ['SDSS J0324+3410', 'sdss j0324+3410'],
      ['GJ 15.2', 'gj15.2'],
    ])
      expect(plainName(a)).toBe(plainName(b))
  })
  it('keeps different stars apart', () => {
    for (const [a, b] of [
      ['BD+19 1947', 'BD-19 1947'],
      ['J0324+3410', 'J0324-3410'],
      ['HD 1', 'HR 1'],
      ['HD 10', 'HD 1'],
      ['HD 100', 'HD 1001'],
    ])
      expect(plainName(a)).not.toBe(plainName(b))
  })
})

describe('matchTargets', () => {
  const list = [{ object: 'HD 1', ra: 10, dec: 20 }, { object: 'HD 2', ra: 40, dec: 20 }, { object: 'HD 3' }]

  it('matches by position and name together', () => {
    const match = matchTargets({ object: 'hd_1', ra: 10, dec: 20.001 }, list, 30)
    expect(match.target?.object).toBe('HD 1')
    // 0.001° = 3.6″
    expect(match.separationArcsec).toBeCloseTo(3.6, 6)
  })

  it('lets the position decide where name and position disagree', () => {
    const match = matchTargets({ object: 'HD 2', ra: 10, dec: 20 }, list, 30)
    expect(match.target?.object).toBe('HD 1')
    expect(match.byName?.object).toBe('HD 2')
    // spherical law of cosines with both declinations 20° and 30° between them
    const [sin, cos] = [Math.sin(Math.PI / 9), Math.cos(Math.PI / 9)]
    const expected = (Math.acos(sin ** 2 + cos ** 2 * Math.cos(Math.PI / 6)) * 180) / Math.PI
    expect((match.nameSeparationArcsec ?? 0) / 3600).toBeCloseTo(expected, 9)
  })

  it('falls back on the name without a position in header or list', () => {
    expect(matchTargets({ object: 'HD2' }, list, 30).target?.object).toBe('HD 2')
    expect(matchTargets({ object: 'HD 3', ra: 200, dec: -5 }, list, 30).target?.object).toBe('HD 3')
    expect(matchTargets({ object: 'HD 4', ra: 200, dec: -5 }, list, 30)).toEqual({})
  })

  it('moves a target by its proper motion to the time of the exposure', () => {
    // 61 Cyg A from memory: pm 4133 mas/yr in right ascension, 3201 in declination; 26.4 years from 2000 to MJD 61177
    const star = { object: '61 Cyg A', ra: 316.7247, dec: 38.7494, pmRa: 4133, pmDec: 3201, epoch: 2000 }
    const years = (61177 - 51544.5) / 365.25
    const ra = star.ra + (4.133 * years) / 3600 / Math.cos((38.75 * Math.PI) / 180)
    const dec = star.dec + (3.201 * years) / 3600
    const match = matchTargets({ object: 'x', ra, dec, mjdMid: 61177 }, [star], 30)
    expect(match.target).toBe(star)
    // a flat step in right ascension against a great circle: 0.02″ here
    expect(match.separationArcsec).toBeLessThan(0.05)
    expect(matchTargets({ object: 'x', ra, dec }, [star], 30).target).toBeUndefined()
  })

  it('brings a header of equinox 1950 to 2000', () => {
    // astropy 5.2.1: SkyCoord(279.2347°, 38.7837°, FK5 J2000).transform_to(FK5(equinox='J1950'))
    const star = { object: 'star', ra: 279.2347, dec: 38.7837 }
    const match = matchTargets({ object: 'x', ra: 278.8149756, dec: 38.7400277, equinox: 1950 }, [star], 30)
    expect(match.target).toBe(star)
    // IAU 2006 against the precession of FK5: measured 0.03″
    expect(match.separationArcsec).toBeLessThan(0.1)
  })

  it('does not take the place-holder 0, 0 for a position', () => {
    expect(matchTargets({ object: 'HD 1', ra: 0, dec: 0 }, list, 30).separationArcsec).toBeUndefined()
  })
})
