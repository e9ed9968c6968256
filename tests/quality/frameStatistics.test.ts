import { describe, expect, it } from 'vitest'
import { quantileSorted } from '../../src/numeric/median.ts'
import { seededNormal, seededUniform } from '../../src/numeric/random.ts'
import { frameStatistics } from '../../src/quality/frameStatistics.ts'
import { madeFrame } from './madeFrame.ts'
import type { Stored } from './madeFrame.ts'

const WIDTH = 131
const HEIGHT = 73

/** Whole numbers from 0 to 30,000, most of them low: what all the ways of storing can hold. */
function wholePixels(seed: number): Float64Array {
  const uniform = seededUniform(seed)
  return Float64Array.from({ length: WIDTH * HEIGHT }, () => Math.floor(30000 * uniform() ** 4))
}

describe('frameStatistics', () => {
  const pixels = wholePixels(3)
  const sorted = [...pixels].sort((a, b) => a - b)
  // order statistics by sorting all pixels: the definition (Hyndman & Fan 1996, type 7)
  const expected = {
    median: quantileSorted(sorted, 0.5),
    p99: quantileSorted(sorted, 0.99),
    max: sorted[sorted.length - 1],
  }

  for (const stored of [
    'unsigned 16',
    'signed 16',
    'signed 32',
    'float 32',
    'float 64',
  ] as const satisfies readonly Stored[]) {
    it(`gives median, 99th percentile and maximum exactly for pixels stored as ${stored}`, () => {
      const { source, hdu } = madeFrame(pixels, WIDTH, stored)
      const statistics = frameStatistics(source, hdu, {})
      expect(statistics).toMatchObject({
        median: expected.median,
        max: expected.max,
        width: WIDTH,
        height: HEIGHT,
        nonfinite: 0,
      })
      // whole numbers joined linearly: only the last bits differ
      expect(statistics.p99).toBeCloseTo(expected.p99, 9)
    })
  }

  it('applies scale and zero of the header', () => {
    const quarters = pixels.map((value) => 100 + Math.floor(value / 4) / 4)
    const ordered = [...quarters].sort((a, b) => a - b)
    const { source, hdu } = madeFrame(quarters, WIDTH, 'scaled 16')
    const { median, max } = frameStatistics(source, hdu, {})
    expect(median).toBe(quantileSorted(ordered, 0.5))
    expect(max).toBe(ordered[ordered.length - 1])
  })

  it('interpolates between the middle two of an even count', () => {
    const { source, hdu } = madeFrame([1, 2, 4, 8], 2, 'float 32')
    expect(frameStatistics(source, hdu, {}).median).toBe(3)
  })

  it('orders negative floats below positive ones', () => {
    const values = [-5.5, -1, -0, 0, 2, 1e-30, -1e30, 7, 8]
    const { source, hdu } = madeFrame(values, 3, 'float 32')
    // sorted: -1e30 -5.5 -1 0 0 1e-30 2 7 8
    expect(frameStatistics(source, hdu, {}).median).toBe(0)
    expect(frameStatistics(source, hdu, {}).max).toBe(8)
  })

  it('counts pixels without a value and leaves them out', () => {
    const { source, hdu } = madeFrame([1, NaN, 3, Infinity, 5, 7], 3, 'float 32')
    const statistics = frameStatistics(source, hdu, {})
    expect(statistics.nonfinite).toBe(2)
    expect(statistics.median).toBe(4)
    expect(statistics.max).toBe(7)
  })

  it('measures the read noise of a bias within 2 %', () => {
    const normal = seededNormal(11)
    const bias = Float64Array.from({ length: 400 * 300 }, () => 500 + 6 * normal())
    const { source, hdu } = madeFrame(bias, 400, 'float 32')
    // planted standard deviation 6; measured 6.03 with this seed
    expect(Math.abs(frameStatistics(source, hdu, {}).noise / 6 - 1)).toBeLessThan(0.02)
  })

  it('finds the planted arc lines along either axis', () => {
    const centres = [20, 55, 81, 130, 171, 214, 260, 301, 350]
    const normal = seededNormal(5)
    const light = (x: number): number =>
      centres.reduce((sum, c) => sum + 3000 * Math.exp(-0.5 * ((x - c) / 1.6) ** 2), 0)
    const along = Float64Array.from({ length: 380 * 60 }, (_, i) => Math.round(400 + light(i % 380) + 5 * normal()))
    const down = Float64Array.from({ length: 60 * 380 }, (_, i) =>
      Math.round(400 + light(Math.floor(i / 60)) + 5 * normal()),
    )
    const [first, second] = [madeFrame(along, 380, 'unsigned 16'), madeFrame(down, 60, 'unsigned 16')]
    expect(frameStatistics(first.source, first.hdu, {})).toMatchObject({ arcLines: 9, dispersionAxis: 1 })
    expect(frameStatistics(second.source, second.hdu, {})).toMatchObject({ arcLines: 9, dispersionAxis: 2 })
  })

  it('measures position and width of a trace to a tenth of a pixel', () => {
    const normal = seededNormal(8)
    const fwhm = 3.2
    const star = (y: number): number => 200 * Math.exp(-4 * Math.LN2 * ((y - 31.3) / fwhm) ** 2)
    const pixels = Float64Array.from({ length: 500 * 70 }, (_, i) =>
      Math.round(100 + star(Math.floor(i / 500)) + 4 * normal()),
    )
    const { source, hdu } = madeFrame(pixels, 500, 'unsigned 16')
    const { trace, arcLines } = frameStatistics(source, hdu, {})
    expect(arcLines).toBe(0)
    expect(trace?.position).toBeCloseTo(31.3, 0)
    expect(Math.abs((trace?.position ?? 0) - 31.3)).toBeLessThan(0.1)
    // half-maximum crossings of a sampled Gaussian, joined linearly
    expect(Math.abs((trace?.fwhm ?? 0) - fwhm)).toBeLessThan(0.2)
    expect(Math.abs((trace?.peak ?? 0) - 200 * Math.exp(-4 * Math.LN2 * (0.3 / fwhm) ** 2))).toBeLessThan(3)
  })

  it('finds no trace in an evenly lit slit that fills a part of the detector', () => {
    const normal = seededNormal(9)
    const pixels = Float64Array.from({ length: 300 * 120 }, (_, i) => {
      const y = Math.floor(i / 300)
      return Math.round((y > 40 && y < 55 ? 9000 : 300) + 60 * normal())
    })
    const { source, hdu } = madeFrame(pixels, 300, 'unsigned 16')
    expect(frameStatistics(source, hdu, {}).trace).toBeUndefined()
  })

  it('counts saturated pixels by the header, by the range of 16 bits, and by a flat top', () => {
    const pixels = Float64Array.from({ length: 100 * 50 }, (_, i) => (i < 60 ? 65535 : 1000 + (i % 7)))
    const raw = madeFrame(pixels, 100, 'unsigned 16')
    expect(frameStatistics(raw.source, raw.hdu, {}).saturatedFraction).toBeCloseTo(60 / 5000, 12)
    const floats = madeFrame(pixels, 100, 'float 32')
    expect(frameStatistics(floats.source, floats.hdu, {}).saturatedFraction).toBeCloseTo(60 / 5000, 12)
    expect(frameStatistics(floats.source, floats.hdu, { saturation: 70000 }).saturatedFraction).toBe(0)
  })

  it('does not hold counts summed over pixels against the limit of one readout', () => {
    const pixels = Float64Array.from({ length: 100 * 50 }, (_, i) => 60000 + 8 * i)
    const { source, hdu } = madeFrame(pixels, 100, 'float 32')
    // the largest count is 99,992, which a detector that saturates at 63,000 cannot give
    expect(frameStatistics(source, hdu, { saturation: 63000 }).saturatedFraction).toBe(0)
  })

  it('says what is wrong with an image of one axis or with data cut off', () => {
    const { source, hdu } = madeFrame([1, 2, 3, 4], 2, 'float 32')
    expect(() => frameStatistics(source, { ...hdu, dimensions: [4] }, {})).toThrow('frame requires two axes, got 4')
    expect(() => frameStatistics(source, { ...hdu, dimensions: [2000, 2000], dataSize: 16e6 }, {})).toThrow(/requires/)
  })
})
