import { airmass } from '../ephemeris/airmass.ts'
import { moon } from '../ephemeris/moon.ts'
import { sunAltitude } from '../ephemeris/sunAltitude.ts'
import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import type { Site } from '../spectrum/types.ts'
import type { ThresholdName, Thresholds } from '../tables/types.ts'
import type { Exposure } from './exposures.ts'
import { isOnSky } from './exposures.ts'
import { positionOf } from './matchTargets.ts'

const DAY = 86400
/** Share of the Moon's disc that is lit from which it is bright. */
const BRIGHT_MOON = 0.5
/** Hours by which clocks of observatories are found to be off: time zones. */
const ZONES = Array.from({ length: 27 }, (_, i) => i - 13)
/** Exposures that a time-zone slip must be seen in, and those it is looked for in. */
const FEWEST = 3
const MOST = 40

interface Sight {
  readonly exposure: Exposure
  readonly site: Site
  readonly ra: number
  readonly dec: number
  readonly mjd: number
}

/** Exposures on the sky whose time, place and direction are known. */
function sightsOf(exposures: readonly Exposure[]): readonly Sight[] {
  return exposures.flatMap((exposure) => {
    const { facts, mjd, kind } = exposure
    const place = positionOf(facts)
    return isOnSky(kind) && facts.site && place && mjd !== undefined && mjd > 15020 && mjd < 88434
      ? [{ exposure, site: facts.site, ...place, mjd }]
      : []
  })
}

/**
 * Shift [h] by which the times must be moved for the airmasses and hour angles of the headers to be right: a whole
 * number other than 0 when that shift makes them agree and 0 does not. Undefined when nothing calls for one.
 */
export function timeZoneSlip(exposures: readonly Exposure[], thresholds: Thresholds): number | undefined {
  const sights = sightsOf(exposures)
    .filter(({ exposure }) => usefulAirmass(exposure) !== undefined || exposure.facts.hourAngle !== undefined)
    .slice(0, MOST)
  if (sights.length < FEWEST) return undefined
  const missBy = (shift: number): number => {
    const misses = sights.map((sight) => {
      const seen = airmass({ ...sight, mjd: sight.mjd + shift / 24 })
      const header = usefulAirmass(sight.exposure)
      const angle = sight.exposure.facts.hourAngle
      if (angle !== undefined) return Math.min(1, Math.abs(turn(angle - seen.hourAngle)) / 15)
      if (header === undefined || seen.airmass === undefined) return 1
      return Math.min(1, Math.abs(header - seen.airmass) / header)
    })
    return misses.sort((a, b) => a - b)[Math.floor(misses.length / 2)]
  }
  const now = missBy(0)
  if (now < 2 * thresholds.airmassTolerance.value) return undefined
  const best = ZONES.map((shift) => ({ shift, miss: missBy(shift) })).reduce((least, one) =>
    one.miss < least.miss ? one : least,
  )
  return best.shift !== 0 && best.miss < thresholds.airmassTolerance.value && best.miss < now / 4
    ? best.shift
    : undefined
}

function usefulAirmass({ facts }: Exposure): number | undefined {
  return facts.airmass !== undefined && facts.airmass >= 1 && facts.airmass < 20 ? facts.airmass : undefined
}

function turn(degrees: number): number {
  return degrees - 360 * Math.round(degrees / 360)
}

/** What of one exposure does not fit its time, place and direction; `slip` [h] is taken into account. */
export function checkPointing(exposure: Exposure, thresholds: Thresholds, slip = 0): readonly Finding[] {
  const [sight] = sightsOf([exposure])
  if (!sight) return []
  const limit = (name: ThresholdName): number => thresholds[name].value
  const mjd = sight.mjd + slip / 24
  const here = { ...sight, mjd }
  const seen = airmass(here)
  return [
    ...checkAirmass(sight, mjd, limit),
    ...checkHourAngle(exposure, seen.hourAngle, limit),
    ...checkSun(here, limit),
    ...checkMoon(here, limit),
  ]
}

