import { fitContinuum } from '../continuum/fitContinuum.ts'
import type { BandWindow, Calibration } from '../tables/types.ts'
import { expectedFeatures, expectedSpectrum } from '../typing/expected.ts'
import { FINE_FIRST, FINE_STEP } from './grid.ts'
import { likeMean } from './likeMean.ts'
import { madeSpectrum } from './madeSpectrum.ts'
import { lineTransmission, starContinuum } from './starLight.ts'
import type { LightOf } from './starLight.ts'
import { withStrengths } from './withStrengths.ts'

/** Rounds of fitting the continuum and meeting the strengths against it. */
const ROUNDS = 3
/** Sampling and signal-to-noise ratio at which the continuum is fitted meanwhile. */
const SAMPLING = { first: 3700, last: 9000, step: 2, fwhm: 5, snr: 300 } as const

/** What the program expects of stars: its calibration and the windows of the features in it. */
export interface Expectation {
  readonly calibration: Calibration
  readonly bands: readonly BandWindow[]
}

/**
 * Light of a made star at rest in photons per Å on the fine grid, 1 near 5500 Å: black body with a Balmer jump, lines
 * of the demo's own round strengths, brought to the mean normalised spectrum of the type where the calibration has one
 * and to the strengths that it expects of every feature. So the program ought to give the type back; that is a check
 * of consistency, not of accuracy.
 *
 * @param type        type number, O0 = 0
 * @param luminosity  luminosity number, I = 1 … V = 5
 */
export function expectedLight(type: number, luminosity: number, { calibration, bands }: Expectation): Float64Array {
  const lines = lineTransmission(type, luminosity)
  const mean = expectedSpectrum(calibration, type, luminosity)
  const shaped = mean ? likeMean(lines, mean.wavelength, mean.normalised) : lines
  const expected = new Map(
    expectedFeatures(calibration, type, luminosity).map(({ feature, value }) => [feature, value]),
  )
  const wanted = bands.map(({ feature }) => expected.get(feature))
  const continuum = starContinuum(type, luminosity)
  let light = shaped
  for (let round = 0; round < ROUNDS; round++) {
    const level = foundLevel(light, continuum)
    light = withStrengths(light, bands, wanted, { fwhm: calibration.commonFwhm, level })
  }
  return continuum.map((level, i) => level * light[i])
}

/** Made stars as the program expects them, each made once and then remembered. */
export function expectedLightOf(expectation: Expectation): LightOf {
  const made = new Map<string, Float64Array>()
  return (type, luminosity) => {
    const key = `${type} ${luminosity}`
    const light = made.get(key) ?? expectedLight(type, luminosity, expectation)
    made.set(key, light)
    return light
  }
}

/** The level that the program's own continuum fit finds, in units of the true continuum, on the fine grid. */
function foundLevel(light: Float64Array, continuum: Float64Array): Float64Array {
  const spectrum = madeSpectrum(
    continuum.map((level, i) => level * light[i]),
    SAMPLING,
  )
  const { level } = fitContinuum(spectrum)
  const { first, step } = SAMPLING
  return continuum.map((truth, i) => {
    const at = Math.max(0, Math.min(level.length - 1, (FINE_FIRST + FINE_STEP * i - first) / step))
    const left = Math.min(level.length - 2, Math.floor(at))
    const found = (level[left] + (level[left + 1] - level[left]) * (at - left)) / truth
    return found > 0 ? found : 1
  })
}
