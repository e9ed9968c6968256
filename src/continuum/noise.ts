import { SIGMA_PER_MAD } from '../numeric/median.ts'
import { medianInPlace, selectInPlace } from '../numeric/select.ts'
import type { Spectrum } from '../spectrum/types.ts'

/** Samples a block; the scatter is taken as constant within one. */
const BLOCK = 50
/** √(1 + 9 + 9 + 1): a third difference of white noise has this many times its standard deviation. */
const THIRD_DIFFERENCE = Math.sqrt(20)
/**
 * Resampling mixes neighbours: the power of the noise becomes 1 − a(1 − cos ω), a ≤ 1/2. Averages of many samples see
 * all of it, a single sample 1 − a, third differences of neighbours 1 − 1.75 a, and those of every other sample 1 − a.
 */
const NEIGHBOUR_LOSS = 1.75
const LARGEST_SHARE = 0.5
/** Upper decile of the ratio of the two over three blocks of 50 white samples (by simulation, see the tests). */
const WHITE_DECILE = 1.3
/** Stated uncertainties below this share of the scatter are not believed: no detector and no structure explains them. */
const LEAST_STATED = 1e-3
/** Below this ratio it is the star's own structure that every other sample sees, not noise. */
const STRUCTURE = 0.18

/** Noise of every sample, 1 σ, and where it is from. */
export interface Noise {
  /** shape (n) [flux unit]: an average of N neighbours has noise/√N, correlation allowed for. Finite and positive. */
  readonly sigma: Float64Array
  readonly from: 'file' | 'measured'
  /** Factor by which correlation makes averages noisier than independent samples of the same scatter would be, ≥ 1. */
  readonly correlation: number
}

/**
 * Noise at every sample: the file's own uncertainty where it has one, otherwise measured from third differences of the
 * flux in blocks of 50 samples (robustly, so that lines do not count). Noise that a resampling has smoothed is
 * recognised by its scatter between neighbours, smaller than between every other sample, and scaled up.
 */
export function noiseOf(spectrum: Spectrum): Noise {
  const { flux, usable, sigma: stated } = spectrum
  const near = blockScatter(flux, usable, 1)
  const apart = blockScatter(flux, usable, 2)
  const measured = fillGaps(middleOfNeighbours(near.scatter), flux, usable)
  const n = flux.length
  if (stated && mostlyKnown(stated)) {
    const plain = interpolateBlocks(near.centre, measured, n)
    const correlation = correlationAgainst(stated, near.centre, near.scatter, apart.scatter)
    const sigma = new Float64Array(n)
    for (let i = 0; i < n; i++)
      sigma[i] = correlation * (stated[i] > plain[i] * LEAST_STATED && stated[i] < Infinity ? stated[i] : plain[i])
    return { sigma, from: 'file', correlation }
  }
  const correlation = correlationBetween(near.scatter, apart.scatter)
  for (let b = 0; b < measured.length; b++) measured[b] *= correlation
  return { sigma: interpolateBlocks(near.centre, measured, n), from: 'measured', correlation }
}

function mostlyKnown(stated: Float64Array): boolean {
  let known = 0
  for (let i = 0; i < stated.length; i++) if (stated[i] > 0 && stated[i] < Infinity) known++
  return 2 * known > stated.length
}

/** Robust standard deviation in each block from third differences of samples `lag` apart; NaN where too few. */
function blockScatter(flux: Float64Array, usable: Uint8Array, lag: number) {
  const n = flux.length
  const blocks = Math.max(1, Math.round(n / BLOCK))
  const centre = new Float64Array(blocks)
  const scatter = new Float64Array(blocks)
  const buffer = new Float64Array(Math.ceil(n / blocks) + 1)
  for (let b = 0; b < blocks; b++) {
    const start = Math.floor((b * n) / blocks)
    const end = Math.floor(((b + 1) * n) / blocks)
    let count = 0
    for (let i = Math.max(lag, start); i < Math.min(end, n - 2 * lag); i++)
      if (usable[i - lag] & usable[i] & usable[i + lag] & usable[i + 2 * lag])
        buffer[count++] = Math.abs(flux[i - lag] - 3 * flux[i] + 3 * flux[i + lag] - flux[i + 2 * lag])
    if (count < 5) count = acrossGaps(flux, usable, { start, end, buffer })
    centre[b] = (start + end - 1) / 2
    scatter[b] = count < 5 ? NaN : (medianInPlace(buffer, count) * SIGMA_PER_MAD) / THIRD_DIFFERENCE
  }
  return { centre, scatter }
}

