import { faddeeva } from './faddeeva.ts'

export type ProfileShape = 'gaussian' | 'lorentzian' | 'voigt'

/** Parameters of a line: depth, centre, and one or two widths. */
export const PARAMETERS: Readonly<Record<ProfileShape, number>> = { gaussian: 3, lorentzian: 3, voigt: 4 }

/**
 * Writes the value and the derivatives of depth·P(x − centre), P(0) = 1, to `out`: [value, ∂/∂depth, ∂/∂centre,
 * ∂/∂width …]. Widths: Gaussian σ; Lorentzian half width at half depth γ; Voigt σ, then γ.
 *
 * @param at  index in `parameters` of the line's depth
 */
export function profile(shape: ProfileShape, x: number, parameters: Float64Array, at: number, out: Float64Array): void {
  const depth = parameters[at]
  const off = x - parameters[at + 1]
  const width = parameters[at + 2]
  if (shape === 'gaussian') {
    const t = off / width
    const value = Math.exp(-0.5 * t * t)
    out[0] = depth * value
    out[1] = value
    out[2] = (depth * value * t) / width
    out[3] = (depth * value * t * t) / width
  } else if (shape === 'lorentzian') {
    const t = off / width
    const value = 1 / (1 + t * t)
    out[0] = depth * value
    out[1] = value
    out[2] = (2 * depth * value * value * t) / width
    out[3] = (2 * depth * value * value * t * t) / width
  } else voigt(depth, off, width, parameters[at + 3], out)
}

const wing = new Float64Array(2)
const core = new Float64Array(2)
const TWO_PER_ROOT_PI = 2 / Math.sqrt(Math.PI)

/** w(iy) into `core`, computed anew only where y has changed: every sample of a line asks for the same. */
function coreAt(y: number): void {
  if (y === coreOf) return
  faddeeva(0, y, core)
  coreOf = y
}
let coreOf = NaN

/** As `profile`: Re w(z) / Re w(z₀) with z = (off + iγ)/(σ√2), z₀ = iγ/(σ√2), and w′ = −2zw + 2i/√π. */
function voigt(depth: number, off: number, sigma: number, gamma: number, out: Float64Array): void {
  const scale = 1 / (sigma * Math.SQRT2)
  const x = off * scale
  const y = gamma * scale
  faddeeva(x, y, wing)
  coreAt(y)
  const value = wing[0] / core[0]
  // w′ = re + i·im at z, and at z₀ (purely imaginary argument: w′(z₀) = i·coreIm)
  const re = -2 * (x * wing[0] - y * wing[1])
  const im = -2 * (x * wing[1] + y * wing[0]) + TWO_PER_ROOT_PI
  const coreIm = -2 * y * core[0] + TWO_PER_ROOT_PI
  const byX = re / core[0]
  const byY = (-im + value * coreIm) / core[0]
  out[0] = depth * value
  out[1] = value
  out[2] = -depth * byX * scale
  out[3] = (-depth * (byX * x + byY * y)) / sigma
  out[4] = depth * byY * scale
}

/** Area under a profile of the given parameters (equivalent width when depth is in units of the continuum). */
export function profileArea(shape: ProfileShape, parameters: ArrayLike<number>, at = 0): number {
  const depth = parameters[at]
  const width = Math.abs(parameters[at + 2])
  if (shape === 'gaussian') return depth * width * Math.sqrt(2 * Math.PI)
  if (shape === 'lorentzian') return depth * width * Math.PI
  coreAt(parameters[at + 3] / (width * Math.SQRT2))
  return (depth * width * Math.sqrt(2 * Math.PI)) / core[0]
}

/** Full width at half depth. The Voigt profile's after Olivero & Longbothum 1977, JQSRT 17, 233 (0.02 %). */
export function profileFwhm(shape: ProfileShape, parameters: ArrayLike<number>, at = 0): number {
  const width = Math.abs(parameters[at + 2])
  if (shape === 'lorentzian') return 2 * width
  const gaussian = 2 * Math.sqrt(2 * Math.LN2) * width
  if (shape === 'gaussian') return gaussian
  const lorentzian = 2 * parameters[at + 3]
  return 0.5346 * lorentzian + Math.sqrt(0.2166 * lorentzian * lorentzian + gaussian * gaussian)
}
