import { type Model, levenbergMarquardt } from '../numeric/levenbergMarquardt.ts'
import { PARAMETERS, type ProfileShape, profile, profileArea, profileFwhm } from '../numeric/profiles.ts'
import { FWHM_PER_SIGMA } from '../numeric/smoothToFwhm.ts'
import { type Pixels, firstPixelAbove } from './pixels.ts'

/** A line to be fitted: where it should be [Å, observed frame], its shape and a first width. */
export interface ProfileStart {
  readonly centre: number
  readonly shape: ProfileShape
  /** Å, FWHM. */
  readonly fwhm: number
  /** Å: the fitted centre may lie this far from the first one. */
  readonly reach: number
  /** Å: no line is taken to be wider, FWHM. */
  readonly widest: number
  /** What is fitted: all, all but the widths, or the depth alone; the rest stays at its first value. */
  readonly free: 'all' | 'centre' | 'depth'
}

/** A fitted line [Å, observed frame]. */
export interface FittedProfile {
  readonly shape: ProfileShape
  readonly area: number
  readonly errNoise: number
  readonly errContinuum: number
  readonly centre: number
  readonly centreErr: number
  readonly fwhm: number
  readonly fwhmErr: number
  readonly depth: number
  readonly depthErr: number
  readonly free: ProfileStart['free']
}

/** Profiles fitted together, and how well they fit. */
export interface ProfileFit {
  readonly lines: readonly FittedProfile[]
  readonly chiSquare: number
  readonly degreesOfFreedom: number
}

/** A fit that is worse than noise allows by this many standard deviations of χ² has its errors scaled up. */
const BAD_FIT = 3

/**
 * Profiles fitted together to 1 − F/Fc over [lo, hi] of the observed frame; undefined where the fit fails (too few
 * samples, or no minimum within bounds).
 */
export function fitProfiles(
  pixels: Pixels,
  [lo, hi]: readonly [number, number],
  starts: readonly ProfileStart[],
): ProfileFit | undefined {
  const first = firstPixelAbove(pixels, lo)
  let end = first
  while (end < pixels.lower.length && pixels.upper[end] <= hi) end++
  const n = end - first
  const offsets: number[] = []
  const free: number[] = []
  let p = 0
  for (const one of starts) {
    offsets.push(p)
    for (let j = 0; j < PARAMETERS[one.shape]; j++) if (j <= LAST_FREE[one.free]) free.push(p + j)
    p += PARAMETERS[one.shape]
  }
  const y = new Float64Array(n)
  const weight = new Float64Array(n)
  const step = n ? (pixels.upper[end - 1] - pixels.lower[first]) / n : 0
  let used = 0
  for (let i = 0; i < n; i++) {
    const value = pixels.flux[first + i]
    if (!(value === value)) continue
    y[i] = 1 - value
    weight[i] = 1 / pixels.noise[first + i] ** 2
    used++
  }
  if (used < free.length + 1) return undefined
  const start = firstParameters(pixels, starts, offsets, p)
  const whole = start.slice()
  const scratch = new Float64Array(5)
  const derivatives = new Float64Array(p)
  const model = (parameters: Float64Array, values: Float64Array, jacobian: Float64Array): void => {
    for (let j = 0; j < free.length; j++) whole[free[j]] = parameters[j]
    for (let i = 0; i < n; i++) {
      values[i] = 0
      if (weight[i] === 0) continue
      const x = pixels.wavelength[first + i]
      for (let k = 0; k < starts.length; k++) {
        profile(starts[k].shape, x, whole, offsets[k], scratch)
        values[i] += scratch[0]
        for (let j = 0; j < PARAMETERS[starts[k].shape]; j++) derivatives[offsets[k] + j] = scratch[j + 1]
      }
      for (let j = 0; j < free.length; j++) jacobian[i * free.length + j] = derivatives[free[j]]
    }
  }
  const bounds = parameterBounds(starts, offsets, p, step)
  const lower = Float64Array.from(free, (j) => bounds[j][0])
  const upper = Float64Array.from(free, (j) => bounds[j][1])
  const fit = levenbergMarquardt(model, y, weight, { start: Float64Array.from(free, (j) => start[j]), lower, upper })
  if (!fit.converged || !Number.isFinite(fit.covariance[0])) return undefined
  for (let j = 0; j < free.length; j++) {
    const [least, most, mayRest] = bounds[free[j]]
    const value = fit.parameters[j]
    if (!mayRest && (value <= least || value >= most)) return undefined
    whole[free[j]] = value
  }
  const covariance = new Float64Array(p * p)
  for (let a = 0; a < free.length; a++)
    for (let b = 0; b < free.length; b++) covariance[free[a] * p + free[b]] = fit.covariance[a * free.length + b]
  const pull = continuumPull(fit.parameters, { weight, pixels, first, model })
  const wholePull = new Float64Array(p)
  for (let j = 0; j < free.length; j++) wholePull[free[j]] = pull[j]
  const degreesOfFreedom = used - free.length
  return describe({
    starts,
    offsets,
    parameters: whole,
    covariance,
    pull: wholePull,
    chiSquare: fit.chiSquare,
    degreesOfFreedom,
  })
}

