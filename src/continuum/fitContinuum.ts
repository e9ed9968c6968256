import { SIGMA_PER_MAD, median, quantile, quantileSorted } from '../numeric/median.ts'
import { medianInPlace } from '../numeric/select.ts'
import { stiffnessOfPeriod, thirdDifferencePenalty, whittaker, whittakerVariance } from '../numeric/whittaker.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { type Bins, binSpectrum } from './bins.ts'
import { noiseOf } from './noise.ts'
import type { Continuum } from './types.ts'
import { weakLines } from './weakLines.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** How a continuum is fitted; what is left out has its default. */
export interface ContinuumOptions {
  /** Å at 5000 Å: the level is set by stretches of this width, whatever the resolution of the spectrum. */
  readonly binWidth: number
  /** Å at 5000 Å: waves of the response shorter than this are not followed. */
  readonly period: number
  /** What is known of the star, for a second pass: hot (O–A4), warm (A5–G4) or cool. */
  readonly kind?: 'hot' | 'warm' | 'cool'
  /** km/s, for the places of the broad hydrogen lines. */
  readonly velocity?: number
}

/** Chosen on made spectra of types A to M (see DEVELOPERS.md). */
export const CONTINUUM_DEFAULTS: ContinuumOptions = { binWidth: 12, period: 700 }

/** Rounds of fitting and clipping; the clipping tightens over the first half. */
const ROUNDS = 14
/** Bins below the curve by more than this many σ at the end do not carry it. */
const CLIP_BELOW = 1.2
const CLIP_ABOVE = 3.5

/**
 * The level the spectrum would have without lines, at every sample: a smooth curve in ln flux over ln λ through the
 * means of narrow bins, found by asymmetric clipping. Since the fit is linear in ln flux, a smooth response or reddening
 * multiplies the level by itself. No type or velocity is needed.
 */
export function fitContinuum(spectrum: Spectrum, options: Partial<ContinuumOptions> = {}): Continuum {
  const chosen = { ...CONTINUUM_DEFAULTS, ...options }
  const { sigma: noise, from: noiseFrom } = noiseOf(spectrum)
  const bins = usefulBins(spectrum, noise, chosen.binWidth / 5000)
  const fit = bins && fitBins(bins, chosen)
  if (!fit) {
    const level = new Float64Array(spectrum.flux.length).fill(NaN)
    return { level, error: level.slice(), isPseudo: true, supported: 0, noise, noiseFrom }
  }
  const first = spread(spectrum.wavelength, bins, fit.curve, fit.error)
  const { level, error, taken } = raise(spectrum, noise, first, chosen)
  return {
    level,
    error,
    isPseudo: fit.crowding > PSEUDO_CROWDING || taken > PSEUDO_TAKEN,
    supported: fit.supported,
    noise,
    noiseFrom,
  }
}

/** Bins wide enough for a positive mean with a useful error in most; undefined when there are too few. */
function usefulBins(spectrum: Spectrum, noise: Float64Array, step: number): Bins | undefined {
  if (spectrum.flux.length < 5) return undefined
  for (let width = step; width < 0.1; width *= 2) {
    const bins = binSpectrum(spectrum, noise, width)
    let filled = 0
    let good = 0
    for (let k = 0; k < bins.mean.length; k++)
      if (bins.count[k]) {
        filled++
        if (bins.mean[k] > 5 * bins.error[k]) good++
      }
    if (filled >= 8 && good > 0.8 * filled) return bins
    if (bins.mean.length < 8) return undefined
  }
  return undefined
}

/** Relative error below which no level is claimed to be known: wings of lines and ripples of the response. */
const LEAST_ERROR = 0.001
/** Share of light taken by weak lines, or by those in the bins used, from which the level is a pseudo-continuum. */
const PSEUDO_TAKEN = 0.04
const PSEUDO_CROWDING = 0.02

