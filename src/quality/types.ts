import type { Continuum } from '../continuum/types.ts'
import type { Finding } from '../findings/types.ts'
import type { FoundLine, Measurement } from '../features/types.ts'
import type { FluxKind, HeaderFacts, Medium, MediumHow, Spectrum, UncertaintyKind } from '../spectrum/types.ts'
import type { TypePosterior } from '../typing/types.ts'
import type { TypingInput } from '../typing/typingInput.ts'
import type { Resolution, RestFrame, ZeroPoint } from '../velocity/types.ts'

export type Quality = 'usable' | 'doubtful' | 'unusable'

/** S/N per Å about a wavelength; undefined when not covered. */
export interface SignalToNoise {
  readonly blue?: number
  readonly visual?: number
  readonly red?: number
}

/** Thinned curves for pages, shape (m), m ≤ 2,500; observed frame. Kept only when pages are wanted. */
export interface Curves {
  readonly wavelength: Float64Array
  readonly flux: Float32Array
  readonly continuum: Float32Array
  /** Flux ÷ continuum on the rest wavelength. */
  readonly restWavelength: Float64Array
  readonly normalised: Float32Array
  /** Expected normalised spectrum of the best type at restWavelength, where the calibration has one. */
  readonly expected?: Float32Array
}

/** All that is known of one spectrum from its own file. Plain data: it crosses from worker to main thread. */
export interface SpectrumOutcome {
  readonly hdu: number
  readonly row?: number
  readonly facts: HeaderFacts
  /** The set-up by its values: '600 l/mm, slit 1.5, 2x2'. */
  readonly setup: string
  readonly wavelengthMin: number
  readonly wavelengthMax: number
  readonly samples: number
  readonly medium: Medium
  readonly mediumHow: MediumHow
  readonly fluxKind: FluxKind
  readonly fluxUnit: string
  readonly uncertainty: UncertaintyKind
  readonly convention: string
  readonly snr: SignalToNoise
  readonly resolution?: Resolution
  readonly restFrame: RestFrame
  readonly zeroPoint?: ZeroPoint
  /** km/s to add to the topocentric velocity (first order); undefined without time, place or direction, or when already applied. */
  readonly barycentricCorrection?: number
  readonly barycentricVelocity?: number
  readonly measurements: readonly Measurement[]
  readonly lines?: readonly FoundLine[]
  readonly type: TypePosterior
  /** What the type was told from, so that several spectra of one star can be typed together. */
  readonly typing?: TypingInput
  readonly quality: Quality
  readonly findings: readonly Finding[]
  /** Median flux in the visual band per second, for throughput. */
  readonly countsPerSecond?: number
  readonly curves?: Curves
  /** All samples with their continuum, on the scale that was measured; kept only when they are to be written. */
  readonly normalised?: { readonly spectrum: Spectrum; readonly continuum: Continuum }
}

export type FrameKind =
  'bias' | 'dark' | 'flat' | 'skyflat' | 'arc' | 'standard' | 'science' | 'acquisition' | 'focus' | 'sky' | 'unknown'

/** Pixel statistics of a 2-D frame, in stored counts after scaling. */
export interface FrameStatistics {
  readonly width: number
  readonly height: number
  readonly median: number
  readonly p99: number
  readonly max: number
  /** Robust standard deviation of neighbouring differences ÷ √2: read noise in a bias. */
  readonly noise: number
  readonly saturatedFraction: number
  readonly nonfinite: number
  /** Peaks along the dispersion in the mean profile; undefined for kinds without. */
  readonly arcLines?: number
  /** Position and FWHM [pixels] across the dispersion, and peak [counts] of the brightest trace. */
  readonly trace?: { readonly position: number; readonly fwhm: number; readonly peak: number }
  readonly dispersionAxis?: 1 | 2
  /** Height of the strongest line of the mean profile along the dispersion [counts]. */
  readonly arcPeak?: number
  /** Peak of the trace over the light beside it along the slit. */
  readonly traceContrast?: number
  /** Counts taken as the level of saturation: of the header, else the end of the range of 16-bit data. */
  readonly saturation?: number
}

/** One row of `frames`. */
export interface FrameFacts {
  readonly kind: FrameKind
  readonly kindHow: 'header' | 'content' | 'list'
  readonly setup: string
  readonly facts: HeaderFacts
  readonly statistics?: FrameStatistics
  readonly quality: Quality
  readonly findings: readonly Finding[]
}

/** Plain form of an error, for tables and messages. */
export interface ErrorFacts {
  readonly code: string
  readonly message: string
  readonly hdu?: number
  readonly row?: number
  readonly keyword?: string
  readonly byte?: number
}

/** The result for one file; depends on its content, the settings and the calibration only. */
export interface Outcome {
  /** As given, without a leading './'. */
  readonly file: string
  readonly size: number
  /** Hex; of the file's bytes as they lie on disk. */
  readonly sha256?: string
  readonly frame?: FrameFacts
  readonly spectra: readonly SpectrumOutcome[]
  /** Why the file gave no spectrum, if it gave none and is no 2-D frame. */
  readonly error?: ErrorFacts
  readonly notes: readonly Finding[]
}