/** Where masked samples leave no four in a row: third differences of the usable ones as if they were neighbours. */
function acrossGaps(
  flux: Float64Array,
  usable: Uint8Array,
  { start, end, buffer }: { readonly start: number; readonly end: number; readonly buffer: Float64Array },
): number {
  const kept: number[] = []
  for (let i = start; i < end; i++) if (usable[i]) kept.push(flux[i])
  for (let k = 3; k < kept.length; k++)
    buffer[k - 3] = Math.abs(kept[k - 3] - 3 * kept[k - 2] + 3 * kept[k - 1] - kept[k])
  return Math.max(0, kept.length - 3)
}

/** From the ratio of the two scatters where the star has the least structure. */
function correlationBetween(near: Float64Array, apart: Float64Array): number {
  const ratios = new Float64Array(near.length)
  let count = 0
  for (let b = 1; b + 1 < near.length; b++) {
    const close = near[b - 1] ** 2 + near[b] ** 2 + near[b + 1] ** 2
    const ratio = close / (apart[b - 1] ** 2 + apart[b] ** 2 + apart[b + 1] ** 2)
    if (ratio > 0) ratios[count++] = ratio
  }
  if (count < 8) return 1
  const ratio = selectInPlace(ratios, count, Math.floor(0.9 * (count - 1))) / WHITE_DECILE
  return ratio < STRUCTURE ? 1 : 1 / Math.sqrt(1 - NEIGHBOUR_LOSS * shareMixed(ratio))
}

/** a, from the ratio (1 − 1.75 a) / (1 − a). */
function shareMixed(ratio: number): number {
  return Math.min(LARGEST_SHARE, Math.max(0, (1 - ratio) / (NEIGHBOUR_LOSS - ratio)))
}

/** From the scatter between neighbours against the stated uncertainty, where every other sample confirms the latter. */
function correlationAgainst(
  stated: Float64Array,
  centre: Float64Array,
  near: Float64Array,
  apart: Float64Array,
): number {
  const ratios = new Float64Array(near.length)
  const others = new Float64Array(near.length)
  let count = 0
  for (let b = 0; b < near.length; b++) {
    const sigma = stated[Math.round(centre[b])]
    if (!(near[b] > 0 && apart[b] > 0 && sigma > 0 && sigma < Infinity)) continue
    ratios[count] = (near[b] / sigma) ** 2
    others[count++] = (apart[b] / sigma) ** 2
  }
  if (count < 8) return 1
  const ratio = medianInPlace(ratios, count)
  if (ratio > 0.8 || medianInPlace(others, count) < 0.6) return 1
  return 1 / Math.sqrt(1 - shareMixed(ratio))
}

/** Median of each block and its two neighbours to either side: one crowded block does not count as noisy. */
function middleOfNeighbours(scatter: Float64Array): Float64Array {
  const out = new Float64Array(scatter.length)
  const near = new Float64Array(5)
  for (let b = 0; b < scatter.length; b++) {
    let count = 0
    for (let k = Math.max(0, b - 2); k < Math.min(scatter.length, b + 3); k++)
      if (scatter[k] > 0) near[count++] = scatter[k]
    out[b] = medianInPlace(near, count)
  }
  return out
}

/** Blocks without a value take the nearest one; a spectrum without any takes a billionth of its largest sample. */
function fillGaps(scatter: Float64Array, flux: Float64Array, usable: Uint8Array): Float64Array {
  let largest = 0
  for (let i = 0; i < flux.length; i++) if (usable[i]) largest = Math.max(largest, Math.abs(flux[i]))
  const least = largest > 0 ? largest * 1e-9 : 1
  const out = scatter.slice()
  let last = scatter.find((value) => value > 0) ?? least
  for (let b = 0; b < out.length; b++) {
    if (out[b] > 0) last = out[b]
    out[b] = Math.max(last, least)
  }
  return out
}

function interpolateBlocks(centre: Float64Array, value: Float64Array, n: number): Float64Array {
  const out = new Float64Array(n)
  const last = centre.length - 1
  let b = 0
  for (let i = 0; i < n; i++) {
    while (b + 1 < last && i > centre[b + 1]) b++
    const t = last === 0 ? 0 : Math.min(1, Math.max(0, (i - centre[b]) / (centre[b + 1] - centre[b])))
    out[i] = last === 0 ? value[0] : value[b] + t * (value[b + 1] - value[b])
  }
  return out
}
