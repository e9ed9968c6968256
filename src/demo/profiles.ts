import type { FeatureShape } from '../tables/demoStrengths.ts'
import { FINE_FIRST, FINE_STEP } from './grid.ts'

/** Fraction of the light a made line takes at its darkest; real strong lines keep a core of scattered light. */
const DEEPEST_LINE = 0.85
const DEEPEST_HYDROGEN = 0.72
/** Width of a weak made line before the instrument, FWHM [Å]: rotation and turbulence of an ordinary star. */
const WEAK_LINE_WIDTH = 1.6
/** Strength in Å for each unit of depth at which a hydrogen line stops to deepen and begins to widen. */
const HYDROGEN_WIDENS = 6
/** Length over which a band head rises [Å]. */
const HEAD_EDGE = 3
/** Area of a profile of unit depth and unit FWHM. */
const GAUSSIAN_AREA = Math.sqrt(Math.PI / Math.LN2) / 2
const LORENTZIAN_AREA = Math.PI / 2

/** A feature at its place: equivalent width [Å] where it stands alone; the strength of emission is given positive. */
export interface PlacedFeature {
  readonly shape: FeatureShape
  readonly wavelength: number
  readonly strength: number
}

/** Depth over wavelength, and the range [Å] outside which it is nothing. */
interface Profile {
  readonly from: number
  readonly to: number
  readonly depth: (wavelength: number) => number
}

/**
 * A new transmission on the fine grid: the given one times one minus the depth of each feature.
 *
 * @param light  shape (fine grid), 1 where nothing is absorbed
 */
export function withFeatures(light: Float64Array, features: readonly PlacedFeature[]): Float64Array {
  const out = light.slice()
  for (const feature of features) {
    if (feature.strength === 0) continue
    const { from, to, depth } = profileOf(feature)
    const first = Math.max(0, Math.ceil((from - FINE_FIRST) / FINE_STEP))
    const last = Math.min(out.length - 1, Math.floor((to - FINE_FIRST) / FINE_STEP))
    for (let i = first; i <= last; i++) out[i] *= 1 - depth(FINE_FIRST + FINE_STEP * i)
  }
  return out
}

function profileOf({ shape, wavelength, strength }: PlacedFeature): Profile {
  if (shape.form === 'hydrogen') {
    const depth = Math.min(DEEPEST_HYDROGEN, strength / HYDROGEN_WIDENS)
    return lorentzian(wavelength, depth, strength / (LORENTZIAN_AREA * depth))
  }
  if (shape.form === 'winged') {
    return lorentzian(wavelength, Math.min(DEEPEST_LINE, strength / (LORENTZIAN_AREA * shape.width)), shape.width)
  }
  if (shape.form === 'line') {
    const depth = Math.min(DEEPEST_LINE, strength / (GAUSSIAN_AREA * WEAK_LINE_WIDTH))
    return gaussian(wavelength, depth, strength / (GAUSSIAN_AREA * depth))
  }
  if (shape.form === 'emission') return gaussian(wavelength, -strength / (GAUSSIAN_AREA * shape.width), shape.width)
  return shape.form === 'trough'
    ? trough(wavelength, strength, shape.width)
    : bandHead(wavelength, strength, shape.reach)
}

function gaussian(wavelength: number, depth: number, fwhm: number): Profile {
  const at = (x: number): number => depth * 2 ** -(((2 * (x - wavelength)) / fwhm) ** 2)
  return { from: wavelength - 3 * fwhm, to: wavelength + 3 * fwhm, depth: at }
}

function lorentzian(wavelength: number, depth: number, fwhm: number): Profile {
  const half = fwhm / 2
  const at = (x: number): number => depth / (1 + ((x - wavelength) / half) ** 2)
  return { from: wavelength - 60 * half, to: wavelength + 60 * half, depth: at }
}

function trough(wavelength: number, strength: number, width: number): Profile {
  const depth = Math.min(DEEPEST_LINE, strength / width)
  const edge = width / 8
  const at = (x: number): number => {
    const outside = Math.abs(x - wavelength) - (width - edge) / 2
    return outside <= 0 ? depth : outside >= edge ? 0 : depth * 0.5 * (1 + Math.cos((Math.PI * outside) / edge))
  }
  return { from: wavelength - width, to: wavelength + width, depth: at }
}

function bandHead(wavelength: number, strength: number, reach: number): Profile {
  const depth = Math.min(DEEPEST_LINE, strength / Math.abs(reach))
  const at = (x: number): number => {
    const along = (x - wavelength) / reach
    return along < 0 ? depth * Math.max(0, 1 - Math.abs(x - wavelength) / HEAD_EDGE) : depth * Math.exp(-along)
  }
  const [start, end] = [wavelength - Math.sign(reach) * HEAD_EDGE, wavelength + 6 * reach]
  return { from: Math.min(start, end), to: Math.max(start, end), depth: at }
}
