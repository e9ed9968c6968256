import { describe, expect, it } from 'vitest'
import { powerSpectrum } from '../../src/numeric/powerSpectrum.ts'
import { seededNormal } from '../../src/numeric/random.ts'

describe('powerSpectrum', () => {
  it('equals the sum of its definition', () => {
    const normal = seededNormal(11)
    const y = Float64Array.from({ length: 13 }, normal)
    const found = powerSpectrum(y)
    expect(found.length).toBe(9)
    // definition, padded with zeros to 16
    for (let k = 0; k <= 8; k++) {
      let re = 0
      let im = 0
      y.forEach((v, j) => {
        re += v * Math.cos((2 * Math.PI * j * k) / 16)
        im += v * Math.sin((2 * Math.PI * j * k) / 16)
      })
      expect(found[k]).toBeCloseTo(re * re + im * im, 10)
    }
  })

  it('keeps the power of the series (Parseval)', () => {
    const normal = seededNormal(12)
    const y = Float64Array.from({ length: 64 }, normal)
    const p = powerSpectrum(y)
    const total = p[0] + p[32] + 2 * p.slice(1, 32).reduce((a, b) => a + b, 0)
    expect(total / 64).toBeCloseTo(
      y.reduce((a, v) => a + v * v, 0),
      9,
    )
  })

  it('does not change its argument and takes a single value', () => {
    const y = Float64Array.of(3)
    expect([...powerSpectrum(y)]).toEqual([9, 9])
    expect([...y]).toEqual([3])
  })
})
