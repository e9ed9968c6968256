import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { median } from '../numeric/median.ts'
import { setupDifferences } from '../quality/setupName.ts'
import type { FrameKind, FrameStatistics } from '../quality/types.ts'
import type { CoverRules } from '../tables/types.ts'
import { baseName, isOnSky } from './exposures.ts'
import type { Exposure } from './exposures.ts'
import type { SetupCover } from './types.ts'

const CALIBRATIONS = ['bias', 'dark', 'flat', 'arc'] as const
type Calibration = (typeof CALIBRATIONS)[number]

const WORDS: Readonly<Record<Calibration, readonly [string, string]>> = {
  bias: ['bias frame', 'bias frames'],
  dark: ['dark frame', 'dark frames'],
  flat: ['flat', 'flats'],
  arc: ['arc', 'arcs'],
}

const CODES: Readonly<Record<Calibration, 'few-bias-frames' | 'few-dark-frames' | 'few-flats' | 'few-arcs'>> = {
  bias: 'few-bias-frames',
  dark: 'few-dark-frames',
  flat: 'few-flats',
  arc: 'few-arcs',
}

/** A frame that may serve as a calibration, with its pixel statistics and whether it can be used. */
export interface CoverFrame {
  readonly exposure: Exposure
  readonly statistics?: FrameStatistics
  readonly isUsable: boolean
  /** True where the clock of the file is in doubt, so that it says nothing of how far away an arc is. */
  readonly isTimeDoubtful?: boolean
}

/**
 * How well each science set-up is covered by calibrations: bias and dark must agree in how the detector was read, flats
 * and arcs in the way of the light too. Science set-ups are those of raw frames; of extracted spectra where the folder
 * has no raw science frame but calibrations. Empty in a folder without either.
 */
export function calibrationCover(frames: readonly CoverFrame[], rules: CoverRules): readonly SetupCover[] {
  const raw = frames.filter(({ exposure }) => exposure.isFrame)
  const calibrations = raw.filter(({ exposure }) => kindOf(exposure.kind) !== undefined)
  const rawScience = raw.filter(({ exposure }) => isOnSky(exposure.kind))
  const science = rawScience.length ? rawScience : frames.filter(({ exposure }) => isOnSky(exposure.kind))
  if (!calibrations.length && !rawScience.length) return []
  const setups = new Map<string, CoverFrame[]>()
  for (const frame of science) {
    const list = setups.get(frame.exposure.setup)
    if (list) list.push(frame)
    else setups.set(frame.exposure.setup, [frame])
  }
  return [...setups.entries()]
    .sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))
    .map(([setup, members]) => coverOf(setup, members, frames, rules))
}

/** The calibration a kind serves as; a flat of the sky serves as a flat. */
function kindOf(kind: FrameKind): Calibration | undefined {
  if (kind === 'skyflat') return 'flat'
  return CALIBRATIONS.find((one) => one === kind)
}

function fits(science: Exposure, calibration: Exposure, kind: Calibration): boolean {
  const parts = kind === 'bias' || kind === 'dark' ? 'readout' : 'all'
  return setupDifferences(science.facts, calibration.facts, parts).length === 0
}

function coverOf(
  setup: string,
  members: readonly CoverFrame[],
  frames: readonly CoverFrame[],
  rules: CoverRules,
): SetupCover {
  const [{ exposure: example }] = members
  const fitting = (kind: Calibration): readonly CoverFrame[] =>
    frames.filter(
      ({ exposure, isUsable }) =>
        exposure.isFrame && isUsable && kindOf(exposure.kind) === kind && fits(example, exposure, kind),
    )
  const [bias, dark, flat, arc] = CALIBRATIONS.map(fitting)
  const standards = members.filter(({ exposure }) => exposure.kind === 'standard').length
  const extracted = frames.filter(
    ({ exposure }) =>
      !exposure.isFrame &&
      exposure.kind === 'standard' &&
      setupDifferences(example.facts, exposure.facts, 'all').length === 0,
  ).length
  const standard = Math.max(standards, extracted)
  const gap = arcGap(members, arc)
  const longest = Math.max(0, ...members.map(({ exposure }) => exposure.facts.exposure ?? 0))
  const wanted: Readonly<Record<Calibration, number>> = {
    bias: rules.bias.value,
    dark: longest > rules.darkExposure.value ? Math.max(1, rules.dark.value) : rules.dark.value,
    flat: rules.flat.value,
    arc: rules.arc.value,
  }
  const counts: Readonly<Record<Calibration, number>> = {
    bias: bias.length,
    dark: dark.length,
    flat: flat.length,
    arc: arc.length,
  }
  const findings: Finding[] = CALIBRATIONS.filter((kind) => counts[kind] < wanted[kind]).map((kind) => {
    const text = `Set-up ${setup}: ${countWords(kind, counts[kind])} fit${counts[kind] < 2 ? 's' : ''}, ${wanted[kind]} wanted${misfits(kind, example, frames)}`
    return finding(NIGHT_RULES, CODES[kind], text, {
      value: counts[kind],
      limit: wanted[kind],
      ...(counts[kind] > 0 || kind === 'dark' ? { level: 'note' as const } : {}),
    })
  })
  if (standard < rules.standard.value) {
    const text = `Set-up ${setup}: ${standard === 0 ? 'no standard star was' : `${standard} standard stars were`} taken, ${rules.standard.value} wanted`
    findings.push(finding(NIGHT_RULES, 'no-standard', text, { value: standard, limit: rules.standard.value }))
  }
  if (gap && gap.hours > rules.arcGapHours.value) {
    const text = `Set-up ${setup}: the arc nearest to ${baseName(gap.file)} lies ${gap.hours.toFixed(1)} h away, at most ${rules.arcGapHours.value} h wanted`
    findings.push(finding(NIGHT_RULES, 'arc-far-in-time', text, { value: gap.hours, limit: rules.arcGapHours.value }))
  }
  const level = median(flat.map(({ statistics }) => statistics?.p99 ?? NaN))
  // a flat divided by its own shape has a level of 1 and no counts
  if (level > 2 && level < rules.flatLevel.value) {
    const text = `Set-up ${setup}: the flats hold ${level.toFixed(0)} counts at most, ${rules.flatLevel.value} wanted`
    findings.push(finding(NIGHT_RULES, 'weak-flat', text, { value: level, limit: rules.flatLevel.value }))
  }
  return {
    setup,
    science: members.filter(({ exposure }) => exposure.kind === 'science').length,
    ...counts,
    standard,
    ...(gap ? { arcGapHours: gap.hours } : {}),
    findings,
  }
}

