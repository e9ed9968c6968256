import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { figure, percent } from './figures.ts'
import type { Limits, Samples } from './samples.ts'

/** Å: where types are defined (Morgan, Keenan & Kellman 1943 used 3920 to 4900 Å). */
const CLASSICAL = [3900, 4600] as const

/** Says how much of the spectrum is missing: range, samples without value, dead samples, flux below zero. */
export function checkCoverage(spectrum: Spectrum, samples: Samples, limit: Limits): readonly Finding[] {
  return [
    ...checkRange(spectrum, limit),
    ...checkMissing(spectrum, limit),
    ...checkDead(spectrum, limit),
    ...checkNegative(samples, limit),
  ]
}

function checkRange({ wavelength, flux, usable }: Spectrum, limit: Limits): Finding[] {
  let first = NaN
  let last = NaN
  for (let i = 0; i < flux.length; i++) {
    if (!usable[i]) continue
    if (!Number.isFinite(first)) first = wavelength[i]
    last = wavelength[i]
  }
  const range = last - first
  if (!(range >= limit('coverageMinimum'))) {
    const text = Number.isFinite(range)
      ? `Only ${figure(range)} Å are covered (${first.toFixed(0)} to ${last.toFixed(0)} Å), a type needs ${limit('coverageMinimum')} Å`
      : 'No sample of the spectrum can be used'
    return [
      finding(QUALITY_RULES, 'short-coverage', text, {
        value: Number.isFinite(range) ? range : 0,
        limit: limit('coverageMinimum'),
      }),
    ]
  }
  const covered =
    Math.max(0, Math.min(last, CLASSICAL[1]) - Math.max(first, CLASSICAL[0])) / (CLASSICAL[1] - CLASSICAL[0])
  if (covered >= 0.5) return []
  const classical = `${CLASSICAL[0]} to ${CLASSICAL[1]} Å, in which types are defined`
  const text =
    covered === 0
      ? `The spectrum does not cover ${classical}`
      : `The spectrum covers only ${percent(covered)} of ${classical}`
  return [finding(QUALITY_RULES, 'classical-region-missing', text, { value: covered, limit: 0.5 })]
}

function checkMissing({ flux, usable }: Spectrum, limit: Limits): Finding[] {
  let missing = 0
  for (let i = 0; i < flux.length; i++) if (!usable[i] || !Number.isFinite(flux[i])) missing++
  if (missing === 0) return []
  const share = missing / flux.length
  const level = share > limit('nonfiniteFault') ? 'fault' : share > limit('nonfiniteDoubt') ? 'doubt' : 'note'
  const text = `${missing} of ${flux.length} samples (${percent(share)}) have no value or are masked`
  return [finding(QUALITY_RULES, 'missing-samples', text, { value: share, limit: limit('nonfiniteDoubt'), level })]
}

/** Runs of equal samples away from the top; those at the top are clipped, not dead. */
function checkDead({ flux, usable, wavelength }: Spectrum, limit: Limits): Finding[] {
  let top = -Infinity
  for (let i = 0; i < flux.length; i++) if (usable[i] && flux[i] > top) top = flux[i]
  let dead = 0
  let where = NaN
  for (let i = 0; i < flux.length;) {
    let j = i + 1
    while (j < flux.length && flux[j] === flux[i]) j++
    if (j - i >= limit('deadRun') && usable[i] && flux[i] < 0.7 * top) {
      dead += j - i
      if (!Number.isFinite(where)) where = wavelength[i]
    }
    i = j
  }
  if (dead === 0) return []
  const share = dead / flux.length
  const level = share > limit('deadShare') ? 'doubt' : 'note'
  const text = `${dead} samples (${percent(share)}) lie in runs of equal values, the first at ${where.toFixed(1)} Å`
  return [finding(QUALITY_RULES, 'dead-samples', text, { value: share, limit: limit('deadShare'), level })]
}

function checkNegative({ n, flux, residual, noise }: Samples, limit: Limits): Finding[] {
  let below = 0
  for (let i = 0; i < n; i++) if (flux[i] < 0 && residual[i] + 1 < -3 * noise[i]) below++
  const share = n ? below / n : 0
  if (share < 0.005) return []
  const level = share > 0.5 ? 'fault' : share > limit('negativeShare') ? 'doubt' : 'note'
  const text = `${percent(share)} of the samples lie below zero by more than three times their noise`
  return [finding(QUALITY_RULES, 'negative-flux', text, { value: share, limit: limit('negativeShare'), level })]
}