/** Least and greatest value of every parameter, and whether a fit may come to rest there. */
function parameterBounds(starts: readonly ProfileStart[], offsets: readonly number[], size: number, step: number) {
  const bounds = new Array<readonly [number, number, boolean]>(size).fill([-Infinity, 2, false])
  starts.forEach(({ centre, shape, reach, widest }, k) => {
    const at = offsets[k]
    bounds[at + 1] = [centre - reach, centre + reach, false]
    bounds[at + 2] = [0.2 * step, shape === 'lorentzian' ? widest / 2 : widest / FWHM_PER_SIGMA, false]
    if (shape === 'voigt') {
      bounds[at + 2] = [0.2 * step, widest / FWHM_PER_SIGMA, true]
      bounds[at + 3] = [0, widest, true]
    }
  })
  return bounds
}

/** Last parameter of a line (depth, centre, widths) that is fitted. */
const LAST_FREE = { all: 3, centre: 1, depth: 0 } as const

function firstParameters(
  pixels: Pixels,
  starts: readonly ProfileStart[],
  offsets: readonly number[],
  size: number,
): Float64Array {
  const parameters = new Float64Array(size)
  for (let k = 0; k < starts.length; k++) {
    const { centre, shape, fwhm } = starts[k]
    const at = firstPixelAbove(pixels, centre)
    let sum = 0
    let count = 0
    for (let i = Math.max(0, at - 1); i <= Math.min(pixels.flux.length - 1, at + 1); i++)
      if (pixels.flux[i] === pixels.flux[i]) {
        sum += 1 - pixels.flux[i]
        count++
      }
    const depth = count ? sum / count : 0
    const o = offsets[k]
    parameters[o] = Math.abs(depth) < 1e-3 ? 1e-3 : Math.min(depth, 2)
    parameters[o + 1] = centre
    parameters[o + 2] = shape === 'lorentzian' ? fwhm / 2 : fwhm / FWHM_PER_SIGMA / (shape === 'voigt' ? 1.6 : 1)
    if (shape === 'voigt') parameters[o + 3] = fwhm / 4
  }
  return parameters
}

interface Fitted {
  readonly starts: readonly ProfileStart[]
  readonly offsets: readonly number[]
  readonly parameters: Float64Array
  /** 0 where a parameter was not fitted. */
  readonly covariance: Float64Array
  readonly pull: Float64Array
  readonly chiSquare: number
  readonly degreesOfFreedom: number
}

function describe({ starts, offsets, parameters, covariance, pull, chiSquare, degreesOfFreedom }: Fitted): ProfileFit {
  const p = parameters.length
  const excess = chiSquare / degreesOfFreedom
  const scale = excess > 1 + BAD_FIT * Math.sqrt(2 / degreesOfFreedom) ? Math.sqrt(excess) : 1
  const lines = starts.map(({ shape, free }, k) => {
    const at = offsets[k]
    const gradient = areaGradient(shape, parameters, at)
    let variance = 0
    let shift = 0
    for (let a = 0; a < gradient.length; a++) {
      for (let b = 0; b < gradient.length; b++)
        variance += gradient[a] * gradient[b] * covariance[(at + a) * p + at + b]
      for (let b = 0; b < p; b++) shift += gradient[a] * covariance[(at + a) * p + b] * pull[b]
    }
    const fwhm = profileFwhm(shape, parameters, at)
    const sd = (j: number) => scale * Math.sqrt(covariance[(at + j) * p + at + j])
    return {
      shape,
      area: profileArea(shape, parameters, at),
      errNoise: scale * Math.sqrt(Math.max(0, variance)),
      errContinuum: Math.abs(shift),
      centre: parameters[at + 1],
      centreErr: sd(1),
      fwhm,
      fwhmErr: (sd(2) * fwhm) / parameters[at + 2],
      depth: parameters[at],
      depthErr: sd(0),
      free,
    }
  })
  return { lines, chiSquare, degreesOfFreedom }
}

interface Fitting {
  readonly weight: Float64Array
  readonly pixels: Pixels
  readonly first: number
  readonly model: Model
}

/** Jᵀ W δ, where δ is what a level too high by its 1 σ adds to 1 − F/Fc. */
function continuumPull(parameters: Float64Array, { weight, pixels, first, model }: Fitting): Float64Array {
  const n = weight.length
  const p = parameters.length
  const jacobian = new Float64Array(n * p)
  model(parameters, new Float64Array(n), jacobian)
  const pull = new Float64Array(p)
  for (let i = 0; i < n; i++) {
    if (weight[i] === 0) continue
    const shift = weight[i] * pixels.flux[first + i] * pixels.levelError[first + i]
    for (let a = 0; a < p; a++) pull[a] += jacobian[i * p + a] * shift
  }
  return pull
}

/** ∂area/∂parameters of one line, by central differences (the area is smooth and cheap). */
function areaGradient(shape: ProfileShape, parameters: Float64Array, at: number): Float64Array {
  const count = PARAMETERS[shape]
  const own = parameters.slice(at, at + count)
  const gradient = new Float64Array(count)
  for (let j = 0; j < count; j++) {
    if (j === 1) continue
    const h = 1e-4 * (Math.abs(own[j]) || 1e-3)
    own[j] += h
    const high = profileArea(shape, own)
    own[j] -= 2 * h
    gradient[j] = (high - profileArea(shape, own)) / (2 * h)
    own[j] += h
  }
  return gradient
}
