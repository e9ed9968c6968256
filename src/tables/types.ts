/** Key into `tables/sources.ts`. */
export type SourceKey = string

/** Full citation of a figure's origin. */
export interface Source {
  /** Authors year, journal, volume, page; or the standard with its version. */
  readonly citation: string
  readonly doi?: string
  /** What was changed on the way here: converted, rounded, rows dropped. */
  readonly changed?: string
  /** True when the value was written down from memory and not seen in the source. */
  readonly fromMemory?: boolean
}

/** A number that says where it comes from. */
export interface Sourced<T = number> {
  readonly value: T
  readonly unit: string
  readonly uncertainty?: number
  readonly source: SourceKey
  readonly note?: string
}

/** A side-band feature: mean level of the band against the line through two side bands [Å, air, rest]. */
export interface BandWindow {
  /** Key used in tables and pages: letters and digits. */
  readonly feature: string
  readonly species: string
  /** Nominal rest wavelength [Å, air]. */
  readonly wavelength: number
  readonly band: readonly [number, number]
  readonly blue: readonly [number, number]
  readonly red: readonly [number, number]
  readonly unit: 'Å' | 'mag'
  readonly source: SourceKey
}

/** A spectral line with its laboratory facts [Å, air]. */
export interface SpectralLine {
  readonly feature: string
  readonly species: string
  readonly wavelength: number
  /** Transition in words, '' when no source is at hand. */
  readonly levels: string
  readonly source: SourceKey
  readonly fromMemory?: boolean
  /** Integrated over this window [Å, air, rest] when the line is measured. */
  readonly window?: readonly [number, number]
  /** Shape fitted to it; a Gaussian unless given. */
  readonly profile?: 'gaussian' | 'lorentzian' | 'voigt'
  /** Where it arises, when not in the star. */
  readonly origin?: 'interstellar' | 'telluric' | 'sky' | 'nebular'
  /** Typical strength among the lines of its species, 1 for the strongest. */
  readonly strength?: number
}

/** A limit that decides on a finding: its figure, unit, why this figure, and where it comes from. */
export interface Threshold {
  readonly value: number
  readonly unit: string
  readonly reason: string
  readonly source: SourceKey
}

/** Limits of the checks of spectra, frames and the night (`thresholds.ts`). */
export type ThresholdName =
  | 'snrMinimum'
  | 'snrUnusable'
  | 'nonfiniteDoubt'
  | 'nonfiniteFault'
  | 'coverageMinimum'
  | 'saturatedRun'
  | 'saturatedShare'
  | 'clippedFault'
  | 'deadRun'
  | 'deadShare'
  | 'spikeSigma'
  | 'spikeDepth'
  | 'spikeCount'
  | 'negativeShare'
  | 'skySigma'
  | 'skyResidual'
  | 'telluricDepth'
  | 'telluricResidual'
  | 'stepSigma'
  | 'stepHeight'
  | 'slopeBreak'
  | 'ringing'
  | 'zeroPointPixels'
  | 'zeroPointWidths'
  | 'zeroPointSigma'
  | 'resolutionRatio'
  | 'velocityMaximum'
  | 'emissionSigma'
  | 'fitProbability'
  | 'frameSaturatedShare'
  | 'lampOffLevel'
  | 'lampSaturatedShare'
  | 'arcLinesMinimum'
  | 'biasNoiseRatio'
  | 'biasStructure'
  | 'traceMinimum'
  | 'seeingMaximum'
  | 'positionTolerance'
  | 'nameRadius'
  | 'typeProbability'
  | 'typeProbabilityNote'
  | 'airmassTolerance'
  | 'airmassDoubt'
  | 'airmassHigh'
  | 'hourAngleTolerance'
  | 'sunAltitude'
  | 'moonDistance'
  | 'clockOverlap'
  | 'clockSlip'
  | 'nightSpan'
  | 'commonOffset'
  | 'jumpSigma'
  | 'zeroPointJump'
  | 'resolutionJump'
  | 'throughputJump'
  | 'biasJump'
  | 'seeingJump'
  | 'snrShortfall'

