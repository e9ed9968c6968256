import { describe, expect, it } from 'vitest'
import { stiffnessOfPeriod, thirdDifferencePenalty, whittaker, whittakerVariance } from '../../src/numeric/whittaker.ts'
import { seededNormal } from '../../src/numeric/random.ts'

const n = 300
const even = new Float64Array(n).fill(1)

describe('whittaker', () => {
  it('lets a parabola pass unchanged, even across a gap', () => {
    const y = Float64Array.from({ length: n }, (_, i) => 2 + 0.1 * i - 0.001 * i * i)
    const weight = even.slice().fill(0, 100, 150)
    const z = whittaker(y, weight, thirdDifferencePenalty(n, 1e6))
    // third differences of a parabola vanish, so it minimises both terms
    for (let i = 0; i < n; i++) expect(z[i]).toBeCloseTo(y[i], 5)
  })

  it('keeps half of a wave of the period the stiffness is made for', () => {
    const period = 50
    const y = Float64Array.from({ length: n }, (_, i) => Math.cos((2 * Math.PI * (i - 150)) / period))
    const z = whittaker(y, even, thirdDifferencePenalty(n, stiffnessOfPeriod(period)))
    // transfer function 1/2 at that period; 4 sin²(π/50) against (2π/50)² leaves 0.2 %, the ends a little more
    expect(z[150]).toBeCloseTo(0.5, 2)
  })

  it('changes no argument', () => {
    const y = Float64Array.from({ length: n }, (_, i) => i % 7)
    const before = y.slice()
    whittaker(y, even, thirdDifferencePenalty(n, 10))
    expect(y).toEqual(before)
  })
})

describe('whittakerVariance', () => {
  it('predicts the scatter of the curve over noise', () => {
    const penalty = thirdDifferencePenalty(100, 1e3)
    const weight = new Float64Array(100).fill(1)
    const normal = seededNormal(11)
    let square = 0
    const draws = 1500
    for (let k = 0; k < draws; k++) {
      const y = Float64Array.from({ length: 100 }, () => normal())
      square += whittaker(y, weight, penalty)[50] ** 2 / draws
    }
    // the posterior covariance (W + P)⁻¹ of a curve whose own bend is drawn from the penalty exceeds the scatter for a
    // straight one, H = (W + P)⁻¹ W twice: measured 0.92, and never more than the whole
    const predicted = whittakerVariance(weight, penalty)[50]
    expect(square / predicted).toBeGreaterThan(0.8)
    expect(square / predicted).toBeLessThan(1.05)
  })
})
