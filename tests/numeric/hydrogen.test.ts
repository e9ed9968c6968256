import { describe, expect, it } from 'vitest'
import { photonEnergy, rydbergWavelength } from '../../src/numeric/hydrogen.ts'

describe('rydbergWavelength', () => {
  it('gives the Balmer lines and the limits of the series', () => {
    // R_H = 109 677.5834 /cm (CODATA constants): λ = 36/(5 R_H) and so on, in vacuum
    const known = [6564.696, 4862.738, 4341.73, 4102.935, 3971.236]
    known.forEach((wavelength, k) => expect(rydbergWavelength(2, 3 + k)).toBeCloseTo(wavelength, 2))
    expect(rydbergWavelength(2, 1e9)).toBeCloseTo(3647.05, 2)
    expect(rydbergWavelength(3, 1e9)).toBeCloseTo(8205.87, 2)
  })

  it('gives He II 4686 from its levels', () => {
    // 4687.01 Å in vacuum (a public list of emission lines); fine structure, Z² times hydrogen's, takes 0.15 Å
    expect(Math.abs(rydbergWavelength(3, 4, 2) - 4687.01)).toBeLessThan(0.16)
  })
})

describe('photonEnergy', () => {
  it('is hc/λ', () => {
    // hc = 12 398.419 84 eV Å exactly; Lyman limit of hydrogen 13.598 eV (CODATA Rydberg energy 13.6057 eV, reduced)
    expect(photonEnergy(12398.419843320026)).toBe(1)
    expect(photonEnergy(rydbergWavelength(1, 1e9))).toBeCloseTo(13.5983, 3)
  })
})
