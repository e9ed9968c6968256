/**
 * A symmetric positive definite matrix with `width` diagonals below the main one, by rows:
 * `rows[i * (width + 1) + d]` is the element (i, i − d), for d = 0 … width.
 */
export interface BandedMatrix {
  readonly rows: Float64Array
  readonly size: number
  readonly width: number
}

/**
 * Cholesky factor L (lower, the same banded layout) of a symmetric positive definite banded matrix, A = L Lᵀ.
 *
 * @throws RangeError when a pivot is not positive
 */
export function bandedCholesky({ rows, size, width }: BandedMatrix): BandedMatrix {
  const stride = width + 1
  const factor = new Float64Array(size * stride)
  for (let i = 0; i < size; i++) {
    const first = Math.max(0, i - width)
    for (let j = first; j <= i; j++) {
      let sum = rows[i * stride + i - j]
      for (let k = Math.max(first, j - width); k < j; k++)
        sum -= factor[i * stride + i - k] * factor[j * stride + j - k]
      if (j < i) factor[i * stride + i - j] = sum / factor[j * stride]
      else if (sum > 0) factor[i * stride] = Math.sqrt(sum)
      else throw new RangeError(`bandedCholesky requires a positive definite matrix, got pivot ${sum} in row ${i}`)
    }
  }
  return { rows: factor, size, width }
}

/** Solution x of L Lᵀ x = b for a factor of `bandedCholesky`; `b`, shape (size), is not changed. */
export function solveBanded({ rows, size, width }: BandedMatrix, b: ArrayLike<number>): Float64Array {
  const stride = width + 1
  const x = new Float64Array(size)
  for (let i = 0; i < size; i++) {
    let sum = b[i]
    for (let k = Math.max(0, i - width); k < i; k++) sum -= rows[i * stride + i - k] * x[k]
    x[i] = sum / rows[i * stride]
  }
  for (let i = size - 1; i >= 0; i--) {
    let sum = x[i]
    const last = Math.min(size - 1, i + width)
    for (let k = i + 1; k <= last; k++) sum -= rows[k * stride + k - i] * x[k]
    x[i] = sum / rows[i * stride]
  }
  return x
}

/**
 * Diagonal of (L Lᵀ)⁻¹ for a factor of `bandedCholesky`, without forming the whole inverse
 * (Erisman & Tinney 1975, Comm. ACM 18, 177: only elements within the band are needed).
 */
export function bandedInverseDiagonal({ rows, size, width }: BandedMatrix): Float64Array {
  const stride = width + 1
  const inverse = new Float64Array(size * stride)
  const element = (i: number, j: number) => (i >= j ? inverse[i * stride + i - j] : inverse[j * stride + j - i])
  for (let j = size - 1; j >= 0; j--) {
    const last = Math.min(size - 1, j + width)
    const pivot = rows[j * stride]
    for (let i = last; i >= j; i--) {
      let sum = i === j ? 1 / pivot : 0
      for (let k = j + 1; k <= last; k++) sum -= rows[k * stride + k - j] * element(i, k)
      inverse[i * stride + i - j] = sum / pivot
    }
  }
  const diagonal = new Float64Array(size)
  for (let i = 0; i < size; i++) diagonal[i] = inverse[i * stride]
  return diagonal
}