type Limit = (name: ThresholdName) => number

function checkAirmass(sight: Sight, mjd: number, limit: Limit): Finding[] {
  const half = (sight.exposure.facts.exposure ?? 0) / 2 / DAY
  const seen = [mjd - half, mjd, mjd + half].map((at) => airmass({ ...sight, mjd: at }))
  const [, middle] = seen
  if (seen.every(({ altitude }) => altitude < 0)) {
    const text = `At the time of the header the star stood ${Math.abs(middle.altitude).toFixed(0)}° below the horizon`
    return [finding(NIGHT_RULES, 'below-horizon', text, { value: middle.altitude, limit: 0 })]
  }
  const found: Finding[] = []
  const header = usefulAirmass(sight.exposure)
  const known = seen.flatMap(({ airmass: mass }) => (mass === undefined ? [] : [mass]))
  if (header !== undefined && known.length) {
    const [least, most] = [Math.min(...known), Math.max(...known)]
    const off = header < least ? least - header : Math.max(0, header - most)
    const allowed = limit('airmassTolerance') * header
    if (off > allowed) {
      const level = off > limit('airmassDoubt') * header ? 'doubt' : 'note'
      const text = `The header gives an airmass of ${header.toFixed(2)}, time, place and position give ${(middle.airmass ?? most).toFixed(2)}`
      found.push(finding(NIGHT_RULES, 'airmass-differs', text, { value: off, limit: allowed, level }))
    }
  }
  const stood = middle.airmass ?? header
  if (stood !== undefined && stood > limit('airmassHigh')) {
    const text = `The star stood low, at an airmass of ${stood.toFixed(2)} (more than ${limit('airmassHigh')})`
    found.push(finding(NIGHT_RULES, 'high-airmass', text, { value: stood, limit: limit('airmassHigh') }))
  }
  return found
}

function checkHourAngle({ facts }: Exposure, seen: number, limit: Limit): Finding[] {
  if (facts.hourAngle === undefined) return []
  const half = ((facts.exposure ?? 0) / 2 / 3600) * 1.0027
  const off = Math.abs(turn(facts.hourAngle - seen)) / 15
  if (off <= limit('hourAngleTolerance') + half) return []
  const text = `The header gives an hour angle of ${(facts.hourAngle / 15).toFixed(2)} h, time, place and position give ${(seen / 15).toFixed(2)} h`
  const level = off > 4 * limit('hourAngleTolerance') ? 'doubt' : 'note'
  return [finding(NIGHT_RULES, 'hour-angle-differs', text, { value: off, limit: limit('hourAngleTolerance'), level })]
}

function checkSun(here: { readonly mjd: number; readonly site: Site }, limit: Limit): Finding[] {
  const altitude = sunAltitude(here)
  if (altitude > 0) {
    const text = `At the time of the header the Sun stood ${altitude.toFixed(0)}° above the horizon`
    return [finding(NIGHT_RULES, 'sun-up', text, { value: altitude, limit: 0 })]
  }
  if (altitude <= limit('sunAltitude')) return []
  const text = `Taken in twilight, with the Sun ${Math.abs(altitude).toFixed(0)}° below the horizon (dark from ${-limit('sunAltitude')}°)`
  return [finding(NIGHT_RULES, 'twilight', text, { value: altitude, limit: limit('sunAltitude') })]
}

function checkMoon(here: Sight, limit: Limit): Finding[] {
  const { altitude, separation, illuminated } = moon(here)
  if (altitude < 0 || illuminated < BRIGHT_MOON || separation > limit('moonDistance')) return []
  const text = `The Moon, lit by ${(100 * illuminated).toFixed(0)} %, stood ${separation.toFixed(0)}° from the star`
  return [finding(NIGHT_RULES, 'moon-near', text, { value: separation, limit: limit('moonDistance') })]
}
