import type { Continuum } from '../continuum/types.ts'
import { subtractRunningMean } from '../numeric/runningMean.ts'
import type { Spectrum } from '../spectrum/types.ts'

/** A spectrum's depth below its continuum, sample by sample, and what of it is the star's absorption. */
export interface StarLight {
  /** shape (n): 1 − flux / level; 0 where not used. */
  readonly depth: Float64Array
  /** shape (n): variance of the depth from noise; 0 where not known. */
  readonly variance: Float64Array
  /** shape (n): 1 where the sample is used. */
  readonly used: Uint8Array
}

/**
 * Emission stands above the mean of its neighbourhood (40 samples on either side) by this fraction of the continuum,
 * by this many times the scatter there, and by this many sigmas of the noise; beyond the last fraction always.
 */
const EMISSION = { fraction: 0.08, scatters: 2, sigmas: 5, always: 0.3, half: 40 } as const

/** A cosmic ray: above both neighbours two samples away by this much and by this many sigmas. */
const SPIKE = { fraction: 0.12, sigmas: 6 } as const

/** No star is darker than nothing: deeper than this is a dead sample or a bad sky subtraction. */
const DEEPEST = 1.1

/**
 * Depth of every sample with emission, cosmic rays, dead samples and samples without a level left out. Emission is
 * judged against the neighbourhood, not against the continuum, whose level may be wrong where lines crowd.
 */
export function starLight(spectrum: Spectrum, continuum: Continuum): StarLight {
  const { flux, usable } = spectrum
  const { level, noise } = continuum
  const n = flux.length
  const depth = new Float64Array(n)
  const variance = new Float64Array(n)
  const used = new Uint8Array(n)
  const clipped = new Float64Array(n)
  const weight = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const d = 1 - flux[i] / level[i]
    if (usable[i] === 0 || !(level[i] > 0) || !Number.isFinite(d)) continue
    const sigma = noise[i] / level[i]
    depth[i] = d
    variance[i] = sigma > 0 ? sigma * sigma : 0
    if (d > DEEPEST + 3 * Math.sqrt(variance[i])) continue
    used[i] = 1
    weight[i] = 1
    clipped[i] = Math.max(-EMISSION.always, Math.min(1, d))
  }
  const squares = clipped.map((d) => d * d)
  const above = subtractRunningMean(clipped, weight, EMISSION.half)
  const aboveSquares = subtractRunningMean(squares, weight, EMISSION.half)
  for (let i = 0; i < n; i++) {
    if (used[i] === 0) continue
    const noiseSigma = Math.sqrt(variance[i])
    const mean = clipped[i] - above[i]
    const scatter = Math.sqrt(Math.max(0, squares[i] - aboveSquares[i] - mean * mean))
    const limit = Math.min(EMISSION.always, Math.max(EMISSION.fraction, EMISSION.scatters * scatter))
    const isEmission = depth[i] < mean - Math.max(limit, EMISSION.sigmas * noiseSigma)
    if (isEmission || isSpike(depth, i, Math.max(SPIKE.fraction, SPIKE.sigmas * noiseSigma))) weight[i] = 0
  }
  for (let i = 0; i < n; i++) {
    if (weight[i] > 0) continue
    used[i] = 0
    depth[i] = 0
  }
  return { depth, variance, used }
}

function isSpike(depth: Float64Array, i: number, threshold: number): boolean {
  if (i < 2 || i >= depth.length - 2) return false
  return depth[i] < depth[i - 2] - threshold && depth[i] < depth[i + 2] - threshold
}
