import { quantileSorted } from '../../../src/numeric/median.ts'
import { decodeCalibration } from '../../../src/typing/decodedCalibration.ts'
import { FIT_SHARES } from '../../../src/typing/fit.ts'
import { interpolatedGrid } from '../../../src/typing/interpolatedGrid.ts'
import { likelihoodGrid } from '../../../src/typing/likelihood.ts'
import { posteriorFigures } from '../../../src/typing/posterior.ts'
import { featureVector } from '../../../src/typing/typeSpectrum.ts'
import {
  type CalibrationModel,
  ZONE_TYPES,
  type ZoneFigures,
  buildCalibration,
  leftOutFor,
} from './buildCalibration.ts'

const EXPONENTS = Array.from({ length: 22 }, (_, i) => Number((0.14 * 1.06 ** i).toPrecision(3)))
/** Share of stars that the 68 % range shall hold. */
const WANTED = 0.68
/** Subclasses: width of the Gaussian that weights the stars about a zone. */
const REACH = 14

interface LeftOut {
  readonly type: number
  /** For each exponent: is the published type inside the 68 % range. */
  readonly held: readonly boolean[]
  readonly distance: number
}

/**
 * Tempering exponents and quantiles of the fit by zone, from typing every atlas star with a calibration that has not
 * seen it: the exponent is the largest with which the 68 % ranges of the stars about the zone hold 68 % of published types.
 */
export function zoneFigures(model: CalibrationModel): ZoneFigures[] {
  const stars = leaveOneOut(model)
  return ZONE_TYPES.map((zone) => {
    const weights = stars.map(({ type }) => Math.exp(-0.5 * ((type - zone) / REACH) ** 2))
    const total = weights.reduce((sum, weight) => sum + weight, 0)
    const shares = EXPONENTS.map(
      (_, e) => stars.reduce((sum, { held }, i) => sum + (held[e] ? weights[i] : 0), 0) / total,
    )
    let chosen = 0
    shares.forEach((share, e) => {
      if (share >= WANTED) chosen = e
    })
    return { tempering: EXPONENTS[chosen], fitQuantiles: fitQuantiles(stars, zone) }
  })
}

function leaveOneOut(model: CalibrationModel): LeftOut[] {
  const figures = (): ZoneFigures => ({ tempering: 1, fitQuantiles: FIT_SHARES.map((_, i) => i + 1) })
  const whole = buildCalibration(model, [], figures)
  return model.stars.flatMap(({ star, input }): LeftOut[] => {
    if (star.set !== 'atlas') return []
    const calibration = buildCalibration(model, leftOutFor(model, star), figures, whole)
    const decoded = decodeCalibration(calibration)
    const vector = featureVector(input, decoded)
    const { logLikelihood, distance } = likelihoodGrid(decoded, calibration.degreesOfFreedom, vector)
    let best = 0
    logLikelihood.forEach((value, at) => {
      if (value > logLikelihood[best]) best = at
    })
    const held = EXPONENTS.map((exponent) => {
      const scaled = logLikelihood.map((value) => value * exponent)
      const { low68, high68 } = posteriorFigures(interpolatedGrid(decoded, scaled, calibration.prior.classes))
      return star.typeNumber >= low68 && star.typeNumber <= high68
    })
    return [{ type: star.typeNumber, held, distance: distance[best] / vector.index.length }]
  })
}

/** Stars nearest to a zone that its quantiles are taken from. */
const NEIGHBOURS = 40

/**
 * From M2 on the fit is judged leniently: past M5 the expected values are extrapolated, and a bad fit is no sign of an odd star.
 */
const LATE = 62
const LENIENT = 6

/** Quantiles of the squared distance per feature; the outermost shares, which few stars reach, from a common tail. */
function fitQuantiles(stars: readonly LeftOut[], zone: number): number[] {
  const near = [...stars]
    .sort((a, b) => Math.abs(a.type - zone) - Math.abs(b.type - zone))
    .slice(0, NEIGHBOURS)
    .map(({ distance }) => distance)
    .sort((a, b) => a - b)
  const middle = quantileSorted(near, 0.5)
  const all = stars.map(({ distance, type }) => distance / localMedian(stars, type)).sort((a, b) => a - b)
  return FIT_SHARES.map((share) =>
    Number(((zone > LATE ? LENIENT : 1) * middle * quantileSorted(all, share)).toFixed(3)),
  )
}

function localMedian(stars: readonly LeftOut[], type: number): number {
  const near = [...stars]
    .sort((a, b) => Math.abs(a.type - type) - Math.abs(b.type - type))
    .slice(0, NEIGHBOURS)
    .map(({ distance }) => distance)
    .sort((a, b) => a - b)
  return quantileSorted(near, 0.5)
}
