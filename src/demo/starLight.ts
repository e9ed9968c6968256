import { DEMO_STRENGTHS, DEMO_TEMPERATURES } from '../tables/demoStrengths.ts'
import type { DemoFeature, StrengthCurve } from '../tables/demoStrengths.ts'
import { fineGrid, FINE_FIRST, FINE_SAMPLES, FINE_STEP } from './grid.ts'
import { withFeatures } from './profiles.ts'

/** Value of a curve at a type number, its end values beyond. */
export function curveAt(curve: StrengthCurve, type: number): number {
  if (type <= curve[0][0]) return curve[0][1]
  for (let i = 1; i < curve.length; i++) {
    const [right, high] = curve[i]
    if (type > right) continue
    const [left, low] = curve[i - 1]
    return low + ((high - low) * (type - left)) / (right - left)
  }
  return curve[curve.length - 1][1]
}

/** Strength [Å] of a feature at a type and luminosity number (1 supergiant, 3 giant, 5 dwarf), linear between classes. */
export function strengthOf(feature: DemoFeature, type: number, luminosity: number): number {
  const dwarf = curveAt(feature.dwarf, type)
  const giant = feature.giant ? curveAt(feature.giant, type) : dwarf
  const supergiant = feature.supergiant ? curveAt(feature.supergiant, type) : giant
  return luminosity >= 3
    ? giant + ((dwarf - giant) * (Math.min(5, luminosity) - 3)) / 2
    : supergiant + ((giant - supergiant) * (Math.max(1, luminosity) - 1)) / 2
}

/**
 * Share of the continuum a made star lets through, on the fine grid at rest, before any instrument.
 *
 * @param scale  factor on a feature's strength by its name, for peculiar stars; 1 where not given
 */
export function lineTransmission(
  type: number,
  luminosity: number,
  scale: Readonly<Record<string, number>> = {},
): Float64Array {
  const features = DEMO_STRENGTHS.flatMap((feature) => {
    const strength = strengthOf(feature, type, luminosity) * (scale[feature.name] ?? 1)
    return feature.places.map(([wavelength, share]) => ({
      shape: feature.shape,
      wavelength,
      strength: strength * share,
    }))
  })
  return withFeatures(new Float64Array(FINE_SAMPLES).fill(1), features)
}

/** hc/k [Å K], from the exact SI values of h, c and k. */
const SECOND_RADIATION_CONSTANT = 1.438776877e8
/** Series limit of the Balmer lines [Å, air], and how much of the light is lost below it for each Å of line strength. */
const BALMER_LIMIT = 3646
const JUMP_PER_STRENGTH = 0.04
/** The crowded last lines of the series blur the edge over about this many Å. */
const JUMP_BLUR = 18

/** Black-body light in photons per Å on the fine grid, 1 at 5500 Å. Source: Planck's law. */
export function blackBody(temperature: number): Float64Array {
  const photons = (wavelength: number): number =>
    wavelength ** -4 / Math.expm1(SECOND_RADIATION_CONSTANT / (wavelength * temperature))
  const scale = photons(5500)
  return fineGrid().map((wavelength) => photons(wavelength) / scale)
}

/** Continuum of a made star in photons per Å on the fine grid, 1 near 5500 Å: black body with a Balmer jump. */
export function starContinuum(type: number, luminosity: number): Float64Array {
  const balmer = strengthOf(DEMO_STRENGTHS[0], type, luminosity)
  const jump = Math.min(0.6, JUMP_PER_STRENGTH * balmer)
  const body = blackBody(curveAt(DEMO_TEMPERATURES, type))
  for (let i = 0; i < body.length; i++) {
    const above = (FINE_FIRST + FINE_STEP * i - BALMER_LIMIT - 2 * JUMP_BLUR) / JUMP_BLUR
    body[i] *= 1 - jump / (1 + Math.exp(above))
  }
  return body
}

/** FWHM of a line from a turning disc [Å]. */
const DISC_WIDTH = 7
/** Emission of a star with a disc, of the size that Be stars show. Invented. */
const DISC_LINES = (
  [
    [6562.79, 32],
    [4861.33, 4],
    [4340.47, 1],
  ] as const
).map(([wavelength, strength]) => ({
  shape: { form: 'emission', width: DISC_WIDTH } as const,
  wavelength,
  strength,
}))

/** Light of a made star by its type and luminosity number, photons per Å on the fine grid, at rest; 1 near 5500 Å. */
export type LightOf = (type: number, luminosity: number) => Float64Array

/** Light with the emission of a disc put in; the unit is that of `light`. */
export function withDisc(light: Float64Array): Float64Array {
  return withFeatures(light, DISC_LINES)
}

/** Light of a star of the demo's own round strengths in photons per Å on the fine grid, at rest; 1 near 5500 Å. */
export function starLight(type: number, luminosity: number): Float64Array {
  const lines = lineTransmission(type, luminosity)
  return starContinuum(type, luminosity).map((level, i) => level * lines[i])
}
