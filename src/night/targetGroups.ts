import { angularSeparation } from '../ephemeris/angularSeparation.ts'
import type { Thresholds } from '../tables/types.ts'
import { baseName } from './exposures.ts'
import type { NightSpectrum } from './exposures.ts'
import { positionOf } from './matchTargets.ts'
import type { TargetMatch } from './matchTargets.ts'
import { plainName } from './targetName.ts'
import type { Target } from './types.ts'

/** The spectra of one target, as indices into the night's spectra. */
export interface TargetGroup {
  readonly target: string
  readonly listed?: Target
  readonly members: readonly number[]
}

/**
 * Spectra grouped by target: by the row of the target list they belong to; without one by name, and of one name by
 * place when two places lie further apart than `nameRadius`; a spectrum without either is a target of its own.
 */
export function groupByTarget(
  spectra: readonly NightSpectrum[],
  matches: ReadonlyMap<number, TargetMatch>,
  thresholds: Thresholds,
): readonly TargetGroup[] {
  const groups = new Map<string, { readonly target: string; readonly listed?: Target; readonly members: number[] }>()
  const places = new Map<string, { readonly key: string; readonly ra: number; readonly dec: number }[]>()
  for (const [i, { spectrum, file, ref }] of spectra.entries()) {
    const listed = matches.get(ref.outcome)?.target
    const name = spectrum.facts.object ?? ''
    const plain = plainName(name)
    let key = listed
      ? `listed ${plainName(listed.object)}`
      : plain === ''
        ? `file ${ref.outcome} ${ref.spectrum}`
        : `name ${plain}`
    const place = listed || plain === '' ? undefined : positionOf(spectrum.facts)
    if (place) {
      const known = places.get(plain) ?? []
      const near = known.find((one) => 3600 * angularSeparation(one, place) <= thresholds.nameRadius.value)
      if (near) key = near.key
      else {
        if (known.length) key = `${key} ${known.length}`
        places.set(plain, [...known, { key, ...place }])
      }
    }
    const group = groups.get(key)
    if (group) group.members.push(i)
    else
      groups.set(key, {
        target: listed?.object ?? (name || baseName(file)),
        ...(listed ? { listed } : {}),
        members: [i],
      })
  }
  return [...groups.values()]
}
