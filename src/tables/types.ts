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

/** Means and scatter of the features over type and luminosity class, fitted on published stars (`calibration.ts`). */
export interface Calibration {
  /** Names this calibration: first 12 hex digits of the SHA-256 of its inputs' list. */
  readonly digest: string
  /** What it was fitted on. */
  readonly inputs: readonly {
    readonly set: string
    readonly stars: number
    readonly reference: string
  }[]
  /** SHA-256 of the list of inputs: one line a file, its path, its own SHA-256 and its published type. */
  readonly inputsSha256: string
  /** Å, FWHM all spectra were brought to. */
  readonly commonFwhm: number
  /** Keys of the side-band features, in the order of all arrays below; f is their number. */
  readonly features: readonly string[]
  /** shape (f): figures of `mean` and `scatter` are in thousandths of this [unit of the feature]. */
  readonly scale: readonly number[]
  /** Type numbers of the grid, increasing by one; t is their number. */
  readonly firstType: number
  readonly types: number
  /** Luminosity numbers of the grid; c is their number. */
  readonly classes: readonly number[]
  /** shape (t × c, f): expected value [scale / 1000]. */
  readonly mean: readonly (readonly number[])[]
  /** shape (t × c): variance of the expected values for want of stars, in units of scale². */
  readonly meanVariance: readonly number[]
  /** Scatter between stars and telescopes, learned from residuals, by zones of type. */
  readonly zones: readonly CalibrationZone[]
  /** Degrees of freedom of the heavy-tailed likelihood. */
  readonly degreesOfFreedom: number
  /**
   * shape (f): part of the way to a star without metals (the expected values at A0 V) that a feature goes in the published
   * means of metal-weak stars, in thousandths.
   */
  readonly metalWeak: readonly number[]
  readonly prior: {
    /** shape (c): weight of the luminosity classes; types are flat over those in use. */
    readonly classes: readonly number[]
  }
  /** Mean normalised spectra by type, in bins of equal width. */
  readonly spectra: CalibrationSpectra
}

/** Scatter of the features about their expected values for stars near one type. */
export interface CalibrationZone {
  readonly type: number
  /** shape (f × (f + 1) / 2): lower triangle of the covariance, row by row, in units of (scale / 1000)². */
  readonly covariance: readonly number[]
  /** Exponent on the likelihood, so that the ranges hold what they should; by cross-validation. */
  readonly tempering: number
  /** Mahalanobis distance squared per feature that 50, 90, 98 and 99.5 % of ordinary stars stay below. */
  readonly fitQuantiles: readonly number[]
}

