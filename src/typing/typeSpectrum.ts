import type { Calibration } from '../tables/types.ts'
import { classicalRatios } from './classicalRatios.ts'
import { type DecodedCalibration, decodeCalibration } from './decodedCalibration.ts'
import { type BestCell, evidenceOf } from './evidence.ts'
import { type Fit, fitOf } from './fit.ts'
import { interpolatedGrid } from './interpolatedGrid.ts'
import { type FeatureVector, type LikelihoodGrid, likelihoodGrid } from './likelihood.ts'
import { luminosityName } from './luminosityName.ts'
import { peculiarities } from './peculiarities.ts'
import { posteriorFigures } from './posterior.ts'
import { spoiltFeature, withoutFeature } from './spoiltFeature.ts'
import { typeName } from './typeName.ts'
import type { TypingInput } from './typingInput.ts'
import type { TypePosterior } from './types.ts'

/** Fewer features than this are nothing to type from. */
const FEWEST_FEATURES = 3
/** Fewer usable samples than this are nothing to type from. */
const FEWEST_SAMPLES = 40
/** A 68 % range beyond this many subclasses is `wide`. */
const WIDE = 5
/** A 95 % range beyond this many subclasses says nothing. */
const SAYS_NOTHING = 60
/** Share of ordinary stars that fit worse than the limit for `outside`. */
const OUTSIDE = 0.01

/**
 * The type of a spectrum as a posterior over type and luminosity class, flat in type and with the calibration's stated
 * weights over the classes; without figures and with a reason where there is nothing to type from (`none`).
 */
export function typeSpectrum(input: TypingInput, calibration: Calibration): TypePosterior {
  const decoded = decodeCalibration(calibration)
  const vector = featureVector(input, decoded)
  const none = (reason: string): TypePosterior => ({
    state: 'none',
    reason,
    peculiar: [],
    evidence: [],
    ratios: [],
    featuresUsed: vector.index.length,
  })
  if (input.samples < FEWEST_SAMPLES) return none(`${input.samples} usable samples, fewer than ${FEWEST_SAMPLES}`)
  if (vector.index.length < FEWEST_FEATURES)
    return none(`${vector.index.length} features could be measured, fewer than ${FEWEST_FEATURES}`)
  const { vector: kept, likelihood, best, fit } = fittedVector(decoded, calibration.degreesOfFreedom, vector)
  const grid = interpolatedGrid(decoded, likelihood.logLikelihood, calibration.prior.classes)
  const figures = posteriorFigures(grid)
  if (figures.high95 - figures.low95 > SAYS_NOTHING)
    return none(
      `the features tell no type: its 95 % range spans ${(figures.high95 - figures.low95).toFixed(0)} subclasses`,
    )
  const nearest = likelihood.distance[best.type * decoded.classes.length + best.luminosity]
  if (likelihood.featureless < nearest)
    return none(
      `no line stands out: a spectrum without features is nearer (squared distance ${likelihood.featureless.toFixed(1)}) than any type (${nearest.toFixed(1)})`,
    )
  const width68 = figures.high68 - figures.low68
  const isOutside = fit.probability < OUTSIDE
  const luminosityClass = luminosityName(figures)
  return {
    state: isOutside ? 'outside' : width68 > WIDE ? 'wide' : 'typed',
    ...(isOutside ? { reason: `no ordinary O to M star fits: ${fit.text}` } : {}),
    spectralType: typeName(figures.typeNumber),
    ...(luminosityClass === undefined ? {} : { luminosityClass }),
    typeNumber: figures.typeNumber,
    low68: figures.low68,
    high68: figures.high68,
    low95: figures.low95,
    high95: figures.high95,
    luminosityNumber: figures.luminosityNumber,
    probDwarf: figures.probDwarf,
    probGiant: figures.probGiant,
    probSupergiant: figures.probSupergiant,
    typeNumberErr: width68 / 2,
    peculiar: peculiarities({ input, calibration: decoded, vector: kept, likelihood, best }),
    grid,
    fitPull: fit.pull,
    fitProbability: fit.probability,
    evidence: evidenceOf(decoded, kept, best),
    ratios: classicalRatios(input.measurements, figures.typeNumber),
    featuresUsed: kept.index.length,
  }
}

interface FittedVector {
  readonly vector: FeatureVector
  readonly likelihood: LikelihoodGrid
  readonly best: BestCell
  readonly fit: Fit
}

/** A fit that fewer ordinary stars than this share reach is looked through for spoilt features. */
const SUSPECT = 0.1
/** No more features than this are left out as spoilt; a star that needs more is odd itself, and keeps them all. */
const MOST_SPOILT = 4

/** Likelihood and fit of the features, without the few that are spoilt where that makes the rest an ordinary star. */
function fittedVector(decoded: DecodedCalibration, degreesOfFreedom: number, all: FeatureVector): FittedVector {
  const whole = fittedOnce(decoded, degreesOfFreedom, all)
  let now = whole
  for (let left = 0; left <= MOST_SPOILT; left++) {
    if (now.fit.probability > SUSPECT) return now
    const spoilt = spoiltFeature(residualAt(decoded, now.vector, now.best), now.likelihood.factor)
    if (spoilt === undefined || now.vector.index.length <= FEWEST_FEATURES) return now
    if (left < MOST_SPOILT) now = fittedOnce(decoded, degreesOfFreedom, withoutFeature(now.vector, spoilt))
  }
  return whole
}

function fittedOnce(decoded: DecodedCalibration, degreesOfFreedom: number, vector: FeatureVector): FittedVector {
  const likelihood = likelihoodGrid(decoded, degreesOfFreedom, vector)
  const best = bestCell(decoded, likelihood.distance)
  const nearest = likelihood.distance[best.type * decoded.classes.length + best.luminosity]
  return { vector, likelihood, best, fit: fitOf(decoded, vector, best, nearest) }
}

function residualAt(decoded: DecodedCalibration, { index, value }: FeatureVector, best: BestCell): Float64Array {
  const row = (best.type * decoded.classes.length + best.luminosity) * decoded.features.length
  return value.map((measured, a) => measured - decoded.mean[row + index[a]])
}

/** The measurements that the calibration knows, by its order. */
export function featureVector(input: TypingInput, { features }: DecodedCalibration): FeatureVector {
  const byName = new Map(input.measurements.map((one) => [one.feature, one]))
  const index: number[] = []
  const value: number[] = []
  const error: number[] = []
  features.forEach((name, k) => {
    const one = byName.get(name)
    if (one?.ew === undefined || one.ewErr === undefined || !Number.isFinite(one.ew) || !Number.isFinite(one.ewErr))
      return
    index.push(k)
    value.push(one.ew)
    error.push(one.ewErr)
  })
  return { index: Int32Array.from(index), value: Float64Array.from(value), error: Float64Array.from(error) }
}

function bestCell({ classes }: DecodedCalibration, distance: Float64Array): BestCell {
  let best = -1
  for (let at = 0; at < distance.length; at++) if (best < 0 || distance[at] < distance[best]) best = at
  return { type: Math.floor(best / classes.length), luminosity: best % classes.length }
}
