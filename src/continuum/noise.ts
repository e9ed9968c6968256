import { quantileSorted } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'

/** Samples a block; the scatter is taken as constant within one. */
const BLOCK = 50
/** Standard deviation of a standard normal sample ÷ its median absolute value: 1 / Φ⁻¹(3/4). */
const SIGMA_PER_MEDIAN = 1.482602218505602
/** √(1 + 9 + 9 + 1): a third difference of white noise has this many times its standard deviation. */
const THIRD_DIFFERENCE = Math.sqrt(20)

/** Noise of every sample, 1 σ, and where it is from. */
export interface Noise {
  /** shape (n) [flux unit]; what an average of N neighbours must be given as noise/√N. Finite and positive. */
  readonly sigma: Float64Array
  readonly from: 'file' | 'measured'
}

/**
 * Noise at every sample: the file's own uncertainty where it has one, otherwise measured from third differences of the
 * flux in blocks of 50 samples (robustly, so that lines do not count).
 */
export function noiseOf(spectrum: Spectrum): Noise {
  const measured = measuredNoise(spectrum.flux, spectrum.usable)
  const { sigma: stated } = spectrum
  if (!stated) return { sigma: measured, from: 'measured' }
  const sigma = measured.slice()
  let known = 0
  for (let i = 0; i < sigma.length; i++)
    if (stated[i] > 0 && stated[i] < Infinity) {
      sigma[i] = stated[i]
      known++
    }
  return known * 2 > sigma.length ? { sigma, from: 'file' } : { sigma: measured, from: 'measured' }
}

function measuredNoise(flux: Float64Array, usable: Uint8Array): Float64Array {
  const n = flux.length
  const blocks = Math.max(1, Math.round(n / BLOCK))
  const centre = new Float64Array(blocks)
  const scatter = new Float64Array(blocks)
  const buffer = new Float64Array(Math.ceil(n / blocks) + 1)
  for (let b = 0; b < blocks; b++) {
    const start = Math.floor((b * n) / blocks)
    const end = Math.floor(((b + 1) * n) / blocks)
    let count = 0
    for (let i = Math.max(1, start); i < Math.min(end, n - 2); i++)
      if (usable[i - 1] & usable[i] & usable[i + 1] & usable[i + 2])
        buffer[count++] = Math.abs(flux[i - 1] - 3 * flux[i] + 3 * flux[i + 1] - flux[i + 2])
    centre[b] = (start + end - 1) / 2
    scatter[b] =
      count < 5 ? NaN : (quantileSorted(buffer.subarray(0, count).sort(), 0.5) * SIGMA_PER_MEDIAN) / THIRD_DIFFERENCE
  }
  return interpolateBlocks(centre, fillGaps(lowerNeighbour(scatter), flux, usable), n)
}

/** The middle of each block and its two neighbours: one crowded block does not count as noisy. */
function lowerNeighbour(scatter: Float64Array): Float64Array {
  const out = new Float64Array(scatter.length)
  for (let b = 0; b < scatter.length; b++) {
    const near = scatter.subarray(Math.max(0, b - 2), b + 3).filter((value) => value > 0)
    out[b] = near.length ? quantileSorted(near.sort(), 0.5) : NaN
  }
  return out
}

/** Blocks without a value take the nearest one; a spectrum without any takes a billionth of its largest sample. */
function fillGaps(scatter: Float64Array, flux: Float64Array, usable: Uint8Array): Float64Array {
  const known = scatter.filter((value) => value > 0)
  let largest = 0
  for (let i = 0; i < flux.length; i++) if (usable[i]) largest = Math.max(largest, Math.abs(flux[i]))
  const least = largest > 0 ? largest * 1e-9 : 1
  if (!known.length) return scatter.fill(least)
  let last = known[0]
  for (let b = 0; b < scatter.length; b++) {
    if (scatter[b] > 0) last = scatter[b]
    scatter[b] = Math.max(last, least)
  }
  return scatter
}

function interpolateBlocks(centre: Float64Array, value: Float64Array, n: number): Float64Array {
  const out = new Float64Array(n)
  let b = 0
  for (let i = 0; i < n; i++) {
    while (b + 2 < centre.length && i > centre[b + 1]) b++
    if (centre.length === 1 || i <= centre[0]) out[i] = value[0]
    else if (i >= centre[centre.length - 1]) out[i] = value[value.length - 1]
    else out[i] = value[b] + ((value[b + 1] - value[b]) * (i - centre[b])) / (centre[b + 1] - centre[b])
  }
  return out
}
