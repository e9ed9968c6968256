import { fitContinuum } from '../continuum/fitContinuum.ts'
import type { Continuum } from '../continuum/types.ts'
import type { Finding } from '../findings/types.ts'
import { barycentricCorrection } from '../ephemeris/barycentricCorrection.ts'
import { continuumFindings } from '../features/continuumFindings.ts'
import { findLines } from '../features/findLines.ts'
import { measureLines } from '../features/measureLines.ts'
import type { Measurement } from '../features/types.ts'
import { checkSpectrum } from '../quality/checkSpectrum.ts'
import { countsPerSecond } from '../quality/countsPerSecond.ts'
import { qualityOf } from '../quality/qualityOf.ts'
import { setupName } from '../quality/setupName.ts'
import type { SpectrumOutcome } from '../quality/types.ts'
import { moderateFlux } from '../spectrum/moderateFlux.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { withinRange } from '../spectrum/withinRange.ts'
import { BANDS } from '../tables/bands.ts'
import { CALIBRATION } from '../tables/calibration.ts'
import { KIND_CRITERIA } from '../tables/criteria.ts'
import { ALL_LINES, MEASURED_LINES } from '../tables/lines.ts'
import { PATTERNS } from '../tables/patterns.ts'
import { expectedSpectrum } from '../typing/expected.ts'
import { recogniseKinds, withKinds } from '../typing/peculiar/recogniseKinds.ts'
import type { TypePosterior } from '../typing/types.ts'
import { typeSpectrum } from '../typing/typeSpectrum.ts'
import { type TypingInput, typingInput } from '../typing/typingInput.ts'
import { OXYGEN_BANDS, SKY_LINES, TELLURIC_BANDS } from '../tables/sky.ts'
import { checkMedium } from '../velocity/checkMedium.ts'
import { alignStar } from '../velocity/alignStar.ts'
import { measureResolution } from '../velocity/measureResolution.ts'
import { measureZeroPoint } from '../velocity/measureZeroPoint.ts'
import type { Resolution, RestFrame, ZeroPoint } from '../velocity/types.ts'
import { thinnedCurves } from './curves.ts'
import type { InForce } from './settingsInForce.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** How one file's spectra are analysed. */
export interface AnalyseOptions {
  readonly inForce: InForce
  /** Keep thinned curves for pages. */
  readonly wantsCurves: boolean
  /** Find every line without being told where to look. */
  readonly wantsAllLines: boolean
  /** Keep every sample with its continuum, to write the normalised spectrum. */
  readonly wantsNormalised?: boolean
}

/** Å: the range this program knows lines, bands and continua of; what lies beyond is listed but not measured. */
const OPTICAL = [3000, 11000] as const
const FEWEST_SAMPLES = 8

/** All that one spectrum says: continuum, velocity, lines, type, checks. */
export function analyseSpectrum(read: Spectrum, options: AnalyseOptions): SpectrumOutcome {
  const whole = moderateFlux(read)
  const optical = withinRange(whole, OPTICAL[0], OPTICAL[1])
  const isOptical = optical.wavelength.length >= FEWEST_SAMPLES
  const given = isOptical ? optical : whole
  const star = measureStar(given, options.inForce)
  const { spectrum, continuum, restFrame, resolution } = star
  const type = !isOptical
    ? untyped(`${optical.wavelength.length} samples lie between ${OPTICAL[0]} and ${OPTICAL[1]} Å`)
    : spectrum.role === 'star' || spectrum.role === 'unknown'
      ? withKinds(typeSpectrum(star.typing, CALIBRATION), recogniseKinds(star, KIND_CRITERIA, CALIBRATION))
      : untyped(`the header says this is no star but ${spectrum.role === 'lamp' ? 'a lamp' : spectrum.role}`)
  const lines = measureLines(spectrum, continuum, restFrame, { lines: MEASURED_LINES, resolution: resolution.fwhm })
  const measurements = [...star.typing.measurements, ...lines]
  const zeroPoint = measureZeroPoint(given, continuum, { telluric: OXYGEN_BANDS, skyLines: SKY_LINES })
  return outcomeOf(
    spectrum,
    { ...star, whole, given, measurements, type, ...(zeroPoint ? { zeroPoint } : {}) },
    options,
  )
}

/** What a spectrum is typed from, and what led there. */
export interface StarMeasures {
  /** On a scale made straight where need was. */
  readonly spectrum: Spectrum
  readonly continuum: Continuum
  readonly restFrame: RestFrame
  readonly resolution: Resolution
  readonly typing: TypingInput
  /** Of the wavelength scale. */
  readonly findings: readonly Finding[]
}

/**
 * Continuum, rest frame and side-band features of a spectrum: the same steps for a star and for the calibration. Where
 * the star's own lines show the wavelength scale bent, all that follows is measured on the scale made straight.
 */
