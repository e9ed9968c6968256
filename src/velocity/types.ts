/** Radial velocity of the spectrum as measured (topocentric unless the file was corrected), cz. */
export interface RestFrame {
  /** km/s; 0 when not trusted, and then `trusted` is false and `reason` says why. */
  readonly velocity: number
  /** km/s, 1 σ; undefined when not trusted. */
  readonly error?: number
  readonly trusted: boolean
  readonly reason?: string
  readonly how: 'cross-correlation' | 'line centres' | 'none'
  /** Name of the line pattern that matched: 'hot', 'balmer', 'metal', 'molecular'. */
  readonly pattern?: string
  /** Tonry & Davis 1979 r. */
  readonly peakRatio?: number
  /** Height of the peak, 0 to 1. */
  readonly peak?: number
}

/** Width of the instrument's profile. From stellar lines alone it is an upper limit (rotation looks the same). */
export interface Resolution {
  /** Å, FWHM. */
  readonly fwhm: number
  readonly error?: number
  readonly how:
    'header' | 'sky lines' | 'telluric lines' | 'arc lines' | 'stellar lines (upper limit)' | 'sampling (lower limit)'
  readonly isUpperLimit: boolean
}

/** Zero point of the wavelength scale from lines that do not belong to the star. */
export interface ZeroPoint {
  /** km/s, positive when the file's wavelengths are too long. */
  readonly offset: number
  readonly error: number
  readonly from: string
}