interface BinFit {
  /** ln level at the bins' middles. */
  readonly curve: Float64Array
  /** Relative error of the level. */
  readonly error: Float64Array
  readonly supported: number
  /** Typical share of light that the bins used lack. */
  readonly crowding: number
}

function fitBins(bins: Bins, options: ContinuumOptions): BinFit | undefined {
  const n = bins.mean.length
  const y = new Float64Array(n)
  const variance = new Float64Array(n)
  const prior = new Float64Array(n)
  let used = 0
  for (let k = 0; k < n; k++) {
    if (!(bins.mean[k] > 2 * bins.error[k])) continue
    const relative = bins.error[k] / bins.mean[k]
    y[k] = Math.log(bins.mean[k])
    variance[k] = relative * relative
    prior[k] = hydrogenWeight(Math.exp(bins.start + (k + 0.5) * bins.step), options)
    used++
  }
  if (used < 5) return undefined
  const stiffness = stiffnessOfPeriod(options.period / 5000 / bins.step)
  const penalty = thirdDifferencePenalty(n, stiffness)
  let curve = firstGuess(y, prior, penalty)
  const weight = new Float64Array(n)
  const residual = new Float64Array(n)
  let scatter = 0.1
  for (let round = 0; round < ROUNDS; round++) {
    const tight = Math.min(1, round / (ROUNDS / 2))
    scatter = scatterAbove(y, prior, curve)
    const below = CLIP_BELOW + 2 * (1 - tight)
    for (let k = 0; k < n; k++) {
      residual[k] = y[k] - curve[k]
      const s = Math.sqrt(variance[k] + scatter * scatter)
      const r = residual[k] / s
      const ratio = r > 0 ? r / CLIP_ABOVE : r / below
      const square = ratio * ratio
      const keep = 1 / (1 + square * square * (r > 0 ? square : 1))
      weight[k] = prior[k] * keep * (1e-4 / (1e-4 + variance[k] + scatter * scatter))
    }
    curve = whittaker(y, weight, penalty)
  }
  let supported = 0
  for (let k = 0; k < n; k++) {
    residual[k] = y[k] - curve[k]
    if (prior[k] && Math.abs(residual[k]) < 2 * Math.sqrt(variance[k] + scatter * scatter)) supported++
    const s2 = variance[k] + scatter * scatter
    weight[k] /= s2 * (1e-4 / (1e-4 + s2))
  }
  const bound = thirdDifferencePenalty(n, stiffness / (scatter * scatter + 1e-6))
  const spreadOf = whittakerVariance(weight, bound, 1)
  const crowding = Math.max(
    0,
    -quantile(
      residual.filter((_, k) => prior[k] > 0),
      0.5,
    ),
  )
  const error = new Float64Array(n)
  for (let k = 0; k < n; k++)
    error[k] = Math.min(0.5, Math.sqrt(spreadOf[k] + (0.3 * crowding) ** 2 + LEAST_ERROR ** 2))
  return { curve, error, supported: supported / used, crowding }
}

/** Balmer and Paschen lines with broad wings [Å, air], and half of the width left out at first. */
const HYDROGEN = [
  [6562.8, 45],
  [4861.3, 55],
  [4340.5, 45],
  [4101.7, 40],
  [3970.1, 30],
] as const
function hydrogenWeight(wavelength: number, { velocity = 0, kind }: ContinuumOptions): number {
  if (kind === 'cool') return 1
  const rest = wavelength / (1 + velocity / SPEED_OF_LIGHT)
  for (const [centre, half] of HYDROGEN) if (Math.abs(rest - centre) < half) return 0.05
  return 1
}

