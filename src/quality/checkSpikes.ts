import { featureName } from '../features/featureName.ts'
import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { median, robustSigma } from '../numeric/median.ts'
import { figure } from './figures.ts'
import type { Limits, Samples, SpectrumInput } from './samples.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** Height of a spike over the range of the six samples around. */
const CALM = 1.5

/** A feature too narrow for the instrument. */
export interface Spike {
  /** Å, as observed. */
  readonly wavelength: number
  /** Above (or below) the surroundings, as a share of the level. */
  readonly height: number
  /** In units of the noise. */
  readonly sigma: number
}

/** Narrowest profile assumed where the width is not known: sampled at two pixels (the sampling theorem). */
const NARROWEST_FWHM = 2

/**
 * Spikes of one sample, or two side by side, that stand out of the samples around them by `spikeSigma` and
 * `spikeDepth` and whose neighbours lack the light that a profile of `fwhm` samples would give them: less than half
 * of exp(−4 ln 2 / fwhm²).
 */
export function findSpikes(samples: Samples, fwhm: number, limit: Limits): readonly Spike[] {
  const { n, residual, noise, wavelength, index } = samples
  const width = Math.max(NARROWEST_FWHM, fwhm)
  const share = 0.5 * Math.exp((-4 * Math.LN2) / width ** 2)
  const rough = roughness(samples)
  const [sigmas, depth] = [limit('spikeSigma'), limit('spikeDepth')]
  const spikes: Spike[] = []
  const around = new Float64Array(6)
  for (let i = 4; i < n - 4; i++) {
    const scale = Math.max(noise[i] || 0, rough[i])
    const least = Math.max(sigmas * scale, depth)
    // a spike bends the spectrum by at least its height less the neighbours' share
    if (Math.abs(residual[i] - (residual[i - 1] + residual[i + 1]) / 2) < (1 - share) * least) continue
    if (index[i + 4] - index[i - 4] !== 8) continue
    for (let k = 0; k < 3; k++) {
      around[k] = residual[i - 4 + k]
      around[k + 3] = residual[i + 2 + k]
    }
    const base = median(around)
    const height = residual[i] - base
    const size = Math.abs(height)
    if (!(size > least)) continue
    // among crowded lines a high sample between two lines is none
    if (size < CALM * (Math.max(...around) - Math.min(...around))) continue
    const left = (residual[i - 1] - base) / height
    const right = (residual[i + 1] - base) / height
    if (left > 1 || right > 1 || (left + right) / 2 > share) continue
    spikes.push({ wavelength: wavelength[i], height, sigma: size / Math.max(scale, 1e-12) })
  }
  return spikes
}

/** Scatter of the samples about the mean of their neighbours, in blocks: what crowded lines do counts as noise. */
function roughness({ n, residual }: Samples): Float64Array {
  const block = 200
  const bends = new Float64Array(Math.max(0, n - 2))
  for (let i = 1; i < n - 1; i++) bends[i - 1] = residual[i] - (residual[i - 1] + residual[i + 1]) / 2
  const out = new Float64Array(n)
  for (let from = 0; from < n; from += block) {
    const part = bends.subarray(from, Math.min(bends.length, from + block))
    // variance of x0 − (x−1 + x+1)/2 is 1.5 times that of a sample
    out.fill(robustSigma(part) / Math.sqrt(1.5), from, Math.min(n, from + block))
  }
  return out
}

/** Says where cosmic rays hit, and which measured lines they fall on. */
export function checkSpikes(input: SpectrumInput, samples: Samples, limit: Limits): readonly Finding[] {
  const { resolution, restFrame } = input
  const isWidthKnown = resolution !== undefined && !resolution.isUpperLimit && !resolution.how.startsWith('sampling')
  const fwhm = isWidthKnown ? Math.min(resolution.fwhm / samples.step, 6) : NARROWEST_FWHM
  const spikes = findSpikes(samples, fwhm, limit)
  const up = spikes.filter(({ height }) => height > 0)
  const down = spikes.filter(({ height }) => height < 0)
  const found: Finding[] = []
  if (up.length > 0) {
    const strongest = up.reduce((most, spike) => (spike.sigma > most.sigma ? spike : most))
    const text = `${up.length} ${up.length === 1 ? 'sample stands' : 'samples stand'} out as cosmic-ray hits do, the strongest at ${strongest.wavelength.toFixed(1)} Å by ${figure(strongest.sigma)} times the noise`
    const level = up.length > limit('spikeCount') ? 'doubt' : 'note'
    found.push(finding(QUALITY_RULES, 'cosmic-ray-hits', text, { value: up.length, limit: limit('spikeCount'), level }))
    for (const spike of up) {
      const rest = spike.wavelength / (1 + (restFrame.trusted ? restFrame.velocity : 0) / SPEED_OF_LIGHT)
      const reach = Math.max(isWidthKnown ? resolution.fwhm : 0, 2 * samples.step)
      const hit = input.measurements.find(
        ({ status, wavelengthRest, ewErr, unit }) =>
          status === 'measured' &&
          unit === 'Å' &&
          Math.abs(wavelengthRest - rest) < reach &&
          spike.height * samples.step > 2 * (ewErr ?? 0),
      )
      if (!hit) continue
      const line = `${featureName(hit.feature)} (${hit.wavelengthRest.toFixed(0)} Å)`
      const words = `A cosmic-ray hit of ${figure(spike.sigma)} times the noise at ${spike.wavelength.toFixed(1)} Å falls on the line ${line}`
      found.push(
        finding(QUALITY_RULES, 'cosmic-ray-on-line', words, { value: spike.sigma, limit: limit('spikeSigma') }),
      )
    }
  }
  if (down.length > 0) {
    const text = `${down.length} ${down.length === 1 ? 'sample falls' : 'samples fall'} far below the samples beside, the first at ${down[0].wavelength.toFixed(1)} Å`
    const level = down.length > limit('spikeCount') ? 'doubt' : 'note'
    found.push(finding(QUALITY_RULES, 'dark-spikes', text, { value: down.length, limit: limit('spikeCount'), level }))
  }
  return found
}
