import { type Fit, levenbergMarquardt } from '../numeric/levenbergMarquardt.ts'
import { PARAMETERS, type ProfileShape, profile, profileArea, profileFwhm } from '../numeric/profiles.ts'
import { type Pixels, firstPixelAbove } from './pixels.ts'

/** A line to be fitted: where it should be [Å, observed frame], its shape and a first width. */
export interface ProfileStart {
  readonly centre: number
  readonly shape: ProfileShape
  /** Å, FWHM. */
  readonly fwhm: number
  /** Å: the fitted centre may lie this far from the first one. */
  readonly reach: number
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
}

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
  let p = 0
  for (const { shape } of starts) {
    offsets.push(p)
    p += PARAMETERS[shape]
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
  if (used < p + 1) return undefined
  const start = firstParameters(pixels, starts, offsets, p)
  const scratch = new Float64Array(5)
  const model = (parameters: Float64Array, values: Float64Array, jacobian: Float64Array): void => {
    for (let i = 0; i < n; i++) {
      values[i] = 0
      if (weight[i] === 0) continue
      const x = pixels.wavelength[first + i]
      for (let k = 0; k < starts.length; k++) {
        const count = PARAMETERS[starts[k].shape]
        profile(starts[k].shape, x, parameters, offsets[k], scratch)
        values[i] += scratch[0]
        for (let j = 0; j < count; j++) jacobian[i * p + offsets[k] + j] = scratch[j + 1]
      }
    }
  }
  const accept = (parameters: Float64Array): boolean => {
    for (let k = 0; k < starts.length; k++) {
      const at = offsets[k]
      const width = parameters[at + 2]
      if (!(Math.abs(parameters[at + 1] - starts[k].centre) <= starts[k].reach)) return false
      if (!(width > 0.2 * step && width < hi - lo) || !(parameters[at] < 3)) return false
      if (starts[k].shape === 'voigt' && !(parameters[at + 3] >= 0 && parameters[at + 3] < hi - lo)) return false
    }
    return true
  }
  const fit = levenbergMarquardt(model, y, weight, { start, accept })
  if (!fit.converged || !Number.isFinite(fit.covariance[0])) return undefined
  return describe(fit, { starts, offsets, weight, pixels, first, model, degreesOfFreedom: used - p })
}

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
    parameters[o + 2] = shape === 'lorentzian' ? fwhm / 2 : fwhm / 2.3548 / (shape === 'voigt' ? 1.6 : 1)
    if (shape === 'voigt') parameters[o + 3] = fwhm / 4
  }
  return parameters
}

interface Fitted {
  readonly starts: readonly ProfileStart[]
  readonly offsets: readonly number[]
  readonly weight: Float64Array
  readonly pixels: Pixels
  readonly first: number
  readonly model: (parameters: Float64Array, values: Float64Array, jacobian: Float64Array) => void
  readonly degreesOfFreedom: number
}

function describe(fit: Fit, { starts, offsets, weight, pixels, first, model, degreesOfFreedom }: Fitted): ProfileFit {
  const { parameters, covariance, chiSquare } = fit
  const p = parameters.length
  const excess = chiSquare / degreesOfFreedom
  const scale = excess > 1 + BAD_FIT * Math.sqrt(2 / degreesOfFreedom) ? Math.sqrt(excess) : 1
  const pull = continuumPull(parameters, { weight, pixels, first, model })
  const lines = starts.map(({ shape }, k) => {
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
    }
  })
  return { lines, chiSquare, degreesOfFreedom }
}

/** Jᵀ W δ, where δ is what a level too high by its 1 σ adds to 1 − F/Fc. */
function continuumPull(
  parameters: Float64Array,
  { weight, pixels, first, model }: Pick<Fitted, 'weight' | 'pixels' | 'first' | 'model'>,
): Float64Array {
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
