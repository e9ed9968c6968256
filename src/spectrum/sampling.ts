import { median } from '../numeric/median.ts'

/** Typical change of the step from one sample to the next, as a ratio, above which values are no sampling. */
const UNEVEN = 1.3

/**
 * True when values follow each other as the samples of a spectrum do: always rising or always falling, the step
 * changing little from one to the next (by less than 1.3 in the median). The lines of a list scatter by far more.
 */
export function isEvenlySampled(values: Float64Array): boolean {
  if (values.length < 3) return false
  const sign = Math.sign(values[values.length - 1] - values[0])
  const ratios: number[] = []
  let before = values[1] - values[0]
  if (Math.sign(before) !== sign) return false
  for (let i = 2; i < values.length; i++) {
    const step = values[i] - values[i - 1]
    if (!(Math.sign(step) === sign)) return false
    ratios.push(Math.max(step / before, before / step))
    before = step
  }
  return median(ratios) < UNEVEN
}
