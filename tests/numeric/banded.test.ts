import { describe, expect, it } from 'vitest'
import { bandedCholesky, bandedInverseDiagonal, solveBanded } from '../../src/numeric/banded.ts'
import { seededNormal } from '../../src/numeric/random.ts'

/** 4 on the diagonal, −1 and 0.5 beside it: diagonally dominant, so positive definite. */
function matrix(size: number) {
  const rows = new Float64Array(size * 3)
  for (let i = 0; i < size; i++) {
    rows[i * 3] = 4 + (i % 3)
    if (i >= 1) rows[i * 3 + 1] = -1
    if (i >= 2) rows[i * 3 + 2] = 0.5
  }
  return { rows, size, width: 2 }
}

function multiply({ rows, size }: { rows: Float64Array; size: number }, x: Float64Array): Float64Array {
  const out = new Float64Array(size)
  for (let i = 0; i < size; i++)
    for (let d = 0; d <= Math.min(2, i); d++) {
      out[i] += rows[i * 3 + d] * x[i - d]
      if (d > 0) out[i - d] += rows[i * 3 + d] * x[i]
    }
  return out
}

describe('solveBanded', () => {
  it('undoes the product of matrix and vector', () => {
    const a = matrix(20)
    const normal = seededNormal(3)
    const x = Float64Array.from({ length: 20 }, () => normal())
    const solved = solveBanded(bandedCholesky(a), multiply(a, x))
    // identity A⁻¹ A x = x; rounding of a well-conditioned matrix
    for (let i = 0; i < 20; i++) expect(solved[i]).toBeCloseTo(x[i], 12)
  })

  it('solves one equation', () => {
    expect([...solveBanded(bandedCholesky({ rows: Float64Array.of(4), size: 1, width: 0 }), [2])]).toEqual([0.5])
  })
})

describe('bandedCholesky', () => {
  it('refuses a matrix that is not positive definite', () => {
    expect(() => bandedCholesky({ rows: Float64Array.of(1, 0, 1, 2), size: 2, width: 1 })).toThrow(
      'bandedCholesky requires a positive definite matrix, got pivot -3 in row 1',
    )
  })
})

describe('bandedInverseDiagonal', () => {
  it('equals the diagonal found by solving for every unit vector', () => {
    const factor = bandedCholesky(matrix(15))
    const diagonal = bandedInverseDiagonal(factor)
    for (let i = 0; i < 15; i++) {
      const unit = new Float64Array(15)
      unit[i] = 1
      expect(diagonal[i]).toBeCloseTo(solveBanded(factor, unit)[i], 12)
    }
  })
})
