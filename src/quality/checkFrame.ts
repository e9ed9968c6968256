import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import type { HeaderFacts } from '../spectrum/types.ts'
import type { Thresholds } from '../tables/types.ts'
import { figure, percent } from './figures.ts'
import type { SortedFrame } from './sortFrame.ts'
import type { FrameKind, FrameStatistics } from './types.ts'

const LAMPS: readonly FrameKind[] = ['arc', 'flat', 'skyflat']
const STARS: readonly FrameKind[] = ['science', 'standard']

/**
 * What is wrong with a 2-D frame by its kind: a lamp that was off or too bright, an arc of few lines, a bias that holds
 * light or too much noise, a science frame without a star or out of focus, saturated pixels.
 */
export function checkFrame(
  sorted: SortedFrame,
  facts: HeaderFacts,
  statistics: FrameStatistics,
  thresholds: Thresholds,
): readonly Finding[] {
  const limit = (name: keyof Thresholds): number => thresholds[name].value
  return [
    ...checkKind(sorted),
    ...(LAMPS.includes(sorted.kind) ? checkLamp(sorted.kind, facts, statistics, limit) : []),
    ...(sorted.kind === 'bias' || sorted.kind === 'dark' ? checkDark(sorted.kind, facts, statistics, limit) : []),
    ...(STARS.includes(sorted.kind) ? checkStar(statistics, limit) : []),
    ...checkPixels(statistics),
  ]
}

type Limit = (name: keyof Thresholds) => number

function checkKind({ kind, kindHow, reason, looksLike }: SortedFrame): Finding[] {
  if (kind === 'unknown')
    return [finding(QUALITY_RULES, 'kind-unknown', `The kind of this frame is not known: ${reason}`)]
  const found: Finding[] = []
  if (kindHow === 'content')
    found.push(finding(QUALITY_RULES, 'kind-from-pixels', `Taken for a ${kind} frame by its pixels: ${reason}`))
  if (looksLike)
    found.push(
      finding(
        QUALITY_RULES,
        'kind-disagrees',
        `The header makes it a ${kind} frame (${reason}), the pixels look like ${looksLike}`,
      ),
    )
  return found
}

function checkLamp(
  kind: FrameKind,
  { gain }: HeaderFacts,
  { median, p99, max, noise, saturatedFraction, arcLines = 0, arcPeak }: FrameStatistics,
  limit: Limit,
): Finding[] {
  const found: Finding[] = []
  const brightest = kind === 'arc' ? Math.max(p99 - median, arcPeak ?? 0) : Math.max(p99 - median, 0)
  const light = noise > 0 ? brightest / noise : Infinity
  // an evenly lit flat has the noise of its photons, a dark one far less than its level
  const isQuiet = kind === 'arc' || noise ** 2 * (gain ?? 1) < 0.3 * Math.abs(median) || p99 < 20 * Math.max(noise, 1)
  const isOff = light < limit('lampOffLevel') && arcLines < limit('arcLinesMinimum') && isQuiet
  if (isOff) {
    const text = `The ${kind} frame holds no light of a lamp: its brightest hundredth lies ${figure(light)} times the noise above the median, at least ${limit('lampOffLevel')} expected`
    found.push(finding(QUALITY_RULES, 'lamp-off', text, { value: light, limit: limit('lampOffLevel') }))
  } else if (kind === 'arc' && arcLines < limit('arcLinesMinimum')) {
    const text = `The arc shows ${arcLines} lines, a wavelength scale needs ${limit('arcLinesMinimum')}`
    found.push(finding(QUALITY_RULES, 'few-arc-lines', text, { value: arcLines, limit: limit('arcLinesMinimum') }))
  }
  if (saturatedFraction > limit('lampSaturatedShare')) {
    const text = `${percent(saturatedFraction)} of the ${kind} frame is saturated (largest count ${figure(max)}), at most ${percent(limit('lampSaturatedShare'))} may be`
    found.push(
      finding(QUALITY_RULES, 'lamp-saturated', text, { value: saturatedFraction, limit: limit('lampSaturatedShare') }),
    )
  }
  return found
}

function checkDark(
  kind: FrameKind,
  { readNoise, gain }: HeaderFacts,
  { median, p99, noise, arcLines = 0 }: FrameStatistics,
  limit: Limit,
): Finding[] {
  const found: Finding[] = []
  const structure = noise > 0 ? (p99 - median) / noise : 0
  if (structure > limit('biasStructure') || (kind === 'bias' && arcLines >= limit('arcLinesMinimum'))) {
    const text = `The ${kind} frame holds light: its brightest hundredth lies ${figure(structure)} times the noise above the median, noise alone gives 2.3`
    found.push(finding(QUALITY_RULES, 'bias-holds-light', text, { value: structure, limit: limit('biasStructure') }))
  }
  if (kind === 'bias' && readNoise !== undefined && readNoise > 0 && gain !== undefined && gain > 0) {
    const stated = readNoise / gain
    if (noise > limit('biasNoiseRatio') * stated) {
      const text = `The bias has a noise of ${figure(noise)} counts, the header states ${figure(stated)} (read noise ${figure(readNoise)} e⁻, gain ${figure(gain)})`
      found.push(finding(QUALITY_RULES, 'bias-noise', text, { value: noise, limit: limit('biasNoiseRatio') * stated }))
    }
  }
  return found
}

function checkStar({ trace, saturatedFraction, max }: FrameStatistics, limit: Limit): Finding[] {
  const found: Finding[] = []
  if (!trace) found.push(finding(QUALITY_RULES, 'no-trace', 'No star stands out along the slit'))
  else if (trace.fwhm > limit('seeingMaximum')) {
    const text = `The star is ${figure(trace.fwhm)} pixels wide along the slit, at most ${limit('seeingMaximum')} expected`
    found.push(finding(QUALITY_RULES, 'wide-trace', text, { value: trace.fwhm, limit: limit('seeingMaximum') }))
  }
  if (saturatedFraction > limit('frameSaturatedShare')) {
    const text = `${percent(saturatedFraction)} of the frame is saturated (largest count ${figure(max)}), at most ${percent(limit('frameSaturatedShare'))} may be`
    found.push(
      finding(QUALITY_RULES, 'frame-saturated', text, {
        value: saturatedFraction,
        limit: limit('frameSaturatedShare'),
      }),
    )
  }
  return found
}

function checkPixels({ nonfinite, width, height }: FrameStatistics): Finding[] {
  if (nonfinite === 0) return []
  const share = nonfinite / (width * height)
  return [finding(QUALITY_RULES, 'frame-nonfinite', `${percent(share)} of the pixels have no value`, { value: share })]
}
