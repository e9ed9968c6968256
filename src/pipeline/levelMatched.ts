import { median } from '../numeric/median.ts'

/** Å between the places where the levels are compared, and half the stretch that each comparison takes in. */
const STEP = 50
const REACH = 150
const FEWEST = 12
/** The level of a pseudo-continuum and that of a mean spectrum differ by less than this; more is no matter of levels. */
const LARGEST = 1.3

/**
 * The expected spectrum times a smooth factor, the median of measured over expected within 150 Å, so that lines are
 * compared and not where two continua were drawn. Where too little is measured the factor is that of the nearest place.
 *
 * @param wavelength  shape (n) [Å], increasing
 * @param measured    shape (n), flux over continuum; NaN where there is none
 * @param expected    shape (n), NaN where not known
 * @returns shape (n), NaN where `expected` is
 */
export function levelMatched(wavelength: Float64Array, measured: Float32Array, expected: Float32Array): Float32Array {
  const n = wavelength.length
  const nodes: number[] = []
  const factors: number[] = []
  let from = 0
  for (let at = wavelength[0]; n > 0 && at <= wavelength[n - 1] + STEP; at += STEP) {
    while (from < n && wavelength[from] < at - REACH) from++
    const ratios: number[] = []
    for (let i = from; i < n && wavelength[i] <= at + REACH; i++) {
      const ratio = measured[i] / expected[i]
      if (ratio > 1 / LARGEST && ratio < LARGEST) ratios.push(ratio)
    }
    if (ratios.length < FEWEST) continue
    nodes.push(at)
    factors.push(median(ratios))
  }
  if (nodes.length === 0) return expected.slice()
  let k = 0
  return expected.map((value, i) => {
    while (k + 1 < nodes.length && nodes[k + 1] <= wavelength[i]) k++
    const next = Math.min(k + 1, nodes.length - 1)
    const part = next === k ? 0 : Math.min(1, Math.max(0, (wavelength[i] - nodes[k]) / (nodes[next] - nodes[k])))
    return value * ((1 - part) * factors[k] + part * factors[next])
  })
}