export type Thresholds = Readonly<Record<ThresholdName, Threshold>>

/** How many calibrations a science set-up wants, and how near in time (`coverRules.ts`). */
export type CoverRuleName = 'bias' | 'dark' | 'darkExposure' | 'flat' | 'arc' | 'arcGapHours' | 'standard' | 'flatLevel'

export type CoverRules = Readonly<Record<CoverRuleName, Threshold>>

/** Lines of one kind of star at rest, to be matched with a spectrum for its velocity [Å, air]. */
export interface LinePattern {
  /** 'hot', 'balmer', 'metal', 'molecular', with the letter of the type. */
  readonly name: string
  /** First and last type number the pattern is made for. */
  readonly types: readonly [number, number]
  /** Each line: wavelength [Å], equivalent width [Å], FWHM of its own before the instrument [Å]. */
  readonly lines: readonly (readonly [number, number, number])[]
  /** Mean depth of what the lines leave, in bins centred on first, first + step ... [Å]. */
  readonly bins?: { readonly first: number; readonly step: number; readonly depth: readonly number[] }
  /** Ranges [Å] in which the pattern is known; telluric bands and sky lines are left out. */
  readonly covered: readonly (readonly [number, number])[]
  readonly source: SourceKey
}

/** How a header card's value is to be read where it is not plain text or in the unit of the fact. */
export type CardForm =
  'degrees' | 'hours' | 'packed' | 'west' | 'minutes' | 'milliseconds' | 'km' | 'jd' | 'truncated jd' | 'inverse' | 'nm'

/** One keyword that observatories use for a fact. HIERARCH keywords stand without the leading word. */
export interface KeywordSynonym {
  readonly keyword: string
  /** Form of the value where it differs from the fact's own. */
  readonly form?: CardForm
  /** The card counts only where this logical one is true. */
  readonly when?: string
}

/** Facts of a header that have synonyms. */
export type FactName =
  | 'object'
  | 'ra'
  | 'dec'
  | 'equinox'
  | 'coordinateSystem'
  | 'dateObs'
  | 'timeObs'
  | 'dateEnd'
  | 'timeEnd'
  | 'mjdStart'
  | 'mjdMid'
  | 'mjdEnd'
  | 'exposure'
  | 'airmass'
  | 'airmassStart'
  | 'airmassEnd'
  | 'zenithDistance'
  | 'hourAngle'
  | 'longitude'
  | 'latitude'
  | 'height'
  | 'site'
  | 'telescope'
  | 'instrument'
  | 'detector'
  | 'observer'
  | 'frameWords'
  | 'lamp'
  | 'grating'
  | 'gratingTilt'
  | 'filter'
  | 'slit'
  | 'binning'
  | 'binningX'
  | 'binningY'
  | 'window'
  | 'gain'
  | 'readNoise'
  | 'saturation'
  | 'resolutionFwhm'
  | 'resolvingPower'
  | 'spectralType'
  | 'focus'
  | 'velocityFrame'
  | 'heliocentricFlag'
  | 'barycentricFlag'
  | 'velocityApplied'

/** The place of a telescope [degrees, east and north positive; m], by a pattern of its name. */
export interface KnownSite {
  readonly name: string
  /** Matches TELESCOP, OBSERVAT or ORIGIN, case ignored. */
  readonly pattern: string
  readonly longitude: number
  readonly latitude: number
  readonly height: number
}

/** The synonyms of every fact, the first that has a possible value wins; and where known telescopes stand. */
export interface KeywordTable {
  readonly facts: Readonly<Record<FactName, readonly KeywordSynonym[]>>
  readonly sites: readonly KnownSite[]
  readonly source: SourceKey
}
