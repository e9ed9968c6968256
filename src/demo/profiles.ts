import type { FeatureShape } from '../tables/demoStrengths.ts'
import { FINE_FIRST, FINE_STEP } from './grid.ts'

/** Fraction of the light a made line leaves at its darkest; real strong lines keep a core of scattered light. */
const DEEPEST_LINE = 0.85
const DEEPEST_HYDROGEN = 0.72
/** Width of a weak made line before the instrument, FWHM [Å]: rotation and turbulence of an ordinary star. */
const WEAK_LINE_WIDTH = 1.6
/** Strength in Å for each unit of depth at which a hydrogen line stops to deepen and begins to widen. */
const HYDROGEN_WIDENS = 6
const GAUSSIAN_AREA = 1.0644670194312262
const LORENTZIAN_AREA = Math.PI / 2

/** Multiplies a transmission over [from, to] Å by 1 − depth(λ); the array is the caller's own scratch. */
function darken(light: Float64Array, from: number, to: number, depth: (wavelength: number) => number): void {
  const first = Math.max(0, Math.ceil((from - FINE_FIRST) / FINE_STEP))
  const last = Math.min(light.length - 1, Math.floor((to - FINE_FIRST) / FINE_STEP))
  for (let i = first; i <= last; i++) light[i] *= 1 - depth(FINE_FIRST + FINE_STEP * i)
}

/** A Lorentzian of that depth and FWHM, cut off at 60 half widths. */
function darkenWinged(light: Float64Array, wavelength: number, depth: number, fwhm: number): void {
  const half = fwhm / 2
  darken(light, wavelength - 60 * half, wavelength + 60 * half, (x) => depth / (1 + ((x - wavelength) / half) ** 2))
}

/**
 * A new transmission on the fine grid: the given one with a feature of `strength` Å (equivalent width where it stands
 * alone) at `wavelength` put in. The strength of emission is given positive.
 *
 * @param light  shape (fine grid), 1 where nothing is absorbed
 */
export function withFeature(
  light: Float64Array,
  shape: FeatureShape,
  wavelength: number,
  strength: number,
): Float64Array {
  const out = light.slice()
  if (strength === 0) return out
  if (shape.form === 'hydrogen') {
    const depth = Math.min(DEEPEST_HYDROGEN, strength / HYDROGEN_WIDENS)
    darkenWinged(out, wavelength, depth, strength / (LORENTZIAN_AREA * depth))
  } else if (shape.form === 'winged') {
    darkenWinged(out, wavelength, Math.min(DEEPEST_LINE, strength / (LORENTZIAN_AREA * shape.width)), shape.width)
  } else if (shape.form === 'line') {
    const depth = Math.min(DEEPEST_LINE, strength / (GAUSSIAN_AREA * WEAK_LINE_WIDTH))
    const fwhm = strength / (GAUSSIAN_AREA * depth)
    darken(
      out,
      wavelength - 3 * fwhm,
      wavelength + 3 * fwhm,
      (x) => depth * 2 ** -(((2 * (x - wavelength)) / fwhm) ** 2),
    )
  } else if (shape.form === 'emission') {
    const { width } = shape
    const height = strength / (GAUSSIAN_AREA * width)
    darken(
      out,
      wavelength - 3 * width,
      wavelength + 3 * width,
      (x) => -height * 2 ** -(((2 * (x - wavelength)) / width) ** 2),
    )
  } else if (shape.form === 'trough') {
    const { width } = shape
    const depth = Math.min(DEEPEST_LINE, strength / width)
    const edge = width / 8
    darken(out, wavelength - width, wavelength + width, (x) => {
      const outside = Math.abs(x - wavelength) - (width - edge) / 2
      return outside <= 0 ? depth : outside >= edge ? 0 : depth * 0.5 * (1 + Math.cos((Math.PI * outside) / edge))
    })
  } else {
    const { reach } = shape
    const depth = Math.min(DEEPEST_LINE, strength / Math.abs(reach))
    const [from, to] = reach > 0 ? [wavelength - 3, wavelength + 6 * reach] : [wavelength + 6 * reach, wavelength + 3]
    darken(out, from, to, (x) => {
      const along = (x - wavelength) / reach
      return along < 0 ? depth * Math.max(0, 1 - Math.abs(x - wavelength) / 3) : depth * Math.exp(-along)
    })
  }
  return out
}
