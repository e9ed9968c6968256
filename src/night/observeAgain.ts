import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { median } from '../numeric/median.ts'
import { chance, figure } from '../quality/figures.ts'
import type { SignalToNoise, SpectrumOutcome } from '../quality/types.ts'
import type { Thresholds } from '../tables/types.ts'
import type { SpectrumNight, Target } from './types.ts'

/** A spectrum of a target with what the night says of it. */
export interface TargetSpectrum {
  readonly spectrum: SpectrumOutcome
  readonly night: SpectrumNight
}

/** Whether a target must be observed again, why, for how long and how urgently. */
export interface Verdict {
  readonly snrReached?: number
  readonly observeAgain: boolean
  readonly reason?: string
  readonly exposureNeeded?: number
  readonly urgency?: number
  readonly findings: readonly Finding[]
}

/** How grave each reason is, 0 to 1, before the priority of the list; common practice, no source. */
const GRAVITY = { missing: 1, unusable: 0.95, otherStar: 0.9, saturated: 0.85, signal: 0.35, type: 0.5 } as const
/** Part by which a large lack of signal raises its gravity. */
const LACK = 0.5
/** Share of the exposure that saturated to try next. */
const SHORTER = 0.3

/** Signal-to-noise per Å of the band that tells most: visual, else blue, else red. */
export function mainSignal(snr: SignalToNoise): number | undefined {
  return snr.visual ?? snr.blue ?? snr.red
}

/**
 * The verdict on a target from its spectra (repeats left out). The signal of all usable exposures adds in quadrature;
 * signal-to-noise grows with the root of the exposure, so the time still needed is t ((wanted / reached)² − 1).
 */
export function judgeTarget(
  spectra: readonly TargetSpectrum[],
  listed: Target | undefined,
  expectedProbability: number | undefined,
  thresholds: Thresholds,
): Verdict {
  const usable = spectra.filter(({ night }) => night.quality !== 'unusable')
  const signals = usable.flatMap(({ spectrum }) => mainSignal(spectrum.snr) ?? [])
  const snrReached = signals.length ? Math.hypot(...signals) : undefined
  const wanted = listed?.wantedSnr
  const name = listed?.object ?? spectra[0]?.spectrum.facts.object ?? 'the target'
  const reasons: { readonly text: string; readonly gravity: number; readonly exposure?: number }[] = []
  const findings: Finding[] = []

  if (!usable.length) {
    const worst = spectra
      .flatMap(({ spectrum, night }) => [...spectrum.findings, ...night.findings])
      .find(({ level }) => level === 'fault')
    const isSaturated = worst !== undefined && /saturated|flat-topped/.test(worst.code)
    const text = `no spectrum can be used${worst ? `: ${lower(worst.text)}` : ''}`
    reasons.push({
      text,
      gravity: isSaturated ? GRAVITY.saturated : GRAVITY.unusable,
      ...exposureOf(isSaturated ? shorter(spectra) : needed(spectra, wanted ?? thresholds.snrMinimum.value)),
    })
    findings.push(finding(NIGHT_RULES, 'no-usable-spectrum', `${name}: ${text}`))
  } else if (wanted !== undefined && snrReached !== undefined && snrReached < thresholds.snrShortfall.value * wanted) {
    const text = `signal-to-noise ${figure(snrReached)} per Å reached, ${figure(wanted)} wanted`
    const lack = 1 - Math.min(1, (snrReached / wanted) ** 2)
    reasons.push({ text, gravity: GRAVITY.signal + LACK * lack, ...exposureOf(needed(usable, wanted)) })
    findings.push(
      finding(NIGHT_RULES, 'signal-below-wanted', `${name}: ${text}`, {
        value: snrReached,
        limit: thresholds.snrShortfall.value * wanted,
      }),
    )
  }
  const clipped = usable.filter(({ spectrum }) =>
    spectrum.findings.some(({ code, level }) => /saturated-spectrum|flat-topped/.test(code) && level !== 'note'),
  )
  if (usable.length && clipped.length === usable.length)
    reasons.push({ text: 'every exposure is saturated', gravity: GRAVITY.saturated, ...exposureOf(shorter(clipped)) })
  const astray = usable.filter(({ night }) =>
    night.findings.some(({ code }) => code === 'wrong-star' || code === 'position-off-target'),
  )
  if (usable.length && astray.length === usable.length)
    reasons.push({
      text: 'name and position do not agree, another star may have been observed',
      gravity: GRAVITY.otherStar,
      ...exposureOf(total(usable)),
    })
  if (expectedProbability !== undefined && expectedProbability < thresholds.typeProbability.value && usable.length)
    reasons.push({
      text: `the type found is not the one expected (probability ${chance(expectedProbability)}), look whether this is the star`,
      gravity: GRAVITY.type,
      ...exposureOf(total(usable)),
    })
  const base = { ...(snrReached === undefined ? {} : { snrReached }), findings }
  if (!reasons.length) return { ...base, observeAgain: false }
  const [gravest] = [...reasons].sort((a, b) => b.gravity - a.gravity)
  return {
    ...base,
    observeAgain: true,
    reason: reasons.map(({ text }) => text).join('; '),
    ...(gravest.exposure === undefined ? {} : { exposureNeeded: gravest.exposure }),
    urgency: urgencyOf(gravest.gravity, listed?.priority),
  }
}

