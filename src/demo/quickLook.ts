import { DEMO_INSTRUMENT } from '../tables/demoNight.ts'
import type { DemoSetup } from '../tables/demoNight.ts'
import { pixelWavelengths } from './instrument.ts'
import { saturationElectrons } from './rawFrame.ts'

/** A quick-look spectrum in counts, all arrays of shape (width). */
export interface QuickLook {
  /** Å, air, as the file will say. */
  readonly wavelength: Float64Array
  readonly flux: Float64Array
  readonly sigma: Float64Array
  /** The sky that was taken out. */
  readonly sky: Float64Array
  /** Counts at which the extracted spectrum is clipped. */
  readonly ceiling: number
}

/** What is done to a quick-look besides noise; left out on the clean night. */
export interface QuickLookFlaws {
  /** Å added to the wavelengths the file gives. */
  readonly shift?: number
  /** Extra share of the sky taken out at its lines near this wavelength. */
  readonly oversubtract?: { readonly wavelength: number; readonly share: number }
  /** A cosmic ray: true wavelength [Å] and height in counts against the level there. */
  readonly hit?: { readonly wavelength: number; readonly height: number }
}

/** Half width of the region in which a sky line is taken out too strongly [Å]. */
const SKY_LINE_REACH = 15

/**
 * The quick-look spectrum of an exposure: sky taken out, noise of star, sky and read-out in it and in `sigma`.
 *
 * @param star  expected electrons of the star, shape (width)
 * @param sky   expected electrons of the sky in the rows extracted, shape (width)
 */
export function quickLook(
  star: Float64Array,
  sky: Float64Array,
  setup: DemoSetup,
  given: { readonly normal: () => number; readonly seeing: number; readonly flaws?: QuickLookFlaws },
): QuickLook {
  const { normal, seeing, flaws = {} } = given
  const { gain, readNoise, rowsExtracted } = DEMO_INSTRUMENT
  const wavelength = pixelWavelengths(setup)
  const ceiling = saturationElectrons(seeing)
  const flux = new Float64Array(star.length)
  const sigma = new Float64Array(star.length)
  for (let i = 0; i < star.length; i++) {
    const noise = Math.sqrt(star[i] + sky[i] + rowsExtracted * readNoise ** 2)
    let electrons = star[i] + noise * normal()
    if (flaws.oversubtract && Math.abs(wavelength[i] - flaws.oversubtract.wavelength) < SKY_LINE_REACH) {
      electrons -= flaws.oversubtract.share * sky[i]
    }
    if (flaws.hit) {
      const pixels = Math.abs(wavelength[i] - flaws.hit.wavelength) / setup.step
      if (pixels < 1) electrons += flaws.hit.height * star[i] * (1 - pixels)
    }
    flux[i] = Math.min(ceiling, electrons) / gain
    sigma[i] = noise / gain
  }
  const shift = flaws.shift ?? 0
  return {
    wavelength: wavelength.map((x) => x + shift),
    flux,
    sigma,
    sky: sky.map((electrons) => electrons / gain),
    ceiling: ceiling / gain,
  }
}
