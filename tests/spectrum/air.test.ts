import { describe, expect, it } from 'vitest'
import { airToVacuum, vacuumToAir } from '../../src/spectrum/air.ts'

describe('vacuumToAir', () => {
  it.each([
    // Ciddor 1996, Applied Optics 35, 1566, evaluated with 30 digits apart from this code, rounded to 1e-4 Å.
    [4000, 3998.8693],
    [5000, 4998.6055],
    [6000, 5998.3386],
    [7000, 6998.0699],
    [8000, 7997.8002],
    // Published pairs: laboratory wavelengths of the NIST Atomic Spectra Database in air and vacuum.
    [5891.583, 5889.951],
    [6679.995, 6678.151],
    [4472.735, 4471.48],
  ])('gives the air wavelength of %f Å in vacuum', (vacuum, air) => {
    // NIST rounds to 0.001 Å.
    expect(Math.abs(vacuumToAir(vacuum) - air)).toBeLessThan(air % 1 === 0 ? 1e-4 : 1.1e-3)
  })

  it('leaves wavelengths below 2000 Å as they are', () => {
    expect(vacuumToAir(1215.67)).toBe(1215.67)
    expect(airToVacuum(1215.67)).toBe(1215.67)
  })
})

describe('airToVacuum', () => {
  it('undoes vacuumToAir to 1e-9 Å from 2001 Å to 3 µm', () => {
    for (let vacuum = 2001; vacuum < 30000; vacuum += 7.3)
      expect(Math.abs(airToVacuum(vacuumToAir(vacuum)) - vacuum)).toBeLessThan(1e-9)
  })

  it('gives 3934.777 Å for Ca II K at 3933.663 Å in air (NIST)', () => {
    expect(airToVacuum(3933.663)).toBeCloseTo(3934.777, 3)
  })
})
