import type { Finding } from '../findings/types.ts'
import { gravestFirst, qualityOf } from '../quality/qualityOf.ts'
import type { Outcome } from '../quality/types.ts'
import type { CoverRules, Thresholds } from '../tables/types.ts'
import { calibrationCover, unusedCalibrations } from './calibrationCover.ts'
import type { CoverFrame } from './calibrationCover.ts'
import { checkClock } from './checkClock.ts'
import { checkPointing, timeZoneSlip } from './checkPointing.ts'
import { commonOffsetFindings } from './commonOffsetFindings.ts'
import { driftsOf } from './drifts.ts'
import { addFinding, exposuresOf, isOnSky, spectraOf } from './exposures.ts'
import type { FileFindings, NightSpectrum } from './exposures.ts'
import { findDuplicates } from './findDuplicates.ts'
import { matchTargets } from './matchTargets.ts'
import type { TargetMatch } from './matchTargets.ts'
import type { NightTyping } from './nightTyping.ts'
import { observingLog } from './observingLog.ts'
import { checkExpectedType, checkNames, checkTarget } from './rightStar.ts'
import { slipFinding } from './slipFinding.ts'
import { summariseTargets } from './summariseTargets.ts'
import { swappedTypes } from './swappedTypes.ts'
import { plainName } from './targetName.ts'
import { groupByTarget } from './targetGroups.ts'
import type { NightSummary, SpectrumNight, Target } from './types.ts'

/** What the night is judged by beside its outcomes. */
export interface NightOptions {
  readonly targets?: readonly Target[]
  readonly coverRules: CoverRules
  readonly thresholds: Thresholds
  readonly typing: NightTyping
}

/**
 * What only all files of a night together can say: whether each spectrum is of the right star, targets with all their
 * spectra, calibration cover, drifts, clocks, duplicates, what to observe again, and the log. Outcomes are not changed;
 * the quality of a spectrum counts the night's findings in.
 */
export function summariseNight(outcomes: readonly Outcome[], options: NightOptions): NightSummary {
  const { targets = [], coverRules, thresholds, typing } = options
  const exposures = exposuresOf(outcomes)
  const spectra = spectraOf(outcomes)
  const byFile: FileFindings = new Map()
  const nightFindings: Finding[] = []

  const repeats = findDuplicates(outcomes, exposures, byFile)
  const matches = new Map<number, TargetMatch>()
  for (const exposure of targets.length ? exposures.filter(({ kind }) => isOnSky(kind)) : []) {
    const match = matchTargets(exposure.facts, targets, thresholds.positionTolerance.value)
    matches.set(exposure.outcome, match)
    if (exposure.kind === 'standard' && !match.target) continue
    for (const found of checkTarget(exposure, match, thresholds)) addFinding(byFile, exposure.outcome, found)
  }
  checkNames(exposures, matches, thresholds, byFile)
  checkClock(exposures, thresholds, byFile)
  const slip = timeZoneSlip(exposures, thresholds)
  if (slip !== undefined) nightFindings.push(slipFinding(slip, exposures))
  for (const exposure of exposures)
    for (const found of checkPointing(exposure, thresholds, slip)) addFinding(byFile, exposure.outcome, found)

  const doubted = outcomesWith(byFile, 'clock-out-of-order')
  const frames = exposures.map((exposure) => {
    const { frame } = outcomes[exposure.outcome]
    return {
      exposure,
      ...(frame?.statistics ? { statistics: frame.statistics } : {}),
      isTimeDoubtful: doubted.has(exposure.outcome),
      isUsable: frame?.quality !== 'unusable' && !repeats.has(exposure.outcome),
    }
  })
  nightFindings.push(...unusedCalibrations(frames), ...commonOffsetFindings(spectra, thresholds))

  const nights = spectra.map((one) => spectrumNight(one, matches, byFile, { thresholds, typing }))
  const swapped = swappedTypes(spectra, nights, { thresholds, typing })
  const judged = nights.map((night, i) => withFindings(night, spectra[i], swapped.get(i) ?? []))
  const groups = groupByTarget(spectra, matches, thresholds)
  const keys = new Array<string>(spectra.length).fill('')
  for (const [k, { members }] of groups.entries())
    for (const i of members) if (!repeats.has(spectra[i].ref.outcome)) keys[i] = String(k)
  const { summaries, notObserved, observeAgain, findings } = summariseTargets(groups, {
    spectra,
    nights: judged,
    repeats,
    targets,
    rawFrames: rawFramesOf(frames, matches),
    thresholds,
    typing,
  })
  nightFindings.push(...findings)

  const apart = outcomesWith(byFile, 'another-night')
  const times = exposures.flatMap(({ mjd, outcome }) => (doubted.has(outcome) || apart.has(outcome) ? [] : (mjd ?? [])))
  // what is followed through the night needs a clock that holds and light that was measured
  const followed = spectra.map(({ ref }, i) => !doubted.has(ref.outcome) && judged[i].quality !== 'unusable')
  return {
    spectra: judged,
    targets: summaries,
    notObserved,
    observeAgain,
    cover: calibrationCover(frames, coverRules),
    drifts: driftsOf(
      spectra.filter((_, i) => followed[i]),
      frames.filter(({ isTimeDoubtful }) => !isTimeDoubtful),
      keys.filter((_, i) => followed[i]),
      thresholds,
    ),
    log: observingLog(exposures, doubted),
    findings: gravestFirst(nightFindings),
    frameFindings: new Map([...byFile].filter(([outcome]) => outcomes[outcome].spectra.length === 0)),
    ...(times.length ? { mjdFirst: least(times), mjdLast: -least(times.map((time) => -time)) } : {}),
    counts: countsOf(outcomes, judged),
  }
}

