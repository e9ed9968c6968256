import type { Continuum } from '../continuum/types.ts'
import type { Spectrum } from '../spectrum/types.ts'

/** A spectrum's depth below its continuum in equal steps of ln wavelength, so that a velocity is a shift. */
export interface LogGrid {
  /** Natural logarithm of the wavelength [Å] at sample 0. */
  readonly start: number
  /** Step in ln wavelength; times c it is a velocity. */
  readonly step: number
  /** shape (n): depth as a fraction of the continuum, positive in absorption; 0 where the weight is 0. */
  readonly depth: Float64Array
  /** shape (n): weight of each sample, 0 where nothing is known. */
  readonly weight: Float64Array
}

/** Depth that no pattern reproduces better than, as a fraction of the continuum: it bounds the weight of one sample. */
const PATTERN_MISMATCH = 0.04

/** Emission is left out above this many times the noise, and above this fraction of the continuum. */
const EMISSION = { sigmas: 4, fraction: 0.08 } as const

/**
 * Depth and weight on a grid of equal steps in ln wavelength. Emission, cosmic rays and samples without a level get
 * no weight; the weight is 1 / (noise² + mismatch²), so that noisy ends count little.
 *
 * @param range  [Å] first and last wavelength of the grid
 * @param step   in ln wavelength
 */
export function toLogGrid(
  spectrum: Spectrum,
  continuum: Continuum,
  range: readonly [number, number],
  step: number,
): LogGrid {
  const { wavelength, flux, usable } = spectrum
  const { level, noise } = continuum
  const start = Math.log(range[0])
  const n = Math.max(0, Math.floor((Math.log(range[1]) - start) / step))
  const total = new Float64Array(n)
  const sum = new Float64Array(n)
  const variance = new Float64Array(n)
  const last = wavelength.length - 1
  for (let i = 0; i <= last; i++) {
    if (usable[i] === 0 || !(level[i] > 0)) continue
    const left = i > 0 ? (wavelength[i - 1] + wavelength[i]) / 2 : wavelength[i]
    const right = i < last ? (wavelength[i] + wavelength[i + 1]) / 2 : wavelength[i]
    if (right <= range[0] || left >= range[1]) continue
    const depth = 1 - flux[i] / level[i]
    const sigma = noise[i] / level[i]
    const isEmission = depth < -Math.max(EMISSION.fraction, EMISSION.sigmas * (sigma > 0 ? sigma : 0))
    if (!Number.isFinite(depth) || isEmission || depth > 1.2) continue
    const from = (Math.log(left) - start) / step
    const to = (Math.log(right) - start) / step
    const spread = Number.isFinite(sigma) ? sigma * sigma : 0
    // shares the sample out among the grid cells it covers
    for (let cell = Math.max(0, Math.floor(from)); cell < to && cell < n; cell++) {
      const share = Math.min(to, cell + 1) - Math.max(from, cell)
      if (share <= 0) continue
      total[cell] += share
      sum[cell] += share * depth
      variance[cell] += share * share * spread
    }
  }
  const depth = new Float64Array(n)
  const weight = new Float64Array(n)
  for (let cell = 0; cell < n; cell++) {
    if (total[cell] < 0.25) continue
    depth[cell] = sum[cell] / total[cell]
    weight[cell] = 1 / (variance[cell] / (total[cell] * total[cell]) + PATTERN_MISMATCH * PATTERN_MISMATCH)
  }
  return { start, step, depth, weight }
}
