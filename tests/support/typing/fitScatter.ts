/** How the covariance of the features is estimated from residuals. */
export interface ScatterOptions {
  /** Subclasses: width of the Gaussian that weights the stars about a zone. */
  readonly reach: number
  /** Part taken from the off-diagonal elements, 0 to 1. */
  readonly shrinkage: number
  /** Least scatter, as mean depth over a band (the features' unit divided by the band's width). */
  readonly floor: number
  /** Residuals beyond this many local σ are held there. */
  readonly clip: number
}

/** Chosen by cross-validation on the atlas. */
export const SCATTER: ScatterOptions = { reach: 8, shrinkage: 0.3, floor: 0.008, clip: 3 }

export interface ScatterStar {
  readonly type: number
  readonly weight: number
}

/**
 * Covariance of the residuals of stars about a type: weighted by distance in type, held against outliers, the
 * off-diagonal elements shrunk, a floor added to the diagonal. shape (f × f).
 *
 * @param residual  shape (n × f); NaN where not measured
 * @param widths    shape (f): what turns a mean depth into the feature's unit
 */
export function fitScatter(
  type: number,
  stars: readonly ScatterStar[],
  residual: Float64Array,
  { widths, options = SCATTER }: { readonly widths: Float64Array; readonly options?: ScatterOptions },
): Float64Array {
  const n = stars.length
  const f = widths.length
  const near = Float64Array.from(
    stars,
    (star) => star.weight * Math.exp(-0.5 * ((star.type - type) / options.reach) ** 2),
  )
  const held = new Float64Array(n * f)
  const known = new Uint8Array(n * f)
  for (let k = 0; k < f; k++) {
    let sum = 0
    let weight = 0
    for (let i = 0; i < n; i++) {
      const r = residual[i * f + k]
      if (!(r === r)) continue
      known[i * f + k] = 1
      sum += near[i] * r * r
      weight += near[i]
    }
    const limit = options.clip * Math.sqrt(sum / weight)
    for (let i = 0; i < n; i++)
      if (known[i * f + k]) held[i * f + k] = Math.min(limit, Math.max(-limit, residual[i * f + k]))
  }
  const covariance = new Float64Array(f * f)
  const weights = new Float64Array(f)
  for (let i = 0; i < n; i++) {
    if (near[i] < 1e-6) continue
    for (let a = 0; a < f; a++) {
      if (!known[i * f + a]) continue
      weights[a] += near[i]
      const left = near[i] * held[i * f + a]
      for (let b = 0; b <= a; b++) covariance[a * f + b] += left * held[i * f + b]
    }
  }
  // Sums of products over the same stars, each feature by its own weight: never indefinite, whatever is missing.
  for (let a = 0; a < f; a++)
    for (let b = 0; b <= a; b++) {
      const value = covariance[a * f + b] / Math.sqrt(weights[a] * weights[b])
      covariance[a * f + b] = a === b ? value + (options.floor * widths[a]) ** 2 : (1 - options.shrinkage) * value
      covariance[b * f + a] = covariance[a * f + b]
    }
  return covariance
}
