import { describe, expect, it } from 'vitest'
import { correlate, correlateCentred } from '../../src/numeric/correlate.ts'
import { seededNormal } from '../../src/numeric/random.ts'

const normal = seededNormal(5)
const pattern = Float64Array.from({ length: 80 }, normal)
/** Sixty samples of the pattern, taken k samples away from the middle. */
const cut = (k: number): Float64Array => pattern.slice(10 - k, 70 - k)
const even = new Float64Array(60).fill(1)

describe('correlate', () => {
  it('is 1 at the shift that was made, and nowhere more', () => {
    for (const shift of [-7, 0, 3]) {
      const found = correlate(cut(shift), even, pattern, 10)
      // identity: a vector correlates perfectly with itself
      expect(found[10 + shift]).toBeCloseTo(1, 12)
      expect(Math.max(...found)).toBeCloseTo(1, 12)
      expect(found.length).toBe(21)
    }
  })

  it('does not care for scale, nor for samples without weight', () => {
    const spoilt = cut(2).map((v, i) => (i === 30 ? 1e6 : -3 * v))
    const found = correlate(
      spoilt,
      Float64Array.from(even, (w, i) => (i === 30 ? 0 : w)),
      pattern,
      10,
    )
    expect(found[12]).toBeCloseTo(-1, 12)
  })

  it('is 0 where there is nothing to compare', () => {
    expect([...correlate(new Float64Array(60), even, pattern, 2)]).toEqual([0, 0, 0, 0, 0])
    expect([...correlate(cut(0), new Float64Array(60), pattern, 1)]).toEqual([0, 0, 0])
  })

  it('refuses a reach beyond the margin', () => {
    expect(() => correlate(cut(0), even, pattern, 11)).toThrow('reach of at most 10, got 11')
  })
})

describe('correlateCentred', () => {
  it('does not care for the level of either', () => {
    const found = correlateCentred(
      cut(4).map((v) => 5 * v + 100),
      even,
      pattern.map((v) => v - 20),
      10,
    )
    expect(found[14]).toBeCloseTo(1, 10)
  })

  it('is 0 for a constant', () => {
    expect([...correlateCentred(new Float64Array(60).fill(3), even, pattern, 1)]).toEqual([0, 0, 0])
  })
})