function countWords(kind: Calibration, count: number): string {
  const [one, many] = WORDS[kind]
  return count === 0 ? `no ${one}` : count === 1 ? `1 ${one}` : `${count} ${many}`
}

/** ' (2 arcs of the folder differ in binning)', or why else those there are do not count. */
function misfits(kind: Calibration, example: Exposure, frames: readonly CoverFrame[]): string {
  const others = frames.filter(
    ({ exposure }) => exposure.isFrame && kindOf(exposure.kind) === kind && !fits(example, exposure, kind),
  )
  const unusable = frames.filter(
    ({ exposure, isUsable }) =>
      exposure.isFrame && !isUsable && kindOf(exposure.kind) === kind && fits(example, exposure, kind),
  ).length
  const parts: string[] = []
  if (others.length) {
    const parties = kind === 'bias' || kind === 'dark' ? 'readout' : 'all'
    const differing = new Set(
      others.flatMap(({ exposure }) => setupDifferences(example.facts, exposure.facts, parties)),
    )
    const names = [...differing].map((fact) => (fact === 'gratingTilt' ? 'grating tilt' : fact))
    parts.push(
      `${countWords(kind, others.length)} of the folder differ${others.length === 1 ? 's' : ''} in ${names.join(', ')}`,
    )
  }
  if (unusable) parts.push(`${countWords(kind, unusable)} cannot be used`)
  return parts.length ? ` (${parts.join('; ')})` : ''
}

/** The science frame farthest in time from its nearest arc. */
function arcGap(
  members: readonly CoverFrame[],
  arcs: readonly CoverFrame[],
): { readonly hours: number; readonly file: string } | undefined {
  const times = arcs.flatMap(({ exposure }) => (exposure.mjd === undefined ? [] : [exposure.mjd]))
  let worst: { hours: number; file: string } | undefined
  for (const { exposure, isTimeDoubtful } of members) {
    const { mjd } = exposure
    if (mjd === undefined || isTimeDoubtful || !times.length) continue
    const hours = 24 * Math.min(...times.map((time) => Math.abs(time - mjd)))
    if (!worst || hours > worst.hours) worst = { hours, file: exposure.file }
  }
  return worst
}

/** Calibrations that fit no science set-up, by kind and set-up. */
export function unusedCalibrations(frames: readonly CoverFrame[]): readonly Finding[] {
  const bySetup = new Map(
    frames.filter(({ exposure }) => isOnSky(exposure.kind)).map(({ exposure }) => [exposure.setup, exposure]),
  )
  const science = [...bySetup.values()]
  if (!science.length) return []
  const groups = new Map<
    string,
    { readonly kind: Calibration; readonly setup: string; count: number; differing: Set<string> }
  >()
  for (const { exposure } of frames) {
    const kind = kindOf(exposure.kind)
    if (!kind || !exposure.isFrame || science.some((one) => fits(one, exposure, kind))) continue
    const key = `${kind}|${exposure.setup}`
    const group = groups.get(key) ?? { kind, setup: exposure.setup, count: 0, differing: new Set<string>() }
    group.count++
    const parts = kind === 'bias' || kind === 'dark' ? 'readout' : 'all'
    const nearest = science
      .map((one) => setupDifferences(one.facts, exposure.facts, parts))
      .reduce((least, one) => (one.length < least.length ? one : least))
    for (const fact of nearest) group.differing.add(fact === 'gratingTilt' ? 'grating tilt' : fact)
    groups.set(key, group)
  }
  return [...groups.values()].map(({ kind, setup, count, differing }) => {
    const text = `${countWords(kind, count)} of set-up ${setup} fit${count === 1 ? 's' : ''} no science exposure: other ${[...differing].join(', ')}`
    return finding(NIGHT_RULES, 'calibration-does-not-fit', capital(text), { value: count })
  })
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}
