import { describe, expect, it } from 'vitest'
import { extinctionCcm89 } from './extinction.ts'

describe('extinctionCcm89', () => {
  it('reproduces the table of the paper for R = 3.1', () => {
    // Cardelli, Clayton & Mathis 1989, Table 3, x [1/µm] and A(λ)/A(V); from memory. x is rounded there: at 2.27 the
    // equations give 1.323
    for (const [x, ratio] of [
      [2.78, 1.569],
      [2.27, 1.337],
      [1.82, 1],
      [1.43, 0.751],
      [1.11, 0.479],
      [0.8, 0.282],
      [0.63, 0.19],
      [0.46, 0.114],
    ])
      expect(extinctionCcm89(1e4 / x)).toSatisfy((value: number) => Math.abs(value - ratio) < 0.016)
  })

  it('is 1 at 1.82 per micrometre for every R', () => {
    expect(extinctionCcm89(1e4 / 1.82, 5)).toBeCloseTo(1, 12)
  })

  it('refuses wavelengths outside its equations', () => {
    expect(() => extinctionCcm89(2000)).toThrow('wavelength requires 3030 to 33333 angstrom, got 2000')
  })
})
