/** Cholesky factor (lower, full layout by rows) of a small symmetric positive definite matrix; undefined if it is not. */
function cholesky(matrix: Float64Array, size: number): Float64Array | undefined {
  const factor = new Float64Array(size * size)
  for (let i = 0; i < size; i++)
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * size + j]
      for (let k = 0; k < j; k++) sum -= factor[i * size + k] * factor[j * size + k]
      if (j < i) factor[i * size + j] = sum / factor[j * size + j]
      else if (sum > 0) factor[i * size + i] = Math.sqrt(sum)
      else return undefined
    }
  return factor
}

/** Solution x of A x = b for a symmetric positive definite A, shape (p × p) by rows; undefined if A is singular. */
export function solvePositive(matrix: Float64Array, b: Float64Array): Float64Array | undefined {
  const size = b.length
  const factor = cholesky(matrix, size)
  if (!factor) return undefined
  const x = b.slice()
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < i; k++) x[i] -= factor[i * size + k] * x[k]
    x[i] /= factor[i * size + i]
  }
  for (let i = size - 1; i >= 0; i--) {
    for (let k = i + 1; k < size; k++) x[i] -= factor[k * size + i] * x[k]
    x[i] /= factor[i * size + i]
  }
  return x
}

/** Inverse, shape (p × p) by rows, of a symmetric positive definite matrix; undefined if it is singular. */
export function choleskyInverse(matrix: Float64Array, size: number): Float64Array | undefined {
  const inverse = new Float64Array(size * size)
  const unit = new Float64Array(size)
  for (let j = 0; j < size; j++) {
    unit.fill(0)
    unit[j] = 1
    const column = solvePositive(matrix, unit)
    if (!column) return undefined
    for (let i = 0; i < size; i++) inverse[i * size + j] = column[i]
  }
  return inverse
}