/** A curve through the upper part of wide blocks, so that neither deep bands nor emission lines set the start. */
function firstGuess(
  y: Float64Array,
  prior: Float64Array,
  penalty: ReturnType<typeof thirdDifferencePenalty>,
): Float64Array {
  const n = y.length
  const block = Math.max(4, Math.min(16, Math.floor(n / 4)))
  const guess = y.slice()
  const weight = new Float64Array(n)
  for (let start = 0; start < n; start += block) {
    const end = Math.min(n, start + block)
    const kept: number[] = []
    for (let k = start; k < end; k++) if (prior[k] > 0.5) kept.push(y[k])
    if (!kept.length) continue
    const high = quantileSorted(Float64Array.from(kept).sort(), 0.75)
    for (let k = start; k < end; k++)
      if (prior[k] > 0.5) {
        guess[k] = high
        weight[k] = 1e-3
      }
  }
  return whittaker(guess, weight, penalty)
}

/** Spread of the bins above the curve: what noise alone does, since lines only take away. */
function scatterAbove(y: Float64Array, prior: Float64Array, curve: Float64Array): number {
  const above = new Float64Array(y.length)
  let count = 0
  for (let k = 0; k < y.length; k++) if (prior[k] > 0.5 && y[k] > curve[k]) above[count++] = y[k] - curve[k]
  if (count < 4) return 0.005
  return Math.max(0.001, Math.min(0.1, SIGMA_PER_MAD * medianInPlace(above, count)))
}

/** The first curve raised by what weak lines take from its highest stretches too. */
function raise(
  { wavelength, flux, usable }: Spectrum,
  noise: Float64Array,
  first: { readonly level: Float64Array; readonly error: Float64Array },
  options: ContinuumOptions,
) {
  const n = flux.length
  const ratio = new Float64Array(n)
  const relative = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const counts = usable[i] && hydrogenWeight(wavelength[i], options) === 1
    ratio[i] = counts ? flux[i] / first.level[i] : NaN
    relative[i] = noise[i] / first.level[i]
  }
  const { place, rise, error, taken } = weakLines(wavelength, ratio, relative)
  const level = new Float64Array(n)
  const total = new Float64Array(n)
  const middle = place.map((value) => Math.exp(value))
  const last = place.length - 1
  let b = 0
  for (let i = 0; i < n; i++) {
    const at = wavelength[i]
    while (b + 1 < last && at > middle[b + 1]) b++
    const next = Math.min(last, b + 1)
    const t = next === b ? 0 : Math.min(1, Math.max(0, (at - middle[b]) / (middle[next] - middle[b])))
    level[i] = first.level[i] * (1 + rise[b] + t * (rise[next] - rise[b]))
    const placing = level[i] * (error[b] + t * (error[next] - error[b]))
    total[i] = Math.sqrt(first.error[i] * first.error[i] + placing * placing)
  }
  return { level, error: total, taken: median(taken) }
}

/** The curve and its error at every sample, by cubic interpolation (Catmull & Rom 1974) between the bins' middles. */
function spread(wavelength: Float64Array, bins: Bins, curve: Float64Array, error: Float64Array) {
  const n = wavelength.length
  const last = curve.length - 1
  const middle = curve.map((_, k) => Math.exp(bins.start + (k + 0.5) * bins.step))
  const height = curve.map((value) => Math.exp(value))
  const level = new Float64Array(n)
  const spreadError = new Float64Array(n)
  let k = 0
  for (let i = 0; i < n; i++) {
    while (k + 2 <= last && wavelength[i] >= middle[k + 1]) k++
    const next = Math.min(last, k + 1)
    const t = next === k ? 0 : Math.min(1, Math.max(0, (wavelength[i] - middle[k]) / (middle[next] - middle[k])))
    const p1 = height[k]
    const p2 = height[next]
    const p0 = k > 0 ? height[k - 1] : 2 * p1 - p2
    const p3 = k + 2 <= last ? height[k + 2] : 2 * p2 - p1
    level[i] = p1 + 0.5 * t * (p2 - p0 + t * (2 * p0 - 5 * p1 + 4 * p2 - p3 + t * (3 * (p1 - p2) + p3 - p0)))
    spreadError[i] = level[i] * (error[k] + t * (error[next] - error[k]))
  }
  return { level, error: spreadError }
}
