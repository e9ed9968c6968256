import { median } from '../numeric/median.ts'
import { type Block, TREND, autocovariance, blockOf, coarser } from './fluctuation.ts'

/**
 * Unresolved weak lines lower every stretch of a spectrum, the highest ones too. How much is told by how much they make
 * the flux fluctuate: for lines placed at random the integral of the autocovariance of the depth is
 * Σ W² per Å = D·⟨W²⟩/⟨W⟩, D being the share of light taken (Campbell 1909, shot noise). It does not depend on the
 * resolution, and white noise has part in it at lag zero only.
 *
 * The typical strength ⟨W²⟩/⟨W⟩ [Å] grows with crowding: about 0.09 Å in the Sun at 5000 Å, where D = 0.08, and about
 * 0.03 Å among the faintest lines (rough values of the solar line list, from memory).
 */
const FAINTEST = 0.03
const GROWTH = 0.06 / Math.sqrt(0.08)

/** Width of a block [ln Å]: 300 Å at 5000 Å. */
const BLOCK = 0.06
/** Lags up to here [Å]: beyond, the profile of an instrument of 12 Å FWHM has no part left. */
const LONGEST = 20
/** Part of Σ W² that is left when strong lines are out, in fields of log-normal strengths (by simulation, see the tests). */
const KEPT = 0.55
/** The level is raised by no more than this; where it should be, it is a pseudo-continuum. */
export const GREATEST_RISE = 0.04

/** Beyond this share it is no longer weak lines that crowd. */
const MOST_TAKEN = 0.15

/** What weak lines take from the level, block by block; arrays of one shape (m). */
export interface WeakLines {
  /** ln λ of the middles of the blocks. */
  readonly place: Float64Array
  /** What the level is to be multiplied by, less one. */
  readonly rise: Float64Array
  /** Error of the rise, 1 σ. */
  readonly error: Float64Array
  /** Share of light that weak lines take. */
  readonly taken: Float64Array
}

/**
 * How far the level lies above a first curve, block by block.
 *
 * @param ratio  shape (n): flux ÷ first curve; NaN where a sample has no part (masked, hydrogen, spikes)
 * @param noise  shape (n): noise ÷ first curve
 */
export function weakLines(wavelength: Float64Array, ratio: Float64Array, noise: Float64Array): WeakLines {
  const data = coarser(wavelength, ratio, noise)
  const n = data.ratio.length
  const first = Math.log(wavelength[0])
  const span = Math.log(wavelength[wavelength.length - 1]) - first
  const blocks = Math.max(1, Math.round(span / BLOCK))
  const edges = [0]
  for (let b = 1; b <= blocks; b++) {
    const limit = Math.exp(first + (span * b) / blocks)
    let at = edges[b - 1]
    while (at < n && (data.wavelength[at] < limit || b === blocks)) at++
    edges.push(at)
  }
  const step = (data.wavelength[n - 1] - data.wavelength[0]) / Math.max(1, n - 1)
  const lags = Math.max(2, Math.min(40, Math.ceil(LONGEST / step)))
  const half = Math.max(3, Math.round(TREND / 2 / step))
  const mean = new Float64Array(blocks)
  const place = new Float64Array(blocks)
  const parts: Block[] = []
  const sums = new Float64Array(blocks)
  for (let b = 0; b < blocks; b++) {
    place[b] = first + (span * (b + 0.5)) / blocks
    parts.push(blockOf(data, [edges[b], edges[b + 1]], half))
    mean[b] = parts[b].mean
    sums[b] = autocovariance(parts[b], 0) - parts[b].noiseVariance
  }
  let reach = 0
  for (let strongest = 0; reach < lags; reach++) {
    const next = parts.map((part) => autocovariance(part, reach + 1))
    const total = next.reduce((sum, value) => sum + (value === value ? value : 0), 0)
    if (reach === 0) strongest = total
    else if (!(total > 0.05 * strongest)) break
    for (let b = 0; b < blocks; b++) sums[b] += 2 * next[b]
  }
  const integral = new Float64Array(blocks)
  const variance = new Float64Array(blocks)
  for (let b = 0; b < blocks; b++) {
    const steep = Math.exp(STEEPNESS * (place[b] - STEEPNESS_AT))
    const size = Math.max(1, edges[b + 1] - edges[b])
    const noisy = parts[b].noiseVariance * step * steep
    integral[b] = (sums[b] * step * steep) / KEPT
    variance[b] = noisy * noisy * ((2 + 4 * reach) / size)
  }
  const floor = subtractFloor(integral, place)
  const smooth = smoothIntegrals(integral, variance)
  const rise = new Float64Array(blocks)
  const error = new Float64Array(blocks)
  const taken = new Float64Array(blocks)
  for (let b = 0; b < blocks; b++) {
    const steep = Math.exp(STEEPNESS * (place[b] - STEEPNESS_AT))
    taken[b] = shareTaken(Math.max(0, smooth.value[b] / steep))
    const high = shareTaken(Math.max(0, smooth.value[b] + smooth.error[b]) / steep + FLOOR_DOUBT * floor)
    const wanted = (1 + mean[b]) / (1 - taken[b]) - 1
    rise[b] = Math.min(GREATEST_RISE, Math.max(-GREATEST_RISE / 4, wanted))
    error[b] = Math.hypot(high - taken[b], UNCERTAIN * taken[b])
  }
  fillFromNeighbours(rise)
  return { place, rise, error, taken }
}

