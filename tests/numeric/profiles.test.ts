import { describe, expect, it } from 'vitest'
import { faddeeva } from '../../src/numeric/faddeeva.ts'
import { PARAMETERS, type ProfileShape, profile, profileArea, profileFwhm } from '../../src/numeric/profiles.ts'
import { requirePython, runPython } from '../support/tools.ts'

const SHAPES: readonly ProfileShape[] = ['gaussian', 'lorentzian', 'voigt']
const hasScipy = requirePython('scipy')

describe.skipIf(!hasScipy)('faddeeva', () => {
  it('agrees with scipy.special.wofz', () => {
    const points: [number, number][] = []
    for (const x of [0, 0.3, 1, 2.5, 5, 12, 40]) for (const y of [1e-6, 1e-3, 0.1, 1, 5, 30]) points.push([x, y])
    const reference = JSON.parse(
      runPython(
        `import json, sys
from scipy.special import wofz
z = [wofz(x + 1j * y) for x, y in json.loads(sys.argv[1])]
print(json.dumps([[v.real, v.imag] for v in z]))`,
        [JSON.stringify(points)],
      ),
    ) as [number, number][]
    const out = new Float64Array(2)
    points.forEach(([x, y], k) => {
      faddeeva(x, y, out)
      const size = Math.hypot(...reference[k])
      // below 1e-7 of the modulus with 20 terms
      expect(Math.abs(out[0] - reference[k][0]) / size).toBeLessThan(1e-7)
      expect(Math.abs(out[1] - reference[k][1]) / size).toBeLessThan(1e-7)
    })
  })
})

describe('profileArea', () => {
  it('is the closed form of each profile', () => {
    // exact: √(2π)·d·σ and (π/2)·d·FWHM
    expect(profileArea('gaussian', [0.5, 0, 2])).toBeCloseTo(2.506628, 6)
    expect(profileArea('lorentzian', [0.5, 0, 1])).toBeCloseTo(1.570796, 6)
    // d / V(0; σ, γ) with V(0) = 0.24665637 for σ = 1, γ = 0.7, computed with scipy.special.voigt_profile
    expect(profileArea('voigt', [0.4, 0, 1, 0.7])).toBeCloseTo(1.6216893, 6)
  })

  it('equals the sum of the profile over a fine grid', () => {
    const out = new Float64Array(5)
    for (const shape of SHAPES) {
      const parameters = Float64Array.of(0.6, 0, 1.3, 0.2)
      let sum = 0
      for (let i = -200000; i <= 200000; i++) {
        profile(shape, i * 0.05, parameters, 0, out)
        sum += out[0] * 0.05
      }
      // the Lorentzian wings beyond ±10,000 Å hold 2γ/(π·10,000) = 8e-5 of the area
      expect(sum / profileArea(shape, parameters)).toBeCloseTo(1, 3)
    }
  })
})

describe('profileFwhm', () => {
  it('gives the width at half depth', () => {
    const out = new Float64Array(5)
    for (const shape of SHAPES) {
      const parameters = Float64Array.of(0.6, 0, 1, 0.7)
      profile(shape, profileFwhm(shape, parameters) / 2, parameters, 0, out)
      // Olivero & Longbothum 1977 state 0.02 %; the others are exact
      expect(out[0] / 0.6).toBeCloseTo(0.5, 3)
    }
    // FWHM 3.19122 of the same Voigt profile, by root finding on scipy's voigt_profile; the formula gives 3.19174
    expect(profileFwhm('voigt', [1, 0, 1, 0.7])).toBeCloseTo(3.19174, 4)
  })
})

describe('profile', () => {
  it('has the derivatives that differences give', () => {
    const high = new Float64Array(5)
    const low = new Float64Array(5)
    const out = new Float64Array(5)
    for (const shape of SHAPES)
      for (const x of [-3, 0.2, 1.7]) {
        const parameters = Float64Array.of(0.4, 0.2, 1.1, 0.7)
        profile(shape, x, parameters, 0, out)
        for (let j = 0; j < PARAMETERS[shape]; j++) {
          const shifted = parameters.slice()
          shifted[j] += 1e-6
          profile(shape, x, shifted, 0, high)
          shifted[j] -= 2e-6
          profile(shape, x, shifted, 0, low)
          expect(out[j + 1]).toBeCloseTo((high[0] - low[0]) / 2e-6, 7)
        }
      }
  })
})