export function measureStar(given: Spectrum, { maximumVelocity }: Pick<InForce, 'maximumVelocity'>): StarMeasures {
  const continuum = fitContinuum(given)
  const { spectrum, frame, findings } = alignStar(given, continuum, {
    patterns: PATTERNS,
    maxVelocity: maximumVelocity,
  })
  const resolution = measureResolution(spectrum, continuum, frame, { telluric: OXYGEN_BANDS, skyLines: SKY_LINES })
  const isMeasured = !resolution.isUpperLimit && resolution.how !== 'sampling (lower limit)'
  const typing = typingInput(spectrum, continuum, frame, {
    windows: BANDS,
    commonFwhm: CALIBRATION.commonFwhm,
    ...(isMeasured ? { resolution } : {}),
  })
  return { spectrum, continuum, restFrame: frame, resolution, typing, findings }
}

function untyped(reason: string): TypePosterior {
  return { state: 'none', reason, peculiar: [], evidence: [], ratios: [], featuresUsed: 0 }
}

interface Found extends StarMeasures {
  /** As the file has it, beyond the optical range too. */
  readonly whole: Spectrum
  /** Its optical range, on the file's own scale. */
  readonly given: Spectrum
  readonly zeroPoint?: ZeroPoint
  readonly measurements: readonly Measurement[]
  readonly type: TypePosterior
}

function outcomeOf(spectrum: Spectrum, found: Found, options: AnalyseOptions): SpectrumOutcome {
  const { continuum, restFrame, resolution, zeroPoint, measurements, type } = found
  const { inForce } = options
  const check = checkSpectrum(
    {
      spectrum: found.given,
      continuum,
      restFrame,
      resolution,
      ...(zeroPoint ? { zeroPoint } : {}),
      measurements,
      type,
    },
    inForce.thresholds,
  )
  const scale = [
    ...found.findings,
    ...continuumFindings(continuum),
    ...checkMedium(spectrum, restFrame, zeroPoint ? { zeroPoint } : {}),
  ]
  const rate = countsPerSecond(found.given)
  const { facts } = spectrum
  const { wavelength } = found.whole
  return {
    hdu: spectrum.hdu,
    ...(spectrum.row === undefined ? {} : { row: spectrum.row }),
    facts,
    setup: setupName(facts),
    wavelengthMin: wavelength[0],
    wavelengthMax: wavelength[wavelength.length - 1],
    samples: wavelength.length,
    medium: spectrum.medium,
    mediumHow: spectrum.mediumHow,
    fluxKind: spectrum.fluxKind,
    fluxUnit: spectrum.fluxUnit,
    uncertainty: spectrum.uncertainty,
    convention: spectrum.convention,
    snr: check.snr,
    resolution,
    ...(zeroPoint ? { zeroPoint } : {}),
    restFrame,
    ...barycentric(spectrum, restFrame),
    measurements,
    type,
    quality: qualityOf([...check.findings, ...scale]),
    findings: [...check.findings, ...scale],
    typing: found.typing,
    ...(rate === undefined ? {} : { countsPerSecond: rate }),
    ...(options.wantsAllLines
      ? {
          lines: findLines(spectrum, continuum, restFrame, {
            lines: ALL_LINES,
            telluric: TELLURIC_BANDS,
            resolution: resolution.fwhm,
          }),
        }
      : {}),
    ...(options.wantsNormalised ? { normalised: { spectrum, continuum } } : {}),
    ...(options.wantsCurves ? { curves: thinnedCurves(spectrum, continuum, restFrame, expectedOf(type)) } : {}),
  }
}

function expectedOf({ typeNumber, luminosityNumber }: TypePosterior): ReturnType<typeof expectedSpectrum> {
  return typeNumber === undefined ? undefined : expectedSpectrum(CALIBRATION, typeNumber, luminosityNumber ?? 5)
}

/** The correction applies only to wavelengths that still are as the telescope saw them. */
function barycentric(
  { facts, frame }: Spectrum,
  restFrame: RestFrame,
): Pick<SpectrumOutcome, 'barycentricCorrection' | 'barycentricVelocity'> {
  if (frame === 'barycentric' || frame === 'heliocentric')
    return restFrame.trusted ? { barycentricVelocity: restFrame.velocity } : {}
  const { mjdMid, ra, dec, site } = facts
  if (frame === 'star' || mjdMid === undefined || ra === undefined || dec === undefined || site === undefined) return {}
  const correction = barycentricCorrection({ mjd: mjdMid, ra, dec, site })
  if (!Number.isFinite(correction)) return {}
  const { velocity, trusted } = restFrame
  return {
    barycentricCorrection: correction,
    // Wright & Eastman 2014: the redshifts multiply, so the velocities do not simply add.
    ...(trusted ? { barycentricVelocity: velocity + correction + (velocity * correction) / SPEED_OF_LIGHT } : {}),
  }
}
