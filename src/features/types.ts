export type MeasurementUnit = 'Å' | 'mag' | '1'
export type MeasurementStatus = 'measured' | 'blend' | 'absent' | 'uncovered' | 'masked'

/** One feature of one spectrum. Positive in absorption. Quantities that could not be measured are undefined. */
export interface Measurement {
  /** Key of the feature in its table, e.g. 'CaK', 'Hbeta', 'TiO7050'. */
  readonly feature: string
  readonly species: string
  /** Å, air, rest. */
  readonly wavelengthRest: number
  readonly unit: MeasurementUnit
  /** 'side bands', 'integration', 'gaussian', 'lorentzian', 'voigt', 'joint fit', 'ratio'. */
  readonly method: string
  readonly status: MeasurementStatus
  readonly reason?: string
  /** [unit] equivalent width, band strength or ratio. */
  readonly ew?: number
  readonly ewErrNoise?: number
  readonly ewErrContinuum?: number
  /** Both in quadrature. */
  readonly ewErr?: number
  /** [unit] three standard errors; for undetected features. */
  readonly limit3sigma?: number
  /** Å, air, rest frame of the star. */
  readonly centre?: number
  readonly centreErr?: number
  /** Å. */
  readonly fwhm?: number
  /** Fraction of the continuum, 0 to 1 in absorption. */
  readonly depth?: number
}

/** A line found without being told where to look (`measure --all-lines`). */
export interface FoundLine {
  /** Å, air; rest frame of the star for stellar lines, the observer's for the others. */
  readonly centre: number
  readonly centreErr: number
  readonly kind: 'absorption' | 'emission'
  /** Å, positive in absorption. */
  readonly ew: number
  readonly ewErr: number
  readonly significance: number
  readonly fwhm: number
  readonly origin: 'stellar' | 'interstellar' | 'telluric' | 'sky' | 'nebular' | 'unknown'
  /** Most plausible first. */
  readonly candidates: readonly LineCandidate[]
}

/** One possible identification of a found line. */
export interface LineCandidate {
  readonly species: string
  /** Å, air. */
  readonly wavelength: number
  /** Photon energy hc/λ, eV (λ in vacuum). */
  readonly photonEnergy: number
  /** 'n = 2 to 4', or term letters where a source is at hand; '' when not known. */
  readonly levels: string
  /** (centre − wavelength) / centreErr. */
  readonly offsetSigma: number
  /** 0 to 1, from the offset and from the strength that other lines of the species make plausible. */
  readonly plausibility: number
}