/** The verdict on a listed target without a spectrum; the time by magnitude from what the night's stars gave. */
export function judgeMissing(target: Target, brightness: number | undefined, thresholds: Thresholds): Verdict {
  const wanted = target.wantedSnr ?? thresholds.snrMinimum.value
  const exposure =
    brightness === undefined || target.mag === undefined
      ? undefined
      : wanted ** 2 / (brightness * 10 ** (-0.4 * target.mag))
  return {
    observeAgain: true,
    reason: 'listed but not observed',
    ...(exposure === undefined ? {} : { exposureNeeded: roundUp(exposure) }),
    urgency: urgencyOf(GRAVITY.missing, target.priority),
    findings: [finding(NIGHT_RULES, 'never-observed', `${target.object} is on the target list and has no spectrum`)],
  }
}

/** S/N² per second of a star of magnitude 0, the median over spectra of listed stars; undefined without any. */
export function brightnessScale(
  spectra: readonly (TargetSpectrum & { readonly listed?: Target })[],
): number | undefined {
  const scales = spectra.flatMap(({ spectrum, night, listed }) => {
    const signal = mainSignal(spectrum.snr)
    const { exposure } = spectrum.facts
    if (night.quality === 'unusable' || signal === undefined || !exposure || listed?.mag === undefined) return []
    return [signal ** 2 / exposure / 10 ** (-0.4 * listed.mag)]
  })
  return scales.length ? median(scales) : undefined
}

function urgencyOf(gravity: number, priority: number | undefined): number {
  const weight = priority === undefined ? 0.7 : 1 / (1 + 0.3 * Math.max(0, priority - 1))
  return Math.min(1, gravity * weight)
}

function exposureOf(seconds: number | undefined): { readonly exposure?: number } {
  return seconds === undefined ? {} : { exposure: seconds }
}

function total(spectra: readonly TargetSpectrum[]): number | undefined {
  const times = spectra.flatMap(({ spectrum }) => spectrum.facts.exposure ?? [])
  return times.length ? roundUp(times.reduce((sum, time) => sum + time, 0)) : undefined
}

/** Seconds still to be exposed to reach a signal-to-noise, from what the exposures reached. */
function needed(spectra: readonly TargetSpectrum[], wanted: number): number | undefined {
  let squares = 0
  let time = 0
  for (const { spectrum } of spectra) {
    const signal = mainSignal(spectrum.snr)
    if (signal === undefined || !spectrum.facts.exposure) continue
    squares += signal ** 2
    time += spectrum.facts.exposure
  }
  if (!(squares > 0) || !(time > 0)) return undefined
  const all = (time * wanted ** 2) / squares
  // what is unusable must be taken anew; usable exposures count
  const isUsable = spectra.some(({ night }) => night.quality !== 'unusable')
  return roundUp(isUsable ? Math.max(0, all - time) : all)
}

function shorter(spectra: readonly TargetSpectrum[]): number | undefined {
  const times = spectra.flatMap(({ spectrum }) => spectrum.facts.exposure ?? [])
  return times.length ? roundUp(SHORTER * Math.min(...times)) : undefined
}

/** Seconds as an observer enters them: two significant digits, rounded up. */
function roundUp(seconds: number): number {
  if (!(seconds > 0)) return 0
  const step = 10 ** Math.max(0, Math.floor(Math.log10(seconds)) - 1)
  return Math.ceil(seconds / step - 1e-9) * step
}

function lower(text: string): string {
  return /^[A-Z][a-z]/.test(text) ? text.charAt(0).toLowerCase() + text.slice(1) : text
}
