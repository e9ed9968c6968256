import { describe, expect, it } from 'vitest'
import { levelMatched } from '../../src/pipeline/levelMatched.ts'

const n = 1000
const wavelength = Float64Array.from({ length: n }, (_, i) => 4000 + i)
/** A line of a depth at 4500 Å, 10 Å wide. */
const line = (depth: number): Float32Array =>
  Float32Array.from(wavelength, (x) => 1 - depth * Math.exp(-0.5 * ((x - 4500) / 4) ** 2))

describe('levelMatched', () => {
  it('takes out a smooth difference of level', () => {
    // a slope of 4 to 8 %: within each stretch of 300 Å the median follows it to its middle
    const expected = line(0.4).map((value, i) => value * (0.96 - 0.04 * (i / n)))
    const matched = levelMatched(wavelength, line(0.4), expected)
    for (let i = 160; i < n - 160; i++) expect(Math.abs(matched[i] - line(0.4)[i])).toBeLessThan(0.005)
  })

  it('leaves a line that is deeper than expected deeper', () => {
    const matched = levelMatched(wavelength, line(0.6), line(0.3))
    expect(matched[500]).toBeCloseTo(0.7, 2)
  })

  it('leaves what cannot be compared as it is, and NaN where nothing is expected', () => {
    expect([...levelMatched(Float64Array.of(1, 2), Float32Array.of(NaN, NaN), Float32Array.of(0.5, NaN))]).toEqual([
      0.5,
      NaN,
    ])
    expect(levelMatched(new Float64Array(), new Float32Array(), new Float32Array())).toHaveLength(0)
    // a star twice as bright as expected is no matter of levels
    expect(
      levelMatched(
        wavelength,
        line(0).map((v) => 2 * v),
        line(0),
      )[500],
    ).toBe(1)
  })

  it('changes no argument', () => {
    const expected = line(0.3)
    levelMatched(wavelength, line(0), expected)
    expect(expected).toEqual(line(0.3))
  })
})
