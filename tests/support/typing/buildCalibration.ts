import { createHash } from 'node:crypto'
import { BANDS } from '../../../src/tables/bands.ts'
import type { Calibration, CalibrationSpectra } from '../../../src/tables/types.ts'
import type { TypingInput } from '../../../src/typing/typingInput.ts'
import { type Cell, type FittedMeans, type MeanModel, type TrainingStar, modelMeans } from './fitMeans.ts'
import { fitScatter } from './fitScatter.ts'
import { meanSpectra, normalisedBins } from './meanSpectra.ts'
import { COMMON_FWHM, type SharedStar, measuredInput, sharedStars } from './sharedStars.ts'

export const CALIBRATION_SETS = ['atlas', 'averages', 'pickles'] as const
/** A row of `pickles` shares its stars with the other two sets. */
const WEIGHTS: Readonly<Record<string, number>> = { atlas: 1, averages: 1, pickles: 0.5 }
const FIRST_TYPE = 2
const TYPES = 68
const CLASSES = [1, 2, 3, 4, 5]
const ZONE_STEP = 4
/** Weights of the classes in the prior: II and IV are rare among classified stars (common practice, no source). */
const CLASS_PRIOR = [1, 0.5, 1, 0.5, 1]
const DEGREES_OF_FREEDOM = 20

/** A published star with its features as the program measures them. */
export interface MeasuredStar {
  readonly star: SharedStar
  readonly input: TypingInput
  /** shape (f) [unit]; NaN where not measured. */
  readonly values: Float64Array
  /** shape (bins): flux over continuum at rest. */
  readonly bins: Float64Array
}

/** Reads and measures the published stars of some sets. */
export function measureStars(sets: readonly string[] = CALIBRATION_SETS): MeasuredStar[] {
  return sharedStars(sets).map((star) => {
    const { input, parts } = measuredInput(star)
    return {
      star,
      input,
      values: Float64Array.from(input.measurements, ({ ew }) => ew ?? NaN),
      bins: normalisedBins(parts.spectrum, parts.continuum, parts.frame),
    }
  })
}

/** Everything a calibration is built from, ready to leave stars out. */
export interface CalibrationModel {
  readonly stars: readonly MeasuredStar[]
  readonly training: readonly TrainingStar[]
  readonly means: MeanModel
  /** Published means of metal-weak stars, and single ones; they have no part in the expected values. */
  readonly weak: readonly MeasuredStar[]
  readonly spectra: CalibrationSpectra
}

/** The model of means on the stars with metals like the Sun's. */
export function calibrationModel(measured: readonly MeasuredStar[]): CalibrationModel {
  const stars = measured.filter(({ star }) => star.metals === 'solar' && !/E/.test(star.spectralType))
  const training = stars.map(({ star, values }) => ({
    type: star.typeNumber,
    luminosity: star.luminosity ?? 5,
    weight: WEIGHTS[star.set],
    values,
  }))
  const weak = measured.filter(({ star }) => star.metals === 'weak')
  return { stars, training, weak, means: modelMeans(training, gridCells()), spectra: meanSpectra(stars) }
}

function gridCells(): Cell[] {
  return Array.from({ length: TYPES * CLASSES.length }, (_, i) => ({
    type: FIRST_TYPE + Math.floor(i / CLASSES.length),
    luminosity: CLASSES[i % CLASSES.length],
  }))
}

/** Figures by zone that only cross-validation can give. */
export interface ZoneFigures {
  readonly tempering: number
  readonly fitQuantiles: readonly number[]
}

/** Types of the zones. */
export const ZONE_TYPES: readonly number[] = Array.from({ length: 17 }, (_, z) => 3 + ZONE_STEP * z)

/** Subclasses from a zone at which a star left out has no part in its scatter worth a new sum. */
const FAR = 20

/**
 * The calibration fitted on all stars of the model but those left out; zones far from all of these are taken from the
 * `whole` calibration where one is given.
 */