/** Blocks without samples (gaps, hydrogen alone) take what the nearest block has; zero where there is none. */
function fillFromNeighbours(values: Float64Array): void {
  const known = [...values.keys()].filter((k) => values[k] === values[k])
  for (let b = 0; b < values.length; b++) {
    if (values[b] === values[b]) continue
    let nearest = -1
    for (const k of known) if (nearest < 0 || Math.abs(k - b) < Math.abs(nearest - b)) nearest = k
    values[b] = nearest < 0 ? 0 : values[nearest]
  }
}

/** Crowding falls about as λ⁻⁶ in the visual; taken out before neighbouring blocks are averaged. */
const STEEPNESS = 6
const STEEPNESS_AT = Math.log(5000)
/** Share of D by which the typical strength of lines may differ from star to star. */
const UNCERTAIN = 0.3

/** Where weak lines are few, and where they crowd, in stars without bands [ln Å]. */
const RED = [Math.log(5900), Math.log(9000)] as const
const BLUE = [Math.log(4500), Math.log(5700)] as const

/** Part of what is taken off that may have been lines after all. */
const FLOOR_DOUBT = 0.1
/** Redward the fall may be slower than λ⁻⁶ by this factor; what exceeds it is Paschen lines, bands or the air. */
const RED_EXCESS = 3

/**
 * Takes off what does not fall as λ⁻⁶ from the blue to the red: smooth noise, ripples of a flux calibration and the like
 * fluctuate at every wavelength. (Integrals carry the factor (λ/5000)⁶ here, which is divided out for the comparison.)
 * Where one of the two ends is missing nothing can be told, and all is taken off.
 */
function subtractFloor(integral: Float64Array, place: Float64Array): number {
  const steep = (b: number) => Math.exp(STEEPNESS * (place[b] - STEEPNESS_AT))
  const within = ([from, to]: readonly [number, number]) =>
    [...place.keys()].filter((b) => place[b] > from && place[b] < to && integral[b] === integral[b])
  const red = within(RED)
  const blue = within(BLUE)
  const known = red.length >= 2 && blue.length >= 2
  const ofRed = median(red.map((b) => integral[b] / steep(b)))
  const ofBlue = median(blue.map((b) => integral[b] / steep(b)))
  const fall = median(blue.map(steep)) / median(red.map(steep))
  const floor = Math.max(0, (ofRed - fall * ofBlue) / (1 - fall))
  for (let b = 0; b < place.length; b++) integral[b] = known ? integral[b] - floor * steep(b) : integral[b] * 0
  const most = RED_EXCESS * Math.max(0, median(blue.map((b) => integral[b])))
  if (known) for (let b = 0; b < place.length; b++) if (place[b] > BLUE[1] && integral[b] > most) integral[b] = most
  return known ? floor : 0
}

/** Relative variance of a block's integral: some 40 independent stretches of a skewed field. */
const SAMPLING = 0.1

/** Medians of three blocks (one strong line does not count), then weighted means over five. */
function smoothIntegrals(integral: Float64Array, variance: Float64Array) {
  const n = integral.length
  const middle = new Float64Array(n)
  for (let b = 0; b < n; b++) {
    const near = [integral[b - 1], integral[b], integral[b + 1]]
      .filter((value) => Number.isFinite(value))
      .sort((x, y) => x - y)
    middle[b] = near.length === 0 ? NaN : near.length === 2 ? Math.min(near[0], near[1]) : near[near.length >> 1]
  }
  const value = new Float64Array(n)
  const error = new Float64Array(n)
  for (let b = 0; b < n; b++) {
    let typical = 0
    let near = 0
    for (let k = Math.max(0, b - 2); k <= Math.min(n - 1, b + 2); k++)
      if (Number.isFinite(middle[k])) {
        typical += middle[k]
        near++
      }
    typical /= Math.max(1, near)
    let sum = 0
    let weight = 0
    let noise = 0
    for (let k = Math.max(0, b - 2); k <= Math.min(n - 1, b + 2); k++) {
      if (!Number.isFinite(middle[k])) continue
      const w = (3 - Math.abs(k - b)) / (variance[k] + SAMPLING * typical * typical + 1e-12)
      sum += w * middle[k]
      weight += w
      noise += w * w * variance[k]
    }
    if (weight === 0) continue
    const mean = Math.max(0, sum / weight)
    // What noise alone could do is shrunk away: the result is biased low rather than raised by noise.
    value[b] = mean ? mean ** 3 / (mean * mean + (4 * noise) / (weight * weight)) : 0
    error[b] = Math.hypot(Math.sqrt(3 / weight), mean - value[b])
  }
  return { value, error }
}

/** D from D·(FAINTEST + GROWTH·√D) = `integral`, by Newton's method in √D. */
function shareTaken(integral: number): number {
  let root = Math.cbrt(integral / GROWTH)
  for (let k = 0; k < 6; k++)
    root -=
      (root * root * (FAINTEST + GROWTH * root) - integral) / (2 * FAINTEST * root + 3 * GROWTH * root * root + 1e-12)
  return Math.min(MOST_TAKEN, root * root)
}
