import type { Continuum } from '../continuum/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { starLight } from './starLight.ts'

/** A spectrum's depth below its continuum in equal steps of ln wavelength, so that a velocity is a shift. */
export interface LogGrid {
  /** Natural logarithm of the wavelength [Å] at the left edge of cell 0. */
  readonly start: number
  /** Step in ln wavelength; times c it is a velocity. */
  readonly step: number
  /** shape (n): depth as a fraction of the continuum, positive in absorption; 0 where the weight is 0. */
  readonly depth: Float64Array
  /** shape (n): weight of each cell, 0 where nothing is known. */
  readonly weight: Float64Array
}

/** Depth that no pattern reproduces better than, as a fraction of the continuum: it bounds the weight of one cell. */
const PATTERN_MISMATCH = 0.04

/** A cell counts when samples cover at least this part of it. */
const LEAST_COVER = 0.25

/**
 * Depth and weight on a grid of equal steps in ln wavelength, each sample shared out among the cells it covers. Emission, cosmic
 * rays and samples without a level get no weight; the weight is 1 / (noise² + mismatch²), so that noisy ends count
 * little.
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
  const { wavelength } = spectrum
  const start = Math.log(range[0])
  const n = Math.max(0, Math.floor((Math.log(range[1]) - start) / step))
  const total = new Float64Array(n)
  const depth = new Float64Array(n)
  const weight = new Float64Array(n)
  const last = wavelength.length - 1
  const { depth: sampleDepth, variance, used } = starLight(spectrum, continuum)
  let to = (Math.log(wavelength[0]) - start) / step
  for (let i = 0; i <= last; i++) {
    const from = to
    to = (Math.log(i < last ? (wavelength[i] + wavelength[i + 1]) / 2 : wavelength[last]) - start) / step
    if (used[i] === 0 || to <= 0 || from >= n) continue
    for (let cell = Math.max(0, Math.floor(from)); cell < to && cell < n; cell++) {
      const share = Math.min(to, cell + 1) - Math.max(from, cell)
      total[cell] += share
      depth[cell] += share * sampleDepth[i]
      // a sample wider than the cell gives all its noise to it; narrower ones average theirs
      weight[cell] += share * share * variance[i] * Math.max(1, to - from)
    }
  }
  for (let cell = 0; cell < n; cell++) {
    const cover = total[cell]
    depth[cell] = cover < LEAST_COVER ? 0 : depth[cell] / cover
    weight[cell] = cover < LEAST_COVER ? 0 : 1 / (weight[cell] / (cover * cover) + PATTERN_MISMATCH * PATTERN_MISMATCH)
  }
  return { start, step, depth, weight }
}

/** The grid with two neighbouring cells made into one; an odd last cell is left out. */
export function halved(grid: LogGrid): LogGrid {
  const n = grid.depth.length >> 1
  const depth = new Float64Array(n)
  const weight = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const left = grid.weight[2 * i]
    const right = grid.weight[2 * i + 1]
    weight[i] = (left + right) / 2
    if (left + right > 0) depth[i] = (left * grid.depth[2 * i] + right * grid.depth[2 * i + 1]) / (left + right)
  }
  return { start: grid.start, step: 2 * grid.step, depth, weight }
}
