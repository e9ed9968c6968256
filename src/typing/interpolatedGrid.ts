import type { DecodedCalibration } from './decodedCalibration.ts'
import { gridOf } from './posterior.ts'
import type { TypeGrid } from './types.ts'

/** Steps of the posterior's grid to one of the calibration's. */
const FINER = 4

/**
 * Posterior on a grid four times finer in type than the calibration's: the log likelihood is interpolated by cubics
 * through its values and mean slopes (Catmull & Rom 1974), the prior is flat in type and weighted over the classes.
 */
export function interpolatedGrid(
  { types, classes }: DecodedCalibration,
  logLikelihood: Float64Array,
  classPrior: readonly number[],
): TypeGrid {
  const t = types.length
  const c = classes.length
  const fine = Float64Array.from({ length: (t - 1) * FINER + 1 }, (_, i) => types[0] + i / FINER)
  const logDensity = new Float64Array(fine.length * c)
  const logPrior = classPrior.map((weight) => Math.log(weight))
  for (let i = 0; i < fine.length; i++) {
    const left = Math.min(t - 2, Math.floor(i / FINER))
    const x = i / FINER - left
    const before = Math.max(0, left - 1)
    const after = Math.min(t - 1, left + 2)
    for (let j = 0; j < c; j++) {
      const y0 = logLikelihood[before * c + j]
      const y1 = logLikelihood[left * c + j]
      const y2 = logLikelihood[(left + 1) * c + j]
      const y3 = logLikelihood[after * c + j]
      const slope1 = 0.5 * (y2 - y0)
      const slope2 = 0.5 * (y3 - y1)
      const bend = 3 * (y2 - y1) - 2 * slope1 - slope2
      const twist = slope1 + slope2 - 2 * (y2 - y1)
      logDensity[i * c + j] = y1 + x * (slope1 + x * (bend + x * twist)) + logPrior[j]
    }
  }
  return gridOf(fine, classes, logDensity)
}
