import { describe, expect, it } from 'vitest'
import { rydbergWavelength } from '../../src/numeric/hydrogen.ts'
import { airToVacuum } from '../../src/spectrum/air.ts'
import { ALL_LINES, HELIUM_LINES, HYDROGEN_LINES, MEASURED_LINES } from '../../src/tables/lines.ts'
import { SOURCES } from '../../src/tables/sources.ts'

describe('HYDROGEN_LINES', () => {
  it('lie at Rydberg’s wavelengths, up to the fine structure', () => {
    for (const { wavelength, levels } of HYDROGEN_LINES) {
      const [lower, upper] = levels.match(/\d+/g)?.map(Number) ?? []
      const vacuum = rydbergWavelength(lower, upper)
      // fine structure moves the centre of gravity blueward by up to 1.4e-5 (4 km/s), most in Hα
      const off = airToVacuum(wavelength) / vacuum - 1
      expect(off).toBeLessThan(1e-6)
      expect(off).toBeGreaterThan(-1.5e-5)
    }
  })
})

describe('HELIUM_LINES', () => {
  it('of ionised helium lie at the wavelengths of its levels', () => {
    for (const { species, wavelength, levels } of HELIUM_LINES) {
      if (species !== 'He II') continue
      const [lower, upper] = levels.match(/\d+/g)?.map(Number) ?? []
      // fine structure grows with the square of the charge: up to 5.6e-5 to the blue; listed to 0.01 Å
      const off = airToVacuum(wavelength) / rydbergWavelength(lower, upper, 2) - 1
      expect(off).toBeLessThan(5e-6)
      expect(off).toBeGreaterThan(-6e-5)
    }
  })
})

describe('ALL_LINES', () => {
  it('have a name of their own, a known source and a wavelength in the optical', () => {
    const names = ALL_LINES.map(({ feature }) => feature)
    expect(new Set(names).size).toBe(names.length)
    for (const { feature, wavelength, source, species, fromMemory } of ALL_LINES) {
      expect(feature).toMatch(/^[A-Za-z0-9]+$/)
      expect(species).not.toBe('')
      expect(wavelength).toBeGreaterThan(3600)
      expect(wavelength).toBeLessThan(10000)
      expect(Object.keys(SOURCES)).toContain(source)
      if (source === 'memory') expect(fromMemory).toBe(true)
    }
  })

  it('holds wavelengths as published', () => {
    // re-typed: Ca II K 3933.663, Na I D2 5889.951 (NIST, by vacuum values 3934.777 and 5891.583 and Ciddor 1996)
    const at = (feature: string) => ALL_LINES.find((line) => line.feature === feature)?.wavelength ?? NaN
    expect(airToVacuum(at('CaK'))).toBeCloseTo(3934.777, 2)
    expect(airToVacuum(at('NaD2'))).toBeCloseTo(5891.583, 2)
    expect(airToVacuum(at('nebOIII5007'))).toBeCloseTo(5008.24, 1)
  })
})

describe('MEASURED_LINES', () => {
  it('are lines of the table, each with a window around its place if it has one', () => {
    expect(MEASURED_LINES.length).toBe(37)
    for (const { wavelength, window } of MEASURED_LINES)
      if (window) expect(window[0] < wavelength && wavelength < window[1]).toBe(true)
  })
})
