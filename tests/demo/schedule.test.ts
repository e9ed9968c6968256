import { describe, expect, it } from 'vitest'
import { DEMO_MJD, isoTime, schedule, starNamed } from '../../src/demo/schedule.ts'
import { DEMO_SITE, DEMO_TARGETS } from '../../src/tables/demoNight.ts'
import { sunAltitude } from '../../src/ephemeris/sunAltitude.ts'
import { pointingAt } from '../../src/demo/pointing.ts'

const all = schedule(() => true)
const SITE = { longitude: DEMO_SITE.longitude, latitude: DEMO_SITE.latitude, height: DEMO_SITE.height }

describe('schedule', () => {
  it('starts on the date of the scenario', () => {
    // 2026-12-01 is MJD 61375.0 (facts computed with astropy 5.2.1), 199 days after 2026-05-16
    expect(DEMO_MJD).toBe(61375 - 199)
    expect(isoTime(DEMO_MJD + 0.5)).toBe('2026-05-16T12:00:00.0')
  })

  it('never opens the shutter before the last exposure has ended', () => {
    for (let i = 1; i < all.length; i++) {
      const end = all[i - 1].mjdStart + all[i - 1].step.exposure / 86400
      expect(all[i].mjdStart, `exposure ${all[i].number}`).toBeGreaterThan(end)
    }
  })

  it('keeps the time of every exposure when others do not happen, and numbers what is left without a gap', () => {
    const some = schedule((step) => step.trouble !== 'missing arc')
    expect(some.length).toBeLessThan(all.length)
    expect(some.map((exposure) => exposure.number)).toEqual(some.map((_, i) => i + 1))
    for (const exposure of some) expect(all[exposure.place].mjdStart).toBe(exposure.mjdStart)
  })

  it('observes every target at least once, in the dark and high enough', () => {
    for (const target of DEMO_TARGETS) {
      const own = all.filter((exposure) => exposure.step.kind === 'science' && exposure.star?.name === target.name)
      expect(own.length, target.name).toBeGreaterThan(0)
      for (const { mjdStart, step } of own) {
        const middle = mjdStart + step.exposure / 172800
        // end of nautical twilight: Sun at −12°
        expect(sunAltitude({ mjd: middle, site: SITE }), target.name).toBeLessThan(-12)
        expect(pointingAt(target, middle, 0, () => 0.5).airmass, target.name).toBeLessThan(1.6)
      }
    }
  })

  it('covers the types from O to M and three luminosity classes with twenty stars or more', () => {
    expect(DEMO_TARGETS.length).toBeGreaterThanOrEqual(20)
    expect(new Set(DEMO_TARGETS.map((star) => Math.floor(star.type / 10)))).toEqual(new Set([0, 1, 2, 3, 4, 5, 6]))
    expect(new Set(DEMO_TARGETS.map((star) => star.luminosity))).toEqual(new Set([1, 3, 5]))
  })
})

describe('starNamed', () => {
  it('refuses a name that the night does not have', () => {
    expect(() => starNamed('Nobody')).toThrow('star requires a name of the demo night, got Nobody')
  })
})
