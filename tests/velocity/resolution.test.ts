import { describe, expect, it } from 'vitest'
import { seededNormal, seededUniform } from '../../src/numeric/random.ts'
import { OXYGEN_BANDS, SKY_LINES } from '../../src/tables/sky.ts'
import { arcResolution } from '../../src/velocity/arcResolution.ts'
import { measureResolution } from '../../src/velocity/measureResolution.ts'
import type { RestFrame } from '../../src/velocity/types.ts'
import { madeStar, MADE_STARS } from './madeStar.ts'

const options = { telluric: OXYGEN_BANDS, skyLines: SKY_LINES }
const atRest: RestFrame = { velocity: 0, error: 5, trusted: true, how: 'cross-correlation' }

/** Lamp lines at random places, brightness over a factor 100, on a slope of stray light with noise. */
function lamp(fwhm: number, step: number, seed: number): { wavelength: Float64Array; flux: Float64Array } {
  const uniform = seededUniform(seed)
  const normal = seededNormal(seed)
  const wavelength = Float64Array.from({ length: 2000 }, (_, i) => 4000 + i * step)
  const flux = wavelength.map((w) => 100 + 0.02 * (w - 4000) + 3 * normal())
  for (let line = 0; line < 30; line++) {
    const at = 4000 + uniform() * 2000 * step
    const height = 100 * 100 ** uniform()
    for (let i = 0; i < wavelength.length; i++)
      flux[i] += height * Math.exp(-4 * Math.LN2 * ((wavelength[i] - at) / fwhm) ** 2)
  }
  return { wavelength, flux }
}

describe('arcResolution', () => {
  it('finds the width of made lamp lines within 5 percent', () => {
    for (const [fwhm, step] of [
      [2, 0.7],
      [4.5, 1.4],
      [10, 3],
    ])
      for (const seed of [1, 2, 3]) {
        const { wavelength, flux } = lamp(fwhm, step, seed)
        // exact: the width put in; 15 percent is what is asked for
        expect(Math.abs((arcResolution(wavelength, flux)?.fwhm ?? NaN) / fwhm - 1)).toBeLessThan(0.05)
      }
  })

  it('finds none in noise, in a constant, in nothing', () => {
    const normal = seededNormal(3)
    const wavelength = Float64Array.from({ length: 500 }, (_, i) => 4000 + i)
    expect(arcResolution(wavelength, wavelength.map(normal))).toBeUndefined()
    expect(arcResolution(wavelength, new Float64Array(500).fill(7))).toBeUndefined()
    expect(arcResolution(new Float64Array(0), new Float64Array(0))).toBeUndefined()
  })
})

describe('measureResolution', () => {
  it('takes the sky lines before all else', () => {
    const { spectrum, continuum } = madeStar({ lines: MADE_STARS.G, fwhm: 5, range: [5000, 7000] })
    const sky = spectrum.wavelength.map((w) => 20 + 900 * Math.exp(-4 * Math.LN2 * ((w - 5577.339) / 6) ** 2))
    const found = measureResolution({ ...spectrum, sky, facts: { resolutionFwhm: 3 } }, continuum, atRest, options)
    expect(found).toMatchObject({ how: 'sky lines', isUpperLimit: false })
    expect(Math.abs(found.fwhm / 6 - 1)).toBeLessThan(0.05)
  })

  it('measures the B band, each line as wide as the instrument, within 15 percent', () => {
    for (const fwhm of [3, 4.5, 8]) {
      const lines = [...OXYGEN_BANDS[0].lines].map(([w, ew]): [number, number, number] => [w, 0.2 * ew, 0])
      const { spectrum, continuum } = madeStar({ lines, fwhm, range: [6000, 7400] })
      const found = measureResolution(spectrum, continuum, atRest, options)
      expect(found.how).toBe('telluric lines')
      expect(Math.abs(found.fwhm / fwhm - 1)).toBeLessThan(0.15)
    }
  })

  it('takes the header where no other light tells, unless the star has narrower lines', () => {
    const { spectrum, continuum } = madeStar({ lines: MADE_STARS.G, fwhm: 4, weakLines: 600 })
    expect(measureResolution({ ...spectrum, facts: { resolutionFwhm: 4 } }, continuum, atRest, options)).toEqual({
      fwhm: 4,
      how: 'header',
      isUpperLimit: false,
    })
    const wrong = measureResolution({ ...spectrum, facts: { resolutionFwhm: 12 } }, continuum, atRest, options)
    expect(wrong.how).toBe('stellar lines (upper limit)')
  })

  it('gives an upper limit from a crowded star alone, within 25 percent of the truth', () => {
    for (const fwhm of [2, 4, 8]) {
      const { spectrum, continuum } = madeStar({ lines: MADE_STARS.G, fwhm, weakLines: 600, snr: 100 })
      const found = measureResolution(spectrum, continuum, atRest, options)
      expect(found).toMatchObject({ how: 'stellar lines (upper limit)', isUpperLimit: true })
      expect(Math.abs(found.fwhm / fwhm - 1)).toBeLessThan(0.25)
    }
  })

  it('falls back on two samples where noise is all there is', () => {
    const { spectrum, continuum } = madeStar({ lines: [], snr: 10, step: 1.4 })
    const found = measureResolution(spectrum, continuum, atRest, options)
    expect(found.how).toBe('sampling (lower limit)')
    // exact arithmetic: 2 × 1.4
    expect(found.fwhm).toBeCloseTo(2.8, 6)
  })
})