/** Outcomes that have a finding of a code. */
function outcomesWith(byFile: FileFindings, wanted: string): ReadonlySet<number> {
  return new Set(
    [...byFile].flatMap(([outcome, found]) => (found.some(({ code }) => code === wanted) ? [outcome] : [])),
  )
}

/** Usable raw frames of each listed target, by its plain name. */
function rawFramesOf(
  frames: readonly CoverFrame[],
  matches: ReadonlyMap<number, TargetMatch>,
): ReadonlyMap<string, number> {
  const counts = new Map<string, number>()
  for (const { exposure, isUsable } of frames) {
    const target = matches.get(exposure.outcome)?.target
    if (!target || !exposure.isFrame || !isUsable) continue
    const name = plainName(target.object)
    counts.set(name, (counts.get(name) ?? 0) + 1)
  }
  return counts
}

function least(values: readonly number[]): number {
  return values.reduce((low, value) => (value < low ? value : low), Infinity)
}

function spectrumNight(
  { ref, spectrum }: NightSpectrum,
  matches: ReadonlyMap<number, TargetMatch>,
  byFile: FileFindings,
  { thresholds, typing }: { readonly thresholds: Thresholds; readonly typing: NightTyping },
): SpectrumNight {
  const { target, separationArcsec } = matches.get(ref.outcome) ?? {}
  const expectedType = target?.expectedType
  const probability = expectedType === undefined ? undefined : typing.probability(spectrum.type, expectedType)
  const findings = gravestFirst([
    ...(byFile.get(ref.outcome) ?? []),
    ...checkExpectedType(spectrum.type, expectedType, probability, thresholds),
  ])
  return {
    ref,
    ...(target ? { target: target.object } : {}),
    ...(expectedType === undefined ? {} : { expectedType }),
    ...(probability === undefined ? {} : { expectedProbability: probability }),
    ...(separationArcsec === undefined ? {} : { separationArcsec }),
    findings,
    quality: qualityOf([...spectrum.findings, ...findings]),
  }
}

function withFindings(night: SpectrumNight, { spectrum }: NightSpectrum, added: readonly Finding[]): SpectrumNight {
  if (!added.length) return night
  const findings = gravestFirst([...night.findings, ...added])
  return { ...night, findings, quality: qualityOf([...spectrum.findings, ...findings]) }
}

/** Files without error by their spectra; frames by their own quality; files that could not be read. */
function countsOf(outcomes: readonly Outcome[], nights: readonly SpectrumNight[]): NightSummary['counts'] {
  const counts = { usable: 0, doubtful: 0, unusable: 0, unreadable: 0 }
  for (const { quality } of nights) counts[quality]++
  for (const { error, spectra } of outcomes) {
    if (error && spectra.length === 0) counts.unreadable++
  }
  return counts
}
