import { describe, expect, it } from 'vitest'
import { guessedWavelengthUnit, spectralUnit, toAngstrom } from '../../src/spectrum/unit.ts'

describe('spectralUnit', () => {
  it.each([
    // Spellings met in files; the factor is exact.
    ['Angstrom', 5000, 5000],
    ['ANGSTROMS', 5000, 5000],
    ['angstrom', 5000, 5000],
    ['A', 5000, 5000],
    ['0.1nm', 5000, 5000],
    ['10**-10 m', 5000, 5000],
    ['nm', 500, 5000],
    ['NANOMETERS', 500, 5000],
    ['um', 0.5, 5000],
    ['micron', 0.5, 5000],
    ['µm', 0.5, 5000],
    ['m', 5e-7, 5000],
    ['M', 5e-7, 5000],
    ['cm-1', 20000, 5000],
    ['1/cm', 20000, 5000],
    ['Kayser', 20000, 5000],
    ['m-1', 2e6, 5000],
    ['log10(Angstrom)', Math.log10(5000), 5000],
    ['[log Angstrom]', Math.log10(5000), 5000],
    ['log(nm)', Math.log10(500), 5000],
    // c = 299792458 m/s and hc = 12398.41984 eV Å are exact or of CODATA 2018.
    ['Hz', 5.99584916e14, 5000],
    ['THz', 599.584916, 5000],
    ['eV', 2.479683969, 5000],
    ['keV', 0.002479683969, 5000],
  ])('reads %s', (text, value, expected) => {
    const unit = spectralUnit(text)
    expect(unit).toBeDefined()
    if (unit) expect(toAngstrom(value, unit) / expected).toBeCloseTo(1, 9)
  })

  it.each(['', 'deg', 'pixel', 'furlong', 'erg/s/cm2/Angstrom', 'counts', 's', 'arcsec'])(
    'takes "%s" for no spectral unit',
    (text) => {
      expect(spectralUnit(text)).toBeUndefined()
    },
  )
})

describe('guessedWavelengthUnit', () => {
  it.each([
    [3800, 7000, 'Angstrom'],
    [380, 700, 'nm'],
    [940, 1260, 'nm'],
    [0.38, 0.7, 'um'],
    [3.8e-7, 7e-7, 'm'],
    [900, 25000, 'Angstrom'],
  ])('takes %f to %f for %s', (low, high, unit) => {
    expect(guessedWavelengthUnit(low, high)).toBe(unit)
  })

  it.each([
    [1, 2048],
    [-5, 5],
    [0, 4095],
    [1e6, 1e7],
  ])('guesses nothing from %f to %f', (low, high) => {
    expect(guessedWavelengthUnit(low, high)).toBeUndefined()
  })
})
