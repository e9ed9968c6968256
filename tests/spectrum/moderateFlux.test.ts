import { describe, expect, it } from 'vitest'
import { moderateFlux } from '../../src/spectrum/moderateFlux.ts'
import { madeSpectrum } from '../support/madeSpectrum.ts'

const { spectrum } = madeSpectrum({ kind: 'A0', snr: 50, withSigma: true })

describe('moderateFlux', () => {
  it('leaves fluxes of any ordinary unit as they are', () => {
    for (const factor of [1, 1e-17, 1e6]) {
      const given = { ...spectrum, flux: spectrum.flux.map((value) => value * factor) }
      expect(moderateFlux(given)).toBe(given)
    }
  })

  it('divides fluxes that cannot be squared by a power of ten, uncertainties with them, and says so in the unit', () => {
    for (const factor of [1e300, 1e-300, 1e-40]) {
      const given = {
        ...spectrum,
        flux: spectrum.flux.map((value) => value * factor),
        sigma: spectrum.sigma?.map((value) => value * factor),
      }
      const { flux, sigma, fluxUnit, notes } = moderateFlux(given)
      const middle = flux.slice().sort()[flux.length >> 1]
      expect(middle).toBeGreaterThanOrEqual(1)
      expect(middle).toBeLessThan(10)
      expect((sigma?.[9] ?? 0) / flux[9]).toBeCloseTo((spectrum.sigma?.[9] ?? 0) / spectrum.flux[9], 10)
      expect(fluxUnit).toMatch(/^10\*\*-?\d+\b/)
      expect(notes.map(({ code }) => code)).toContain('flux-scaled')
    }
  })

  it('takes a sample beyond all measure for missing, not for the scale of the rest', () => {
    const flux = spectrum.flux.slice()
    flux[100] = 1e308
    const cleaned = moderateFlux({ ...spectrum, flux })
    expect(cleaned.usable[100]).toBe(0)
    expect(cleaned.usable[101]).toBe(spectrum.usable[101])
    expect(cleaned.notes.map(({ code }) => code)).toContain('absurd-flux')
  })
})
