import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { chance } from '../quality/figures.ts'
import type { Thresholds } from '../tables/types.ts'
import { disagreement } from '../typing/combineTypes.ts'
import type { NightSpectrum } from './exposures.ts'
import { NO_TYPE } from './nightTyping.ts'
import type { NightTyping } from './nightTyping.ts'
import { brightnessScale, judgeMissing, judgeTarget } from './observeAgain.ts'
import type { TargetGroup } from './targetGroups.ts'
import { plainName } from './targetName.ts'
import type { ObserveAgain, SpectrumNight, Target, TargetSummary } from './types.ts'

interface TargetsInput {
  readonly spectra: readonly NightSpectrum[]
  readonly nights: readonly SpectrumNight[]
  /** Outcomes that repeat another and are not counted. */
  readonly repeats: ReadonlySet<number>
  readonly targets: readonly Target[]
  /** Names (plain) of listed targets that usable raw frames were taken of, with their number. */
  readonly rawFrames: ReadonlyMap<string, number>
  readonly thresholds: Thresholds
  readonly typing: NightTyping
}

/** Rows of targets with all their spectra together, targets never observed, and what to observe again. */
export function summariseTargets(
  groups: readonly TargetGroup[],
  input: TargetsInput,
): {
  readonly summaries: readonly TargetSummary[]
  readonly notObserved: readonly Target[]
  readonly observeAgain: readonly ObserveAgain[]
  /** Of targets without a spectrum. */
  readonly findings: readonly Finding[]
} {
  const { targets, thresholds, spectra, nights, rawFrames } = input
  const withSpectra = groups.map((group) => summariseTarget(group, input))
  const observed = new Set(groups.flatMap(({ listed }) => (listed ? [plainName(listed.object)] : [])))
  const without = targets.filter(({ object }) => !observed.has(plainName(object)))
  const notObserved = without.filter(({ object }) => !rawFrames.has(plainName(object)))
  const rawOnly = without.flatMap((target) => onlyRaw(target, rawFrames.get(plainName(target.object))))
  const summaries = [...withSpectra, ...rawOnly]
  const scale = brightnessScale(
    groups.flatMap(({ members, listed }) =>
      members.map((i) => ({ spectrum: spectra[i].spectrum, night: nights[i], ...(listed ? { listed } : {}) })),
    ),
  )
  const missing = notObserved.map((target) => ({ target, verdict: judgeMissing(target, scale, thresholds) }))
  const again: ObserveAgain[] = [
    ...summaries.flatMap(({ target, listed, observeAgain, reason = '', exposureNeeded, urgency = 0 }) =>
      observeAgain ? [{ target, ...(listed ? { listed } : {}), reason, ...needed(exposureNeeded), urgency }] : [],
    ),
    ...missing.map(({ target, verdict }) => ({
      target: target.object,
      listed: target,
      reason: verdict.reason ?? '',
      ...needed(verdict.exposureNeeded),
      urgency: verdict.urgency ?? 0,
    })),
  ]
  return {
    summaries,
    notObserved,
    observeAgain: again.sort(
      (a, b) => b.urgency - a.urgency || (a.target < b.target ? -1 : a.target > b.target ? 1 : 0),
    ),
    findings: missing.flatMap(({ verdict }) => verdict.findings),
  }
}

/** A target that was exposed but has no spectrum: nothing to observe, something to extract. */
function onlyRaw(listed: Target, frames: number | undefined): readonly TargetSummary[] {
  if (frames === undefined) return []
  const text = `${listed.object}: ${frames} raw ${frames === 1 ? 'frame' : 'frames'}, no spectrum that could be read`
  return [
    {
      target: listed.object,
      listed,
      spectra: [],
      type: NO_TYPE,
      ...(listed.wantedSnr === undefined ? {} : { snrWanted: listed.wantedSnr }),
      observeAgain: false,
      findings: [finding(NIGHT_RULES, 'only-raw-frames', text, { value: frames })],
    },
  ]
}

function needed(exposureNeeded: number | undefined): { readonly exposureNeeded?: number } {
  return exposureNeeded === undefined ? {} : { exposureNeeded }
}

function summariseTarget({ target, listed, members }: TargetGroup, input: TargetsInput): TargetSummary {
  const { spectra, nights, repeats, thresholds, typing } = input
  const counted = members.filter((i) => !repeats.has(spectra[i].ref.outcome))
  const usable = counted.filter((i) => nights[i].quality !== 'unusable')
  const typed = usable.filter((i) => spectra[i].spectrum.type.state !== 'none').map((i) => spectra[i].spectrum)
  const type =
    typed.length === 0
      ? (spectra[counted[0]]?.spectrum.type ?? NO_TYPE)
      : typed.length === 1
        ? typed[0].type
        : typing.combine(typed)
  const expectedType = listed?.expectedType
  const probability =
    expectedType === undefined || typed.length === 0 ? undefined : typing.probability(type, expectedType)
  const verdict = judgeTarget(
    counted.map((i) => ({ spectrum: spectra[i].spectrum, night: nights[i] })),
    listed,
    probability,
    thresholds,
  )
  const findings: Finding[] = [...verdict.findings]
  if (
    expectedType !== undefined &&
    probability !== undefined &&
    probability < thresholds.typeProbability.value &&
    typed.length > 1
  ) {
    const found = [type.spectralType, type.luminosityClass].filter((part) => part !== undefined).join(' ') || 'none'
    const text = `${target}: the type of ${typed.length} spectra together is ${found}, the list expects ${expectedType} (probability ${chance(probability)})`
    findings.push(
      finding(NIGHT_RULES, 'type-unlike-expected', text, {
        value: probability,
        limit: thresholds.typeProbability.value,
      }),
    )
  }
  const disagrees = typed.length > 1 ? disagreement(typed.map((one) => one.type)) : undefined
  if (disagrees) findings.push(disagrees)
  return {
    target,
    ...(listed ? { listed } : {}),
    spectra: members.map((i) => spectra[i].ref),
    type,
    ...(probability === undefined ? {} : { expectedProbability: probability }),
    ...(listed?.wantedSnr === undefined ? {} : { snrWanted: listed.wantedSnr }),
    ...(verdict.snrReached === undefined ? {} : { snrReached: verdict.snrReached }),
    observeAgain: verdict.observeAgain,
    ...(verdict.reason === undefined ? {} : { reason: verdict.reason }),
    ...needed(verdict.exposureNeeded),
    ...(verdict.urgency === undefined ? {} : { urgency: verdict.urgency }),
    findings,
  }
}
