import { describe, expect, it } from 'vitest'
import { seededUniform } from '../../src/numeric/random.ts'
import { medianInPlace, selectInPlace } from '../../src/numeric/select.ts'

describe('selectInPlace', () => {
  it('gives the value that sorting puts at that place', () => {
    const uniform = seededUniform(5)
    for (let trial = 0; trial < 300; trial++) {
      const values = Float64Array.from({ length: 1 + (trial % 40) }, () => Math.floor(uniform() * 12))
      const sorted = values.slice().sort()
      const k = Math.floor(uniform() * values.length)
      expect(selectInPlace(values.slice(), values.length, k)).toBe(sorted[k])
    }
  })
})

describe('medianInPlace', () => {
  it('is the middle, or the mean of the middle two, of the first values', () => {
    expect(medianInPlace(Float64Array.of(3, 1, 2, 99), 3)).toBe(2)
    expect(medianInPlace(Float64Array.of(3, 1, 2, 8), 4)).toBe(2.5)
    expect(medianInPlace(Float64Array.of(7), 1)).toBe(7)
    expect(medianInPlace(new Float64Array(2), 0)).toBeNaN()
  })
})
