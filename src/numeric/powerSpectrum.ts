/**
 * Power |Σ y exp(−2πi j k / m)|² of an evenly sampled series, zero-padded to a power of two m, by the radix-2 fast
 * Fourier transform (Cooley & Tukey 1965).
 *
 * @param y  shape (n), finite
 * @returns  shape (m / 2 + 1), for frequencies 0 to one half per sample in steps of 1 / m
 */
export function powerSpectrum(y: Float64Array): Float64Array {
  let m = 2
  while (m < y.length) m *= 2
  const re = new Float64Array(m)
  const im = new Float64Array(m)
  re.set(y)
  reverseBits(re)
  for (let size = 2; size <= m; size *= 2) {
    const half = size / 2
    const angle = (-2 * Math.PI) / size
    for (let k = 0; k < half; k++) {
      const c = Math.cos(angle * k)
      const s = Math.sin(angle * k)
      for (let i = k; i < m; i += size) {
        const j = i + half
        const x = re[j] * c - im[j] * s
        const z = re[j] * s + im[j] * c
        re[j] = re[i] - x
        im[j] = im[i] - z
        re[i] += x
        im[i] += z
      }
    }
  }
  return Float64Array.from({ length: m / 2 + 1 }, (_, i) => re[i] * re[i] + im[i] * im[i])
}

function reverseBits(values: Float64Array): void {
  const n = values.length
  for (let i = 1, j = 0; i < n; i++) {
    let bit = n >> 1
    for (; j & bit; bit >>= 1) j ^= bit
    j ^= bit
    if (i < j) {
      const kept = values[i]
      values[i] = values[j]
      values[j] = kept
    }
  }
}
