import { describe, expect, it } from 'vitest'
import { parseSolution, solutionWavelength } from '../../src/spectrum/dispersion.ts'
import { requirePython, runPython } from '../support/tools.ts'

/** Wavelengths at pixels of a solution text. */
function wavelengths(text: string, pixels: readonly number[]): readonly number[] {
  const solution = parseSolution(text)
  if (!solution) throw new Error('solution cannot be read')
  return pixels.map((pixel) => solutionWavelength(solution, pixel))
}

describe('solutionWavelength', () => {
  it('is linear: first + step × (pixel − 1), over 1 + z', () => {
    expect(wavelengths('1 1 0 4000. 2. 100 0. 1. 2.', [1, 2, 51])).toEqual([4000, 4002, 4100])
    expect(wavelengths('1 1 0 4000. 2. 100 0.25 1. 2.', [1, 51])).toEqual([3200, 3280])
  })

  it('is log10: ten to the linear value', () => {
    const [first, last] = wavelengths('1 1 1 3.5 1e-3 100 0. 1. 2.', [1, 501])
    expect(first).toBeCloseTo(10 ** 3.5, 9)
    expect(last).toBeCloseTo(10 ** 4, 8)
  })

  it('weighs and adds terms with their offsets', () => {
    // Chebyshev of order 2 over 1 to 101: c1 + c2 x, x = (2p − 102) / 100. 0.5 (10 + 4000 + 1000 x) + 0.5 (0 + 6000).
    const text = '1 1 2 4000. 1. 101 0. 1. 2. 0.5 10. 1 2 1. 101. 4000. 1000. 0.5 0. 1 1 1. 101. 6000.'
    expect(wavelengths(text, [1, 51, 101])).toEqual([4505, 5005, 5505])
  })

  it('joins the knots of a linear spline and continues its last piece', () => {
    // Two pieces over 1 to 101 with knots 4000, 4100, 4300: exact arithmetic.
    const text = '1 1 2 4000. 1. 101 0. 1. 2. 1. 0. 4 2 1. 101. 4000. 4100. 4300.'
    expect(wavelengths(text, [1, 26, 51, 76, 101, 126, -24])).toEqual([4000, 4050, 4100, 4200, 4300, 4400, 3950])
  })

  it('reads arrays of wavelengths by pixel and by pairs', () => {
    expect(wavelengths('1 1 2 1. 1. 3 0. 1. 2. 1. 0. 5 3 4000. 4010. 4030.', [1, 1.5, 3])).toEqual([4000, 4005, 4030])
    expect(wavelengths('1 1 2 1. 1. 9 0. 1. 2. 1. 0. 6 3 1. 4000. 5. 4040. 9. 4060.', [1, 3, 7])).toEqual([
      4000, 4020, 4050,
    ])
  })

  it('gives a cubic spline that is straight when its coefficients are', () => {
    // The basis sums to 6 and reproduces straight lines: coefficients k give 6 × (s + 1) for k = 0, 1, 2 ...
    const text = '1 1 2 4000. 1. 101 0. 1. 2. 1. 0. 3 4 1. 101. 0. 1. 2. 3. 4. 5. 6.'
    const found = wavelengths(text, [1, 13.5, 26, 51, 101])
    const expected = [0, 0.5, 1, 2, 4].map((s) => 6 * (s + 1))
    found.forEach((value, i) => expect(value).toBeCloseTo(expected[i], 10))
  })

  it.skipIf(!requirePython('scipy.interpolate'))(
    'agrees with scipy and numpy on Chebyshev, Legendre and cubic splines',
    () => {
      const coefficients = [5000, 700, -12, 3.5, 0.7, -0.2]
      const pixels = [1, 17.25, 80, 511, 1024]
      const program = `
import json, sys
import numpy as np
from scipy.interpolate import BSpline
c, p = json.loads(sys.argv[1]), np.array(json.loads(sys.argv[2]))
x = (2 * p - 1025) / 1023
s = (p - 1) / 1023 * 3
spline = BSpline(np.arange(-3, 7), 6 * np.array(c), 3)
print(json.dumps([list(np.polynomial.chebyshev.chebval(x, c)), list(np.polynomial.legendre.legval(x, c)), list(spline(s))]))
`
      const expected = JSON.parse(
        runPython(program, [JSON.stringify(coefficients), JSON.stringify(pixels)]),
      ) as number[][]
      const text = coefficients.join(' ')
      const kinds = [`1 6 1. 1024. ${text}`, `2 6 1. 1024. ${text}`, `3 3 1. 1024. ${text}`]
      kinds.forEach((kind, k) => {
        const found = wavelengths(`1 1 2 1. 1. 1024 0. 1. 2. 1. 0. ${kind}`, pixels)
        found.forEach((value, i) => expect(Math.abs(value / expected[k][i] - 1)).toBeLessThan(1e-12))
      })
    },
  )
})

describe('parseSolution', () => {
  it.each([
    '',
    '1 1 2 4000. 1.',
    '1 1 2 4000. 1. 100 0. 1. 2.',
    '1 1 2 4000. 1. 100 0. 1. 2. 1. 0. 1 9 1. 100. 4000.',
    '1 1 7 1 1 1 0',
    '1 1 0 x 2. 100 0.',
    '1 1 0 4000. 2. 100 -1. 1. 2.',
  ])('reads nothing from "%s"', (text) => {
    expect(parseSolution(text)).toBeUndefined()
  })
})
