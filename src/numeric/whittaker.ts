import { type BandedMatrix, bandedCholesky, bandedInverseDiagonal, solveBanded } from './banded.ts'

const ORDER = 3
const STRIDE = ORDER + 1
const DIFFERENCE = [-1, 3, -3, 1]

/** Penalty matrix DᵀD of third differences, scaled by `stiffness`, in the layout of `BandedMatrix`. */
export function thirdDifferencePenalty(size: number, stiffness: number): BandedMatrix {
  const rows = new Float64Array(size * STRIDE)
  for (let r = 0; r + ORDER < size; r++)
    for (let a = 0; a <= ORDER; a++)
      for (let b = 0; b <= a; b++) rows[(r + a) * STRIDE + a - b] += stiffness * DIFFERENCE[a] * DIFFERENCE[b]
  return { rows, size, width: ORDER }
}

/**
 * Stiffness for which a wave of `period` samples keeps half of its amplitude (unit weights): (period / 2π)⁶.
 * Follows from the transfer function 1 / (1 + stiffness·(2π/period)⁶) for long periods.
 */
export function stiffnessOfPeriod(period: number): number {
  return (period / (2 * Math.PI)) ** (2 * ORDER)
}

/**
 * Smooth curve z through y on an even grid that minimises Σ w (y − z)² + Σ (penalty) (Whittaker 1923,
 * Proc. Edinburgh Math. Soc. 41, 63; Eilers 2003, Anal. Chem. 75, 3631). Polynomials up to the second degree pass
 * unchanged. Where w is 0 the curve bridges the gap; y there must be finite but has no influence.
 *
 * @param penalty  of `thirdDifferencePenalty`, for the same size
 * @param floor    weight added everywhere, towards `y`, so that the system stays solvable
 */
export function whittaker(y: Float64Array, weight: Float64Array, penalty: BandedMatrix, floor = 1e-9): Float64Array {
  const right = new Float64Array(y.length)
  for (let i = 0; i < y.length; i++) right[i] = (weight[i] + floor) * y[i]
  return solveBanded(factorOf(weight, penalty, floor), right)
}

/** Diagonal of the covariance (W + penalty)⁻¹ of the curve, when w are inverse variances. */
export function whittakerVariance(weight: Float64Array, penalty: BandedMatrix, floor = 1e-9): Float64Array {
  return bandedInverseDiagonal(factorOf(weight, penalty, floor))
}

function factorOf(weight: Float64Array, penalty: BandedMatrix, floor: number): BandedMatrix {
  const rows = penalty.rows.slice()
  for (let i = 0; i < weight.length; i++) rows[i * STRIDE] += weight[i] + floor
  return bandedCholesky({ rows, size: penalty.size, width: penalty.width })
}
