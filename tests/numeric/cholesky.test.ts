import { describe, expect, it } from 'vitest'
import { backwardSolve, choleskyFactor, forwardSolve, inverseFromFactor } from '../../src/numeric/cholesky.ts'

// Worked by hand: [[4, 2, 2], [2, 10, 7], [2, 7, 21]] = L Lᵀ with L = [[2], [1, 3], [1, 2, 4]], det = (2·3·4)² = 576.
const MATRIX = Float64Array.of(4, 2, 2, 2, 10, 7, 2, 7, 21)
const LOWER = [2, 0, 0, 1, 3, 0, 1, 2, 4]

describe('choleskyFactor', () => {
  it('is the lower triangle whose product with its transpose is the matrix', () => {
    expect(Array.from(choleskyFactor(MATRIX, 3))).toEqual(LOWER)
  })

  it('reads the lower triangle only and leaves its argument as it was', () => {
    const half = Float64Array.of(4, NaN, NaN, 2, 10, NaN, 2, 7, 21)
    const before = half.slice()
    expect(Array.from(choleskyFactor(half, 3))).toEqual(LOWER)
    expect(half).toEqual(before)
  })

  it('refuses a matrix that is not positive definite', () => {
    expect(() => choleskyFactor(Float64Array.of(1, 2, 2, 1), 2)).toThrow(
      'choleskyFactor requires a positive definite matrix, got -3 in row 1',
    )
  })
})

describe('solving with a factor', () => {
  const lower = Float64Array.from(LOWER)

  it('solves A x = b in two substitutions', () => {
    // A (1, 2, 3) = (14, 43, 79)
    const x = Float64Array.of(14, 43, 79)
    backwardSolve(lower, 3, forwardSolve(lower, 3, x, x), x)
    expect(Array.from(x).map((value) => Math.round(value * 1e9) / 1e9)).toEqual([1, 2, 3])
  })

  it('gives the inverse', () => {
    const inverse = inverseFromFactor(lower, 3)
    for (let i = 0; i < 3; i++)
      for (let j = 0; j < 3; j++) {
        let sum = 0
        for (let k = 0; k < 3; k++) sum += MATRIX[i * 3 + k] * inverse[k * 3 + j]
        expect(sum).toBeCloseTo(i === j ? 1 : 0, 12)
      }
  })
})
