import { describe, expect, it } from 'vitest'
import { fineGrid, FINE_STEP, blurredAt } from '../../src/demo/grid.ts'
import { withFeatures } from '../../src/demo/profiles.ts'
import { blackBody, curveAt, lineTransmission, strengthOf } from '../../src/demo/starLight.ts'
import { DEMO_STRENGTHS } from '../../src/tables/demoStrengths.ts'

const grid = fineGrid()
const clear = new Float64Array(grid.length).fill(1)
const width = (light: Float64Array): number => light.reduce((sum, value) => sum + (1 - value) * FINE_STEP, 0)

describe('withFeatures', () => {
  it.each([
    // bounds: the tails cut off at 3 FWHM (line) and 60 half widths (hydrogen: 1.1 % of a Lorentzian
    // lies outside), the edges of trough and band are soft, the band is cut off at 6 times its reach
    { name: 'weak line', shape: { form: 'line' }, strength: 0.8, loss: 1e-3 },
    { name: 'strong line', shape: { form: 'line' }, strength: 9, loss: 1e-3 },
    { name: 'hydrogen line', shape: { form: 'hydrogen' }, strength: 13, loss: 0.15 },
    { name: 'trough', shape: { form: 'trough', width: 40 }, strength: 6, loss: 0.3 },
    { name: 'band', shape: { form: 'head', reach: 80 }, strength: 30, loss: 0.5 },
  ] as const)('takes out the equivalent width asked for: $name', ({ shape, strength, loss }) => {
    const light = withFeatures(clear, [{ shape, wavelength: 5000, strength }])
    expect(Math.abs(width(light) - strength)).toBeLessThan(loss)
    expect(Math.min(...light)).toBeGreaterThan(0)
  })

  it('gives emission its strength with the other sign', () => {
    const light = withFeatures(clear, [{ shape: { form: 'emission', width: 7 }, wavelength: 6562.79, strength: 30 }])
    expect(width(light)).toBeCloseTo(-30, 2)
  })

  it('leaves the array it is given as it was', () => {
    const before = clear.slice()
    withFeatures(clear, [{ shape: { form: 'line' }, wavelength: 5000, strength: 1 }])
    expect(clear).toEqual(before)
  })
})

describe('blurredAt', () => {
  it('keeps the equivalent width of a line and gives it the width of the profile', () => {
    const narrow = withFeatures(clear, [{ shape: { form: 'line' }, wavelength: 5000, strength: 0.5 }])
    const wide = blurredAt(narrow, grid, 6)
    expect(width(wide)).toBeCloseTo(width(narrow), 9)
    // quadratic sum of Gaussian widths, √(1.6² + 6²) = 6.21 Å; half depth is met within a sample
    const half = (1 + Math.min(...wide)) / 2
    const inside = wide.filter((value) => value < half).length * FINE_STEP
    expect(Math.abs(inside - 6.21)).toBeLessThanOrEqual(FINE_STEP)
  })
})

describe('blackBody', () => {
  it('peaks in photons where Wien says', () => {
    // λT = 3669.7 µm K for photons an interval of wavelength (x = 3.92069, the root of x = 4 (1 − e^−x)); hc/k = 14387.77 µm K
    const body = blackBody(5770)
    const peak = grid[body.indexOf(Math.max(...body))]
    expect(Math.abs(peak - (14387.76877 / 3.920690395 / 5770) * 1e4)).toBeLessThan(FINE_STEP)
  })
})

describe('strengthOf', () => {
  it('meets the curve of each class at its number and goes straight between', () => {
    const balmer = DEMO_STRENGTHS[0]
    expect(strengthOf(balmer, 20, 5)).toBe(13.5)
    expect(strengthOf(balmer, 20, 3)).toBe(12.5)
    expect(strengthOf(balmer, 20, 1)).toBe(4.5)
    expect(strengthOf(balmer, 20, 4)).toBe(13)
    expect(strengthOf(balmer, 20, 2)).toBe(8.5)
  })
})

describe('curveAt', () => {
  it('holds its end values beyond its ends', () => {
    const curve = [
      [10, 1],
      [20, 3],
    ] as const
    expect([0, 10, 15, 20, 60].map((type) => curveAt(curve, type))).toEqual([1, 1, 2, 3, 3])
  })
})

describe('lineTransmission', () => {
  it('has the Balmer lines strongest near A2 and stronger in dwarfs than in supergiants', () => {
    // Jaschek & Jaschek 1987; Morgan, Keenan & Kellman 1943
    const depth = (type: number, luminosity: number): number => {
      const light = lineTransmission(type, luminosity)
      const i = Math.round((4340.47 - grid[0]) / FINE_STEP)
      return light.subarray(i - 60, i + 60).reduce((sum, value) => sum + 1 - value, 0)
    }
    expect(depth(22, 5)).toBeGreaterThan(depth(10, 5))
    expect(depth(22, 5)).toBeGreaterThan(depth(35, 5))
    expect(depth(20, 5)).toBeGreaterThan(depth(20, 1))
  })
})
