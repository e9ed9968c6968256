import { DEMO_INSTRUMENT } from '../tables/demoNight.ts'
import type { DemoSetup } from '../tables/demoNight.ts'
import { blurredAt, FINE_FIRST, FINE_SAMPLES, FINE_STEP, valueAt } from './grid.ts'
import { airBands, extinction, nightSky } from './sky.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** True wavelength [Å, air] of every pixel along the dispersion, shape (width). */
export function pixelWavelengths(setup: DemoSetup): Float64Array {
  return Float64Array.from({ length: DEMO_INSTRUMENT.width }, (_, i) => setup.first + setup.step * i)
}

/** Efficiency of grating, filter and detector, 1 at best. */
export function efficiency(setup: DemoSetup, wavelength: number): number {
  return 1 / (1 + ((wavelength - setup.peak) / setup.halfWidth) ** 2)
}

/** Light on the fine grid as the set-up samples it: blurred, times efficiency; shape (width) [unit Å a pixel]. */
function throughSetup(light: Float64Array, setup: DemoSetup): Float64Array {
  const wavelengths = pixelWavelengths(setup)
  const seen = blurredAt(light, wavelengths, setup.fwhm)
  return seen.map((value, i) => value * efficiency(setup, wavelengths[i]) * setup.step)
}

/** Expected electrons of a star in each pixel column, without noise, shape (width). */
export function starElectrons(
  light: Float64Array,
  setup: DemoSetup,
  given: { readonly mag: number; readonly velocity: number; readonly airmass: number; readonly exposure: number },
): Float64Array {
  const { mag, velocity, airmass, exposure } = given
  const bands = airBands(airmass)
  const shifted = new Float64Array(FINE_SAMPLES)
  for (let i = 0; i < FINE_SAMPLES; i++) {
    const wavelength = FINE_FIRST + FINE_STEP * i
    const atRest = wavelength / (1 + velocity / SPEED_OF_LIGHT)
    shifted[i] = valueAt(light, atRest) * extinction(wavelength, airmass) * bands[i]
  }
  const scale = DEMO_INSTRUMENT.zeroRate * 10 ** (-0.4 * mag) * exposure
  return throughSetup(shifted, setup).map((value) => value * scale)
}

/** Expected electrons of the night sky in each pixel column, summed over the rows extracted, shape (width). */
export function skyElectrons(setup: DemoSetup, exposure: number): Float64Array {
  return throughSetup(nightSky(), setup).map((value) => value * DEMO_INSTRUMENT.skyRate * exposure)
}

/** Expected electrons of the arc lamp in each pixel of a row, shape (width). */
export function arcElectrons(setup: DemoSetup, exposure: number): Float64Array {
  const light = new Float64Array(FINE_SAMPLES)
  for (const [wavelength, rate] of setup.lampLines) {
    const position = (wavelength - FINE_FIRST) / FINE_STEP
    const i = Math.floor(position)
    light[i] += (rate / FINE_STEP) * (1 - (position - i))
    light[i + 1] += (rate / FINE_STEP) * (position - i)
  }
  return blurredAt(light, pixelWavelengths(setup), setup.fwhm).map((value) => value * setup.step * exposure)
}

/** Expected electrons of an even source (lamp or twilight) in each pixel of a row, shape (width). */
export function evenElectrons(light: Float64Array, setup: DemoSetup, electrons: number): Float64Array {
  return throughSetup(light, setup).map((value) => (value / setup.step) * electrons)
}
