import { median, quantile, robustSigma } from '../numeric/median.ts'

/** A peak of a profile that stands on its own. */
export interface ProfilePeak {
  /** Pixels from 0, to a fraction. */
  readonly position: number
  /** Full width at half of the height above the background, pixels. */
  readonly fwhm: number
  /** Above the background. */
  readonly height: number
}

/** Widest arc line, as a share of the profile, and narrowest feature that is no single hot pixel [pixels]. */
const WIDEST_LINE = 0.06
const NARROWEST = 1.3
/** Height of a line above the noise of the profile, and as a share of the strongest. */
const LINE_SIGMA = 8
const LINE_SHARE = 0.002
const TRACE_SIGMA = 5
/** Widest trace as a share of the slit: anything wider is the lit part of the slit itself. */
const WIDEST_TRACE = 0.15
/** Smallest height of a line over the level under it: pixel structure of a flat stays below. */
const LINE_CONTRAST = 0.05
/** Width at four fifths over width at one fifth of the height: 0.37 for a Gaussian, near 1 for a lit slit. */
const FLATTEST_TRACE = 0.62
/** Ends left out, as a share of the profile: overscan and vignetting live there. */
const END_SHARE = 0.02

/**
 * Narrow peaks of a mean profile, strongest first: local maxima that stand `LINE_SIGMA` times the profile's noise and
 * `LINE_SHARE` of the strongest above the level of their surroundings, wider than one pixel and narrower than 6 % of
 * the profile.
 */
export function narrowPeaks(profile: Float64Array): readonly ProfilePeak[] {
  const n = profile.length
  if (n < 16) return []
  const background = lowLevel(profile, Math.max(8, Math.round(n * WIDEST_LINE)))
  const above = profile.map((value, i) => value - background[i])
  const noise = profileNoise(profile)
  const strongest = above.reduce((most, value) => (value > most ? value : most), 0)
  const floor = Math.max(LINE_SIGMA * noise, LINE_SHARE * strongest)
  const peaks: ProfilePeak[] = []
  for (let i = 1; i < n - 1; i++) {
    if (!(above[i] > floor && above[i] >= above[i - 1] && above[i] > above[i + 1])) continue
    if (above[i] < LINE_CONTRAST * Math.abs(background[i])) continue
    const peak = peakAt(above, i)
    if (peak && peak.fwhm >= NARROWEST && peak.fwhm <= n * WIDEST_LINE && isProminent(above, i, floor)) peaks.push(peak)
  }
  return peaks.sort((a, b) => b.height - a.height)
}

/** The brightest trace of a star along the slit, from the mean over the dispersion; undefined when none stands out. */
export function brightestTrace(profile: Float64Array): ProfilePeak | undefined {
  const n = profile.length
  const margin = Math.max(2, Math.round(n * END_SHARE))
  if (n < 16) return undefined
  const inner = profile.subarray(margin, n - margin)
  const level = median(inner)
  const noise = Math.max(profileNoise(inner), 1e-12 * Math.abs(level))
  const above = profile.map((value) => value - level)
  const order = Array.from({ length: n - 2 * margin }, (_, i) => i + margin)
    .filter((i) => above[i] >= above[i - 1] && above[i] >= above[i + 1] && above[i] > TRACE_SIGMA * noise)
    .sort((a, b) => above[b] - above[a])
  for (const i of order) {
    const peak = peakAt(above, i)
    if (peak && peak.fwhm >= NARROWEST && peak.fwhm <= WIDEST_TRACE * n && isRound(above, i)) return peak
  }
  return undefined
}

/** Noise of a profile from neighbouring differences; lines and slopes hardly touch a median. */
export function profileNoise(profile: Float64Array): number {
  const steps = new Float64Array(Math.max(0, profile.length - 1))
  for (let i = 0; i < steps.length; i++) steps[i] = profile[i + 1] - profile[i]
  return robustSigma(steps) / Math.SQRT2
}

/** True where the peak narrows towards its top as the image of a star does. */
function isRound(above: Float64Array, i: number): boolean {
  const width = (share: number): number => {
    let left = i
    while (left > 0 && above[left - 1] > share * above[i]) left--
    let right = i
    while (right < above.length - 1 && above[right + 1] > share * above[i]) right++
    return right - left + 1
  }
  const [wide, narrow] = [width(0.2), width(0.8)]
  return wide <= 4 || narrow / wide < FLATTEST_TRACE
}

function peakAt(above: Float64Array, i: number): ProfilePeak | undefined {
  const half = above[i] / 2
  let left = i
  while (left > 0 && above[left] > half) left--
  let right = i
  while (right < above.length - 1 && above[right] > half) right++
  if (!(above[left] <= half && above[right] <= half)) return undefined
  const from = left + (half - above[left]) / (above[left + 1] - above[left])
  const to = right - (half - above[right]) / (above[right - 1] - above[right])
  let sum = 0
  let moment = 0
  for (let x = left; x <= right; x++) {
    if (!(above[x] > 0)) continue
    sum += above[x]
    moment += above[x] * x
  }
  return { position: moment / sum, fwhm: to - from, height: above[i] }
}

/** True where the profile falls to three quarters on both sides before it rises higher: two humps of one are one. */
function isProminent(above: Float64Array, i: number, floor: number): boolean {
  const low = above[i] - Math.max(0.25 * above[i], 0.5 * floor)
  for (const step of [-1, 1]) {
    let x = i + step
    while (x >= 0 && x < above.length && above[x] <= above[i] && above[x] > low) x += step
    if (x < 0 || x >= above.length || above[x] > above[i]) return false
  }
  return true
}

/** Level under narrow features: a low quantile in a running window, thinned and joined by straight lines. */
function lowLevel(profile: Float64Array, half: number): Float64Array {
  const n = profile.length
  const step = Math.max(1, Math.floor(half / 2))
  const knots: number[] = []
  const levels: number[] = []
  for (let i = 0; i < n + step; i += step) {
    const at = Math.min(i, n - 1)
    knots.push(at)
    levels.push(quantile(profile.subarray(Math.max(0, at - half), Math.min(n, at + half + 1)), 0.3))
    if (at === n - 1) break
  }
  const out = new Float64Array(n)
  for (let i = 0, k = 0; i < n; i++) {
    while (k < knots.length - 2 && i > knots[k + 1]) k++
    const share = knots[k + 1] > knots[k] ? (i - knots[k]) / (knots[k + 1] - knots[k]) : 0
    out[i] = levels[k] + (levels[Math.min(k + 1, levels.length - 1)] - levels[k]) * share
  }
  return out
}
