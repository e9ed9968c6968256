import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { median, robustSigma } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { figure, percent } from './figures.ts'
import { isMolecular } from './samples.ts'
import type { Limits, Samples, SpectrumInput } from './samples.ts'

/** Samples on either side whose level is compared. */
const SIDE = 20
/** Share of a step that one sample takes; a profile of two pixels FWHM lets through 0.44 at most. */
const SHARP = 0.75
/** Ratio of neighbouring wavelength steps from which one sampling ends and another begins. */
const OTHER_SAMPLING = 1.2
/** Samples of a stretch tested for alternation, and share of the stretches that must show it. */
const STRETCH = 64
const RINGING_SHARE = 0.4

/** Says where the level jumps or the slope breaks at joins of orders or arms, and whether samples alternate. */
export function checkJoins({ spectrum, type }: SpectrumInput, samples: Samples, limit: Limits): readonly Finding[] {
  const steps = isMolecular(type) ? [] : checkSteps(samples, limit)
  return [...steps, ...checkSlopes(spectrum, samples, limit), ...checkRinging(samples, limit)]
}

function checkSteps(samples: Samples, limit: Limits): Finding[] {
  const { n, residual, noise, wavelength } = samples
  const steps: { readonly at: number; readonly height: number }[] = []
  const [lowest, sigmas] = [limit('stepHeight'), limit('stepSigma')]
  for (let i = SIDE - 1; i < n - SIDE; i++) {
    const jump = residual[i + 1] - residual[i]
    if (Math.abs(jump) < lowest * SHARP || !(Math.abs(jump) > sigmas * (noise[i] || 0) * SHARP)) continue
    const left = residual.subarray(i - SIDE + 1, i + 1)
    const right = residual.subarray(i + 1, i + SIDE + 1)
    const height = median(right) - median(left)
    const scatter = Math.max(robustSigma(left), robustSigma(right), noise[i] || 0)
    // both sides must be even, else it is a line or a band
    if (Math.abs(height) < lowest || Math.abs(height) < sigmas * scatter) continue
    if (jump / height < SHARP || jump / height > 2 - SHARP) continue
    steps.push({ at: (wavelength[i] + wavelength[i + 1]) / 2, height })
  }
  if (!steps.length) return []
  const highest = steps.reduce((most, step) => (Math.abs(step.height) > Math.abs(most.height) ? step : most))
  const text = `The level jumps by ${percent(Math.abs(highest.height))} within one sample at ${highest.at.toFixed(1)} Å${steps.length > 1 ? ` and at ${steps.length - 1} more places` : ''}`
  return [finding(QUALITY_RULES, 'order-step', text, { value: highest.height, limit: limit('stepHeight') })]
}

/** Places where the sampling changes, as at the join of two arms; empty for one smooth scale. */
function joinsOf({ wavelength, joinedFrom }: Spectrum): readonly number[] {
  const joins: number[] = []
  for (let i = 1; i < wavelength.length - 1; i++) {
    const ratio = (wavelength[i + 1] - wavelength[i]) / (wavelength[i] - wavelength[i - 1])
    if (ratio > OTHER_SAMPLING || ratio < 1 / OTHER_SAMPLING) joins.push((wavelength[i] + wavelength[i + 1]) / 2)
  }
  const most = joinedFrom ? 4 * joinedFrom.length : 4
  return joins.length <= most ? joins : []
}

function checkSlopes(spectrum: Spectrum, { n, residual, noise, wavelength }: Samples, limit: Limits): Finding[] {
  for (const join of joinsOf(spectrum)) {
    const i = wavelength.findIndex((x) => x >= join)
    const far = 3 * SIDE
    if (i < far || i > n - far) continue
    const left = slopeOf(wavelength.subarray(i - far, i), residual.subarray(i - far, i))
    const right = slopeOf(wavelength.subarray(i, i + far), residual.subarray(i, i + far))
    const change = 100 * (right - left)
    const span = wavelength[i + far - 1] - wavelength[i - far]
    const error = (100 * 10 * (noise[i] || 0)) / (span / 2) / Math.sqrt(far)
    if (Math.abs(change) < limit('slopeBreak') || Math.abs(change) < 5 * error) continue
    const text = `The slope of the spectrum changes at ${join.toFixed(0)} Å by ${percent(Math.abs(change))} of the level per 100 Å`
    return [finding(QUALITY_RULES, 'slope-break', text, { value: change, limit: limit('slopeBreak') })]
  }
  return []
}

function slopeOf(x: Float64Array, y: Float64Array): number {
  const middle = x.reduce((sum, value) => sum + value, 0) / x.length
  const level = median(y)
  let cross = 0
  let square = 0
  for (let i = 0; i < x.length; i++) {
    cross += (x[i] - middle) * (y[i] - level)
    square += (x[i] - middle) ** 2
  }
  return cross / square
}

/** Alternating samples: −Σ d(i) d(i+1) ÷ Σ d(i)² of the differences d is 1 for them, 1/2 for white noise. */
function checkRinging({ n, residual }: Samples, limit: Limits): Finding[] {
  let stretches = 0
  let ringing = 0
  let strongest = 0
  for (let from = 0; from + STRETCH < n; from += STRETCH) {
    let cross = 0
    let square = 0
    let before = residual[from + 1] - residual[from]
    for (let i = from + 1; i < from + STRETCH - 1; i++) {
      const after = residual[i + 1] - residual[i]
      cross -= before * after
      square += before * before
      before = after
    }
    stretches++
    const share = square > 0 ? cross / square : 0
    strongest = Math.max(strongest, share)
    if (share > limit('ringing')) ringing++
  }
  if (stretches < 3 || ringing < RINGING_SHARE * stretches) return []
  const text = `Neighbouring samples alternate in ${ringing} of ${stretches} stretches, with a strength of up to ${figure(strongest)} (noise gives 0.5)`
  return [finding(QUALITY_RULES, 'ringing', text, { value: strongest, limit: limit('ringing') })]
}
