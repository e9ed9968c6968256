import { describe, expect, it } from 'vitest'
import { OXYGEN_BANDS, SKY_LINES } from '../../src/tables/sky.ts'
import { measureZeroPoint } from '../../src/velocity/measureZeroPoint.ts'
import { madeStar, MADE_STARS } from './madeStar.ts'
import type { MadeLine } from './madeStar.ts'

/** Lines of the oxygen B band as lists of the Sun's spectrum have them [Å, air], from memory; widths invented. */
const B_BAND: readonly MadeLine[] = [
  ...[6867.2, 6867.6, 6868.2, 6868.8, 6869.1, 6869.9, 6870.95, 6872.25, 6873.8, 6875.59, 6877.64, 6879.04, 6879.93],
  ...[6883.83, 6885.75, 6886.74, 6888.95, 6889.9, 6892.37, 6893.31, 6896.04, 6896.97, 6899.95, 6900.87, 6904.12],
  ...[6905.02, 6908.53, 6909.43, 6913.2, 6914.09, 6918.12, 6919.0, 6923.3, 6924.17, 6928.7, 6929.6, 6934.4, 6935.3],
].map((at): MadeLine => [at, at < 6900 ? 0.3 : 0.3 - (at - 6900) / 180, 0])

const options = { telluric: OXYGEN_BANDS, skyLines: SKY_LINES }
const airVacuum = (w: number): number => w * (1 + 83.2 / 299792.458)

describe('measureZeroPoint', () => {
  it.each([2.5, 4.5, 8])('finds a scale that is off from the B band at a width of %f Å', (fwhm) => {
    for (const offset of [-120, 0, 83.2]) {
      const { spectrum, continuum } = madeStar({
        lines: B_BAND,
        fwhm,
        range: [6000, 7400],
        snr: 100,
        scale: (w) => w * (1 + offset / 299792.458),
      })
      const found = measureZeroPoint(spectrum, continuum, options)
      // exact: the offset put in; the widths of the made lines are not those of the table
      expect(Math.abs((found?.offset ?? NaN) - offset)).toBeLessThan(2 * (found?.error ?? 0))
      expect(found?.error).toBeLessThan(75)
      expect(found?.from).toBe('O2 B band')
    }
  })

  it('finds it from the lines of the sky that the file carries', () => {
    const { spectrum, continuum } = madeStar({ lines: MADE_STARS.G, fwhm: 5, range: [5000, 7000] })
    const sky = spectrum.wavelength.map((w) => {
      let light = 20
      // Osterbrock & Martel 1992: 5577.339, 6300.304, 6363.776
      for (const [at, height] of [
        [5577.339, 900],
        [6300.304, 400],
        [6363.776, 130],
      ])
        light += height * Math.exp(-4 * Math.LN2 * ((w - airVacuum(at)) / 5) ** 2)
      return light
    })
    const found = measureZeroPoint({ ...spectrum, sky }, continuum, options)
    expect(Math.abs((found?.offset ?? NaN) - 83.2)).toBeLessThan(2)
    expect(found?.from).toBe('[O I] 5577, [O I] 6300, [O I] 6364')
  })

  it('finds nothing without bands or sky lines, whatever the star', () => {
    for (const kind of ['O', 'A', 'G', 'K'] as const) {
      const { spectrum, continuum } = madeStar({ lines: MADE_STARS[kind], weakLines: 500 })
      expect(measureZeroPoint(spectrum, continuum, options)).toBeUndefined()
    }
  })

  it('says nothing of wavelengths that were moved to the barycentre', () => {
    const { spectrum, continuum } = madeStar({ lines: B_BAND, range: [6000, 7400] })
    expect(measureZeroPoint({ ...spectrum, frame: 'barycentric' }, continuum, options)).toBeUndefined()
  })
})

describe('OXYGEN_BANDS', () => {
  it('has the heads of the Fraunhofer bands and the doublets of the B band', () => {
    const [b, a] = OXYGEN_BANDS
    // heads: A 7594, B 6867 (Fraunhofer lines, handbook extents 7594–7621 and 6867–6884)
    expect(a.lines[0][0]).toBeCloseTo(7593.7, 0)
    expect(b.lines[0][0]).toBeCloseTo(6867.2, 0)
    // lines of the B band in lists of the Sun's spectrum, from memory
    for (const at of [6883.83, 6886.74, 6892.37, 6893.31, 6899.95, 6909.43, 6918.12, 6924.17])
      expect(Math.min(...b.lines.map(([w]) => Math.abs(w - at)))).toBeLessThan(0.05)
  })
})