export function buildCalibration(
  model: CalibrationModel,
  left: readonly number[],
  figures: (zone: number) => ZoneFigures,
  whole?: Calibration,
): Calibration {
  const fitted = model.means.without(left)
  const widths = Float64Array.from(BANDS, ({ band, unit }) => (unit === 'mag' ? 1 : band[1] - band[0]))
  const inputs = inputsList(model.stars)
  const stars = model.training.map((star, i) => (left.includes(i) ? { ...star, weight: 0 } : star))
  return {
    digest: inputs.sha256.slice(0, 12),
    inputs: inputs.sets,
    inputsSha256: inputs.sha256,
    commonFwhm: COMMON_FWHM,
    features: BANDS.map(({ feature }) => feature),
    scale: Array.from(fitted.scale, (value) => Number(value.toPrecision(4))),
    firstType: FIRST_TYPE,
    types: TYPES,
    classes: CLASSES,
    mean: packedMeans(fitted),
    meanVariance: Array.from(fitted.variance, (value) => Number(value.toFixed(4))),
    zones: ZONE_TYPES.map((type, z) => {
      const known = whole?.zones[z]
      const isFar = left.every((i) => Math.abs(model.training[i].type - type) > FAR)
      const covariance =
        known && isFar
          ? known.covariance
          : packedTriangle(fitScatter(type, stars, fitted.residual, { widths }), fitted.scale)
      return { type, covariance, ...figures(z) }
    }),
    degreesOfFreedom: DEGREES_OF_FREEDOM,
    metalWeak: metalWeakParts(model.weak, fitted),
    prior: { classes: CLASS_PRIOR },
    spectra: model.spectra,
  }
}

/** Ridge that keeps a feature without leverage at zero, as a share of the summed squares of all features. */
const RIDGE = 0.05
const METAL_FREE: Cell = { type: 20, luminosity: 5 }

/** Least-squares part of the way to the metal-free star that each feature goes in metal-weak stars, in thousandths. */
function metalWeakParts(weak: readonly MeasuredStar[], { mean, scale }: FittedMeans): number[] {
  const f = scale.length
  const row = ({ type, luminosity }: Cell): number =>
    (Math.round(type - FIRST_TYPE) * CLASSES.length + Math.round(luminosity) - 1) * f
  return Array.from(scale, (unit, k) => {
    let top = 0
    let bottom = RIDGE * weak.length
    for (const { star, values } of weak) {
      const here = row({ type: star.typeNumber, luminosity: star.luminosity ?? 5 })
      if (!Number.isFinite(values[k])) continue
      const way = (mean[row(METAL_FREE) + k] - mean[here + k]) / unit
      top += (way * (values[k] - mean[here + k])) / unit
      bottom += way * way
    }
    return Math.round((1000 * top) / bottom)
  })
}

function packedMeans({ mean, scale }: FittedMeans): number[][] {
  const f = scale.length
  return Array.from({ length: mean.length / f }, (_, g) =>
    Array.from({ length: f }, (_unused, k) => Math.round((1000 * mean[g * f + k]) / Number(scale[k].toPrecision(4)))),
  )
}

function packedTriangle(covariance: Float64Array, scale: Float64Array): number[] {
  const f = scale.length
  const packed: number[] = []
  for (let i = 0; i < f; i++)
    for (let j = 0; j <= i; j++) packed.push(Math.round((1e6 * covariance[i * f + j]) / (scale[i] * scale[j])))
  return packed
}

/** One line a file: path, SHA-256 of its bytes, published type. */
export function inputsList(stars: readonly MeasuredStar[]): {
  readonly sha256: string
  readonly sets: Calibration['inputs']
} {
  const text = stars.map(({ star }) => `${star.file} ${star.sha256} ${star.spectralType}\n`).join('')
  const sets = [...new Set(stars.map(({ star }) => star.set))].map((set) => {
    const members = stars.filter(({ star }) => star.set === set)
    return { set, stars: members.length, reference: [...new Set(members.map(({ star }) => star.reference))].join('; ') }
  })
  return { sha256: createHash('sha256').update(text).digest('hex'), sets }
}

/**
 * Places of the stars to leave out when one is to be typed as unknown: itself and, since the rows of `pickles` hold some of
 * the atlas stars, those of like type and class there.
 */
export function leftOutFor(model: CalibrationModel, one: SharedStar): number[] {
  return model.stars.flatMap(({ star }, i) => {
    const isSame = star.file === one.file
    const isRelated =
      star.set === 'pickles' &&
      Math.abs(star.typeNumber - one.typeNumber) <= 0.75 &&
      Math.abs((star.luminosity ?? 5) - (one.luminosity ?? 5)) <= 0.6
    return isSame || isRelated ? [i] : []
  })
}