/** Mean normalised spectra of a type, averaged over three or more stars in bins of 8 Å or more. */
export interface CalibrationSpectra {
  /** Å, air, rest: middle of the first bin and width of a bin. */
  readonly first: number
  readonly step: number
  /** One for each type and class that has enough stars. Values in thousandths of the continuum; −1 where not known. */
  readonly rows: readonly {
    readonly type: number
    readonly luminosity: number
    readonly stars: number
    readonly values: readonly number[]
  }[]
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
export type CardForm = 'packed' | 'west' | 'minutes' | 'milliseconds' | 'jd' | 'tai seconds'

/** One keyword that observatories use for a fact. HIERARCH keywords stand without the leading word. */
export interface KeywordSynonym {
  readonly keyword: string
  /** Form of the value where it differs from the fact's own. */
  readonly form?: CardForm
  /** The card counts only where this one is true or says 'on'. */
  readonly when?: string
  /** 'counts' where the card counts as well when the one of `when` is absent. */
  readonly whenAbsent?: 'counts'
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

/** An emission line of the night sky [Å, air]. */
export interface SkyLine {
  readonly wavelength: number
  readonly species: string
  /** Other sky lines lie so near that a spectrograph of a few Å sees one line. */
  readonly isBlend: boolean
  readonly source: SourceKey
}

/** An absorption band of the Earth's air [Å, air]. */
export interface TelluricBand {
  readonly species: string
  readonly name: string
  readonly range: readonly [number, number]
  readonly source: SourceKey
}

/** A feature between two side bands [Å, air, rest], and its middle. */
export interface FeatureWindows {
  readonly wavelength: number
  readonly band: readonly [number, number]
  readonly blue: readonly [number, number]
  readonly red: readonly [number, number]
}

/** Windows that kinds of objects are recognised by; 'wide' ones hold the wings of pressure-broadened lines. */
export type KindWindow =
  | 'HalphaWide'
  | 'HbetaWide'
  | 'HgammaWide'
  | 'Halpha'
  | 'HalphaCore'
  | 'Hbeta'
  | 'HbetaCore'
  | 'Hgamma'
  | 'HgammaCore'
  | 'HdeltaCore'
  | 'H8'
  | 'H9'
  | 'H10'
  | 'H11'
  | 'CaK'
  | 'HeI4026'
  | 'HeI4471'
  | 'HeI4471Wide'
  | 'HeI5876'
  | 'HeI5876Wide'
  | 'HeII4542'
  | 'HeII4686'
  | 'HeII4686Wide'
  | 'HeII5411'
  | 'CaKGalaxy'
  | 'CaHGalaxy'
  | 'G4300'
  | 'Mgb'
  | 'NaD'
  | 'TiO6230'
  | 'KI7680'
  | 'OII3727'
  | 'OIII4959'
  | 'OIII5007'
  | 'HalphaNII'
  | 'SII6725'

/** Limits that kinds of objects are recognised by (`criteria.ts`). */
export type KindLimit =
  | 'hotMagnesium'
  | 'hotCalcium'
  | 'hotTitanium'
  | 'compactSigma'
  | 'seriesHydrogen'
  | 'seriesEnd'
  | 'seriesFirst'
  | 'seriesWidth'
  | 'seriesFaint'
  | 'seriesFaintHydrogen'
  | 'seriesFaintFwhm'
  | 'seriesFaintCoarse'
  | 'seriesEndFwhm'
  | 'winged'
  | 'wingedHydrogen'
  | 'strongHydrogen'
  | 'ionisedHelium'
  | 'ionisedHeliumWings'
  | 'neutralHelium'
  | 'neutralHeliumWide'
  | 'heliumNoHydrogen'
  | 'brownRise'
  | 'brownPotassium'
  | 'brownSteep'
  | 'emissionHalpha'
  | 'emissionHbeta'
  | 'emissionCool'
  | 'emissionCoolBlue'
  | 'emissionPair'
  | 'emissionSigma'
  | 'forbiddenSigma'
  | 'forbiddenStrength'
  | 'forbiddenRatio'
  | 'forbiddenLines'
  | 'gasCool'
  | 'nebularHbeta'
  | 'nebularOxygen'
  | 'redshiftMaximum'
  | 'galaxyTitanium'
  | 'galaxyTitaniumMost'
  | 'galaxyTitaniumAlone'
  | 'galaxyGamma'
  | 'galaxyBreak'
  | 'galaxyCool'
  | 'galaxyLine'
  | 'galaxyLeastBreak'
  | 'galaxyMagnesium'
  | 'fastestStar'
  | 'galaxyCH'
  | 'galaxyHydrogen'
  | 'carbonStep'
  | 'carbonSigma'
  | 'carbonTitanium'
  | 'compositeHydrogen'
  | 'compositeMagnesium'
  | 'compositeTitanium'
  | 'featurelessLine'
  | 'blueColour'
  | 'metallicSpread'
  | 'metallicSigma'
  | 'metallicMisfit'

/** All that kinds of objects are recognised by, with the citation of each word's criterion. */
export interface KindCriteria {
  readonly windows: Readonly<Record<KindWindow, FeatureWindows>>
  readonly limits: Readonly<Record<KindLimit, Threshold>>
  /** By the word as it stands in `peculiar`. */
  readonly sources: Readonly<Record<string, string>>
}
