import { describe, expect, it } from 'vitest'
import { seededUniform } from '../../src/numeric/random.ts'
import { airmass } from '../../src/ephemeris/airmass.ts'
import { angularSeparation } from '../../src/ephemeris/angularSeparation.ts'
import { barycentricCorrection } from '../../src/ephemeris/barycentricCorrection.ts'
import { moon } from '../../src/ephemeris/moon.ts'
import { precess } from '../../src/ephemeris/precess.ts'
import { withProperMotion } from '../../src/ephemeris/properMotion.ts'
import { sunAltitude } from '../../src/ephemeris/sunAltitude.ts'
import { requirePython, runPython } from '../support/tools.ts'

const hasAstropy = requirePython('astropy')

const uniform = seededUniform(4)
/** Fifty moments from 1990 to 2030, directions over the whole sky, sites over the whole Earth. */
const CASES = Array.from({ length: 50 }, () => ({
  mjd: 47892 + 14600 * uniform(),
  ra: 360 * uniform(),
  dec: (Math.asin(2 * uniform() - 1) * 180) / Math.PI,
  site: { longitude: -180 + 360 * uniform(), latitude: -70 + 140 * uniform(), height: 4000 * uniform() },
}))

interface Reference {
  readonly correction: number
  readonly geocentric: number
  readonly altitude: number
  readonly hourAngle: number
  readonly sun: number
  readonly moon: number
  readonly moonSeparation: number
  readonly illuminated: number
  readonly precessed: readonly [number, number]
  readonly fk4: readonly [number, number]
  readonly moved: readonly [number, number]
}

/** astropy with its own ephemeris (ERFA's epv00 and moon98) and Earth rotation without downloads. */
const PROGRAM = `
import json, sys, warnings
warnings.simplefilter('ignore')
import numpy as np
from astropy.utils import iers
iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = 'ignore'
import astropy.units as u
from astropy.time import Time
from astropy.coordinates import *
out = []
for c in json.loads(sys.argv[1]):
    site = EarthLocation.from_geodetic(c['site']['longitude'], c['site']['latitude'], c['site']['height'])
    t = Time(c['mjd'], format='mjd', scale='utc', location=site)
    p = SkyCoord(c['ra'] * u.deg, c['dec'] * u.deg)
    bare = Time(c['mjd'], format='mjd', scale='utc')
    altaz = AltAz(obstime=t, location=site)
    sun, moon = get_body('sun', t, site), get_body('moon', t, site)
    gs, gm = get_body('sun', bare), get_body('moon', bare)
    v = get_body_barycentric_posvel('earth', bare)[1]
    elongation = gs.separation(gm)
    i = np.arctan2(gs.distance * np.sin(elongation), gm.distance - gs.distance * np.cos(elongation))
    tete = p.transform_to(TETE(obstime=t, location=site))
    ha = (t.sidereal_time('apparent').deg - tete.ra.deg + 540) % 360 - 180
    fk5 = SkyCoord(c['ra'] * u.deg, c['dec'] * u.deg, frame=FK5(equinox='J1975'))
    fk4 = SkyCoord(c['ra'] * u.deg, c['dec'] * u.deg, frame=FK4(equinox='B1950', obstime='J2000')).transform_to(FK5(equinox='J2000'))
    m = SkyCoord(c['ra'] * u.deg, c['dec'] * u.deg, distance=10 * u.pc, pm_ra_cosdec=1200 * u.mas / u.yr, pm_dec=-3400 * u.mas / u.yr,
                 obstime=Time('J2000')).apply_space_motion(Time('J2016.5'))
    q = fk5.transform_to(FK5(equinox='J2000'))
    out.append(dict(correction=p.radial_velocity_correction('barycentric', bare, site).to_value('km/s'),
        geocentric=float(v.dot(p.cartesian).to_value('km/s')),
        altitude=p.transform_to(altaz).alt.deg, hourAngle=float(ha), sun=sun.transform_to(altaz).alt.deg,
        moon=moon.transform_to(altaz).alt.deg,
        moonSeparation=float(SkyCoord(moon.ra, moon.dec).separation(p).deg),
        illuminated=float((1 + np.cos(i)) / 2), precessed=[q.ra.deg, q.dec.deg], fk4=[fk4.ra.deg, fk4.dec.deg],
        moved=[m.ra.deg, m.dec.deg]))
print(json.dumps(out))
`

describe.skipIf(!hasAstropy)('the ephemeris against astropy, in 50 cases', () => {
  const reference = hasAstropy ? (JSON.parse(runPython(PROGRAM, [JSON.stringify(CASES)])) as Reference[]) : []
  const worst = (off: (c: (typeof CASES)[number], r: Reference) => number): number =>
    Math.max(...CASES.map((c, i) => Math.abs(off(c, reference[i]))))

  it('gives the barycentric correction within 0.02 km/s', () => {
    expect(worst((c, r) => barycentricCorrection(c) - r.correction)).toBeLessThan(0.02)
  })

  it('gives the correction of the Earth’s centre when no site is known', () => {
    expect(worst(({ mjd, ra, dec }, r) => barycentricCorrection({ mjd, ra, dec }) - r.geocentric)).toBeLessThan(0.02)
  })

  it('gives altitude and hour angle within 0.01 degrees, aberration (20″) left out', () => {
    expect(worst((c, r) => airmass(c).altitude - r.altitude)).toBeLessThan(0.01)
    // close to a pole the aberration grows in right ascension: compared along the sky
    expect(worst((c, r) => (airmass(c).hourAngle - r.hourAngle) * Math.cos((c.dec * Math.PI) / 180))).toBeLessThan(0.01)
  })

  it('gives the altitudes of the Sun and the Moon within 0.02 degrees', () => {
    expect(worst((c, r) => sunAltitude(c) - r.sun)).toBeLessThan(0.02)
    expect(worst((c, r) => moon(c).altitude - r.moon)).toBeLessThan(0.02)
  })

  it('gives the Moon’s distance within 0.02 degrees and its lit fraction within 0.002', () => {
    expect(worst((c, r) => moon(c).separation - r.moonSeparation)).toBeLessThan(0.02)
    expect(worst((c, r) => moon(c).illuminated - r.illuminated)).toBeLessThan(0.002)
  })

  it('precesses J1975 to J2000 within 0.02″, and B1950 within 3″', () => {
    const off = (c: (typeof CASES)[number], from: number, [ra, dec]: readonly [number, number]): number =>
      3600 * angularSeparation(precess(c, from), { ra, dec })
    expect(worst((c, r) => off(c, 1975, r.precessed))).toBeLessThan(0.02)
    expect(worst((c, r) => off(c, 1950, r.fk4))).toBeLessThan(3)
  })

  it('moves a star along its proper motion within 0.001″', () => {
    expect(
      worst((c, r) => {
        const moved = withProperMotion(c, { pmRa: 1200, pmDec: -3400 }, 2000, 2016.5)
        return 3600 * angularSeparation(moved, { ra: r.moved[0], dec: r.moved[1] })
      }),
    ).toBeLessThan(0.001)
  })
})
