import { describe, expect, it } from 'vitest'
import { FWHM_PER_SIGMA, smoothToFwhm } from '../../src/numeric/smoothToFwhm.ts'

const n = 400
const even = Float64Array.from({ length: n }, (_, i) => 5000 + 1.4 * i)
const loglinear = Float64Array.from({ length: n }, (_, i) => 5000 * Math.exp(2.8e-4 * i))
const all = new Uint8Array(n).fill(1)
const gaussian = (w: Float64Array, centre: number, fwhm: number) =>
  w.map((x) => Math.exp(-0.5 * ((x - centre) / (fwhm / FWHM_PER_SIGMA)) ** 2))

describe('smoothToFwhm', () => {
  for (const [name, grid] of [
    ['an even grid', even],
    ['a grid even in ln λ', loglinear],
  ] as const)
    it(`turns a Gaussian line of one width into one of the other on ${name}`, () => {
      const centre = grid[200]
      const wide = smoothToFwhm(grid, gaussian(grid, centre, 5), all, { from: 5, to: 9 })
      const expected = gaussian(grid, centre, 9).map((value) => (value * 5) / 9)
      // Gaussians add in quadrature, the area stays; cutting the kernel at 3.5 σ leaves 5e-4 (measured 4.3e-4)
      for (let i = 0; i < n; i++) expect(Math.abs(wide[i] - expected[i])).toBeLessThan(6e-4)
    })

  it('does so for a kernel narrower than a sample', () => {
    const wide = smoothToFwhm(even, gaussian(even, even[200], 5), all, { from: 5, to: 5.3 })
    expect(wide[200]).toBeCloseTo(5 / 5.3, 2)
  })

  it('leaves a constant, edges and gaps included', () => {
    const usable = all.slice().fill(0, 100, 105)
    const flux = new Float64Array(n).fill(3).fill(NaN, 100, 105)
    for (const value of smoothToFwhm(even, flux, usable, { from: 4, to: 12 })) expect(value).toBeCloseTo(3, 12)
  })

  it('gives NaN where nothing usable is in reach, and a copy when nothing is to be done', () => {
    const usable = all.slice().fill(0, 50, 150)
    const flux = even.slice()
    expect(smoothToFwhm(even, flux, usable, { from: 4, to: 8 })[100]).toBeNaN()
    const copy = smoothToFwhm(even, flux, all, { from: 8, to: 4 })
    expect(copy).toEqual(flux)
    expect(copy).not.toBe(flux)
  })

  it('smooths samples far finer than the profile, if only in a stretch, at no more cost and as exactly', () => {
    const fine = Float64Array.from({ length: 40_000 }, (_, i) => 5000 + 0.01 * i)
    const used = new Uint8Array(fine.length).fill(1)
    const wide = smoothToFwhm(fine, gaussian(fine, 5200, 5), used, { from: 5, to: 9 })
    const expected = gaussian(fine, 5200, 9).map((value) => (value * 5) / 9)
    for (let i = 0; i < fine.length; i += 97) expect(Math.abs(wide[i] - expected[i])).toBeLessThan(1e-3)
    // a thousand samples within a thousandth of an angstrom, then the ordinary step: no kernel can be that long
    const mixed = Float64Array.from({ length: 2000 }, (_, i) => (i < 1000 ? 5000 + 1.4 * i : 6400 + 1e-9 * i))
    const flat = smoothToFwhm(mixed, new Float64Array(2000).fill(2), new Uint8Array(2000).fill(1), { from: 2, to: 10 })
    for (const value of flat) expect(value).toBeCloseTo(2, 12)
  })
})
