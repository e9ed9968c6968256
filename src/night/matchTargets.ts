import { angularSeparation } from '../ephemeris/angularSeparation.ts'
import type { Direction } from '../ephemeris/angularSeparation.ts'
import { precess } from '../ephemeris/precess.ts'
import { julianYear, withProperMotion } from '../ephemeris/properMotion.ts'
import type { HeaderFacts } from '../spectrum/types.ts'
import { plainName } from './targetName.ts'
import type { Target } from './types.ts'

/** Which row of the target list an exposure belongs to, by position and by name. */
export interface TargetMatch {
  /** By position where one lies within the tolerance, else by name. */
  readonly target?: Target
  readonly byPosition?: Target
  readonly byName?: Target
  /** Arcseconds from the position of the header to that of `target` at the time of the exposure. */
  readonly separationArcsec?: number
  /** Arcseconds to the target of that name, when it has a position. */
  readonly nameSeparationArcsec?: number
}

/** Position of a header in J2000; undefined without one, and for the place-holder 0, 0. */
export function positionOf({ ra, dec, equinox }: HeaderFacts): Direction | undefined {
  if (ra === undefined || dec === undefined || (ra === 0 && dec === 0)) return undefined
  if (equinox === undefined || Math.abs(equinox - 2000) < 0.1 || equinox < 1800 || equinox > 2200) return { ra, dec }
  return precess({ ra, dec }, equinox)
}

/** Position of a target at an MJD by its proper motion; undefined when the list gives none. */
export function targetPosition({ ra, dec, pmRa, pmDec, epoch = 2000 }: Target, mjd?: number): Direction | undefined {
  if (ra === undefined || dec === undefined) return undefined
  if (mjd === undefined || (pmRa === undefined && pmDec === undefined)) return { ra, dec }
  return withProperMotion({ ra, dec }, { pmRa: pmRa ?? 0, pmDec: pmDec ?? 0 }, epoch, julianYear(mjd))
}

/** The target an exposure belongs to: the nearest within `toleranceArcsec`, else the one of the same name. */
export function matchTargets(facts: HeaderFacts, targets: readonly Target[], toleranceArcsec: number): TargetMatch {
  const here = positionOf(facts)
  const mjd = facts.mjdMid ?? facts.mjdStart
  const separation = (target: Target): number | undefined => {
    const there = targetPosition(target, mjd)
    return here && there ? 3600 * angularSeparation(here, there) : undefined
  }
  const key = facts.object === undefined ? '' : plainName(facts.object)
  const named = key === '' ? [] : targets.filter(({ object }) => plainName(object) === key)
  const byName = nearest(named, separation)?.target ?? named[0]
  const near = nearest(targets, separation)
  const byPosition = near && near.separation <= toleranceArcsec ? near.target : undefined
  // where two targets lie this close the name decides
  const nameSeparation = byName && separation(byName)
  const target = nameSeparation !== undefined && nameSeparation <= toleranceArcsec ? byName : (byPosition ?? byName)
  const reached = target && separation(target)
  return {
    ...(target ? { target } : {}),
    ...(byPosition ? { byPosition: target === byName && byName ? byName : byPosition } : {}),
    ...(byName ? { byName } : {}),
    ...(reached === undefined ? {} : { separationArcsec: reached }),
    ...(nameSeparation === undefined ? {} : { nameSeparationArcsec: nameSeparation }),
  }
}

function nearest(
  targets: readonly Target[],
  separation: (target: Target) => number | undefined,
): { readonly target: Target; readonly separation: number } | undefined {
  let best: { readonly target: Target; readonly separation: number } | undefined
  for (const target of targets) {
    const away = separation(target)
    if (away !== undefined && (!best || away < best.separation)) best = { target, separation: away }
  }
  return best
}
