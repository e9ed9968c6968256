import { angularSeparation } from '../ephemeris/angularSeparation.ts'
import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { chance, figure } from '../quality/figures.ts'
import type { TypePosterior } from '../typing/types.ts'
import type { Thresholds } from '../tables/types.ts'
import { addFinding, baseName, isOnSky } from './exposures.ts'
import type { Exposure, FileFindings } from './exposures.ts'
import { positionOf } from './matchTargets.ts'
import type { TargetMatch } from './matchTargets.ts'
import { plainName } from './targetName.ts'

/** An angle as a person reads it. */
export function angleWords(arcsec: number): string {
  if (arcsec < 120) return `${figure(arcsec)}″`
  return arcsec < 7200 ? `${figure(arcsec / 60)}′` : `${figure(arcsec / 3600)}°`
}

/** What name and position of an exposure say against the target list. */
export function checkTarget(exposure: Exposure, match: TargetMatch, thresholds: Thresholds): readonly Finding[] {
  const { facts } = exposure
  const { byName, byPosition, separationArcsec = 0, nameSeparationArcsec, target } = match
  const name = facts.object ?? 'no name'
  const tolerance = thresholds.positionTolerance.value
  if (!target)
    return [finding(NIGHT_RULES, 'not-on-target-list', `${name} fits no row of the target list by name or position`)]
  if (byName && byPosition && byName !== byPosition) {
    const text = `The header names ${name}, the telescope pointed at ${byPosition.object} (${angleWords(separationArcsec)} away); ${byName.object} lies ${angleWords(nameSeparationArcsec ?? NaN)} away`
    return [finding(NIGHT_RULES, 'wrong-star', text, { value: nameSeparationArcsec, limit: tolerance })]
  }
  if (byName && nameSeparationArcsec !== undefined && nameSeparationArcsec > tolerance) {
    const text = `The telescope pointed ${angleWords(nameSeparationArcsec)} from ${byName.object}, at most ${angleWords(tolerance)} expected`
    return [finding(NIGHT_RULES, 'position-off-target', text, { value: nameSeparationArcsec, limit: tolerance })]
  }
  if (!byName) {
    const text = `The position is that of ${target.object} (${angleWords(separationArcsec)} away), the header names ${name}`
    return [finding(NIGHT_RULES, 'name-not-on-target-list', text, { value: separationArcsec, limit: tolerance })]
  }
  return []
}

/** What the type found says of the type the list expects. */
export function checkExpectedType(
  type: TypePosterior,
  expectedType: string | undefined,
  probability: number | undefined,
  thresholds: Thresholds,
): readonly Finding[] {
  if (expectedType === undefined || probability === undefined || type.state === 'none') return []
  if (probability >= thresholds.typeProbabilityNote.value) return []
  const isDoubt = probability < thresholds.typeProbability.value
  const found = [type.spectralType, type.luminosityClass].filter((part) => part !== undefined).join(' ')
  const words =
    type.state === 'outside' ? type.peculiar.map(({ word }) => word).join(', ') || 'no ordinary star' : found
  const text = `The type found is ${words}, the list expects ${expectedType}: its probability is ${chance(probability)}`
  const limit = isDoubt ? thresholds.typeProbability.value : thresholds.typeProbabilityNote.value
  return [
    finding(NIGHT_RULES, 'type-unlike-expected', text, {
      value: probability,
      limit,
      level: isDoubt ? 'doubt' : 'note',
    }),
  ]
}

/** Adds findings on names: two exposures with the names of each other, one name at two places, one place with two. */
export function checkNames(
  exposures: readonly Exposure[],
  matches: ReadonlyMap<number, TargetMatch>,
  thresholds: Thresholds,
  findings: FileFindings,
): void {
  const onSky = exposures.filter(({ kind, facts }) => isOnSky(kind) && facts.object !== undefined)
  checkSwaps(onSky, matches, findings)
  checkPlaces(onSky, thresholds, findings)
}

function checkSwaps(
  onSky: readonly Exposure[],
  matches: ReadonlyMap<number, TargetMatch>,
  findings: FileFindings,
): void {
  const wrong = onSky.flatMap((exposure) => {
    const { byName, byPosition } = matches.get(exposure.outcome) ?? {}
    return byName && byPosition && byName !== byPosition ? [{ exposure, byName, byPosition }] : []
  })
  for (const one of wrong) {
    const other = wrong.find(({ byName, byPosition }) => byName === one.byPosition && byPosition === one.byName)
    if (!other) continue
    const text = `${baseName(one.exposure.file)} and ${baseName(other.exposure.file)} carry the names of each other: ${one.byName.object} and ${other.byName.object}`
    addFinding(findings, one.exposure.outcome, finding(NIGHT_RULES, 'names-swapped', text))
  }
}

function checkPlaces(onSky: readonly Exposure[], thresholds: Thresholds, findings: FileFindings): void {
  const placed = onSky.flatMap((exposure) => {
    const place = positionOf(exposure.facts)
    return place ? [{ exposure, place, name: plainName(exposure.facts.object ?? '') }] : []
  })
  const byName = new Map<string, typeof placed>()
  for (const one of placed) {
    if (one.name === '') continue
    const group = byName.get(one.name)
    if (group) group.push(one)
    else byName.set(one.name, [one])
  }
  for (const [first, ...rest] of byName.values()) {
    const far = rest
      .map((other) => ({ other, away: 3600 * angularSeparation(first.place, other.place) }))
      .filter(({ away }) => away > thresholds.nameRadius.value)
    const pairs = far.flatMap(({ other, away }, i) => [
      { one: other, other: first, away },
      ...(i === 0 ? [{ one: first, other, away }] : []),
    ])
    for (const { one, other, away } of pairs) {
      const text = `The name ${one.exposure.facts.object ?? ''} was given to two places: that of ${baseName(other.exposure.file)} lies ${angleWords(away)} away`
      const found = finding(NIGHT_RULES, 'one-name-two-positions', text, {
        value: away,
        limit: thresholds.nameRadius.value,
      })
      addFinding(findings, one.exposure.outcome, found)
    }
  }
  // one of each name at each place is enough
  const unique = new Map(
    placed.map((one) => [`${one.name} ${one.place.ra.toFixed(3)} ${one.place.dec.toFixed(3)}`, one]),
  )
  const sorted = [...unique.values()].sort((a, b) => a.place.dec - b.place.dec)
  const near = 5 / 3600
  for (let i = 0; i < sorted.length; i++) {
    for (let j = i + 1; j < sorted.length && sorted[j].place.dec - sorted[i].place.dec <= near; j++) {
      if (sorted[i].name === sorted[j].name || sorted[i].name === '' || sorted[j].name === '') continue
      const across = Math.abs(sorted[i].place.ra - sorted[j].place.ra) * Math.cos((sorted[i].place.dec * Math.PI) / 180)
      if (across > 2 * near && across < 359) continue
      if (angularSeparation(sorted[i].place, sorted[j].place) > near) continue
      const text = `Two names for one place: ${sorted[i].exposure.facts.object ?? ''} (${baseName(sorted[i].exposure.file)}) and ${sorted[j].exposure.facts.object ?? ''} (${baseName(sorted[j].exposure.file)})`
      addFinding(findings, sorted[j].exposure.outcome, finding(NIGHT_RULES, 'one-position-two-names', text))
    }
  }
}
