import type { Note } from '../findings/types.ts'

/**
 * Units inside the program, everywhere: wavelength in Å, in air, increasing; equivalent width in Å, positive in
 * absorption; velocity in km/s, positive receding, cz; angles in degrees; times in MJD (UTC) and seconds.
 * A quantity that is not known is `undefined`, never 0; NaN may stand inside arrays only.
 */

export type Medium = 'air' | 'vacuum' | 'unknown'
/** declared by the header or column, guessed from the file's convention, or checked against lines. */
export type MediumHow = 'declared' | 'guessed' | 'checked'
export type UncertaintyKind = 'none' | 'sigma' | 'variance' | 'inverse variance' | 'relative'
export type VelocityFrame = 'topocentric' | 'geocentric' | 'heliocentric' | 'barycentric' | 'star' | 'unknown'
export type FluxKind = 'flux density' | 'counts' | 'normalised' | 'unknown'

/** Place of the telescope: degrees, east and north positive; metres. */
export interface Site {
  readonly longitude: number
  readonly latitude: number
  readonly height: number
  readonly name?: string
}

/** Facts of the header by one table of synonyms; impossible values are left out and noted. */
export interface HeaderFacts {
  readonly object?: string
  /** Degrees, ICRS or as `equinox` (a Julian year) says. */
  readonly ra?: number
  readonly dec?: number
  readonly equinox?: number
  /** As in the file (ISO 8601, UTC where the file says so). */
  readonly dateObs?: string
  readonly mjdStart?: number
  readonly mjdMid?: number
  readonly mjdEnd?: number
  /** Seconds. */
  readonly exposure?: number
  readonly airmass?: number
  /** Degrees, as the header gives it. */
  readonly hourAngle?: number
  readonly site?: Site
  readonly telescope?: string
  readonly instrument?: string
  readonly detector?: string
  readonly observer?: string
  /** The words of the header about what kind of frame this is (IMAGETYP, OBSTYPE, DPR TYPE ...), joined by '; '. */
  readonly frameWords?: string
  readonly lamp?: string
  readonly grating?: string
  readonly gratingTilt?: number
  readonly filter?: string
  /** As written: '1.0 arcsec', '1.5_10.0' */
  readonly slit?: string
  /** 'x,y' as '2x2'. */
  readonly binning?: string
  readonly window?: string
  readonly gain?: number
  readonly readNoise?: number
  /** Counts at which the detector saturates, as the header says. */
  readonly saturation?: number
  /** FWHM in Å or resolving power, as the header states it. */
  readonly resolutionFwhm?: number
  readonly resolvingPower?: number
  /** Type the header states (never used as prior). */
  readonly spectralType?: string
  /** Velocity the header says was already taken out, km/s. */
  readonly velocityApplied?: number
  readonly focus?: number
}

/** One spectrum of a file. Arrays share one length, the number of samples; none is ever changed in place. */
export interface Spectrum {
  /** shape (n) [Å, air], strictly increasing and finite. */
  readonly wavelength: Float64Array
  /** shape (n) [fluxUnit]; NaN where the file has no value. */
  readonly flux: Float64Array
  /** shape (n) [fluxUnit], 1 σ; NaN where not known; undefined when the file has no uncertainty. */
  readonly sigma?: Float64Array
  /** shape (n); 1 where the sample may be used, 0 where masked, non-finite or flagged by the file. */
  readonly usable: Uint8Array
  /** shape (n) of another component the file carries for the same samples: the sky that was taken out. */
  readonly sky?: Float64Array
  readonly hdu: number
  /** Table row, image row or aperture, from 0; undefined when there is but one. */
  readonly row?: number
  readonly medium: Medium
  readonly mediumHow: MediumHow
  readonly frame: VelocityFrame
  readonly fluxUnit: string
  readonly fluxKind: FluxKind
  readonly uncertainty: UncertaintyKind
  /** A plain description of how the file stores it: 'primary image, linear wavelength axis'. */
  readonly convention: string
  /** What this row holds. Only `star` is measured and typed. */
  readonly role: 'star' | 'sky' | 'lamp' | 'calibration' | 'unknown'
  readonly facts: HeaderFacts
  /** As the file has it, before any conversion, in increasing order of wavelength. */
  readonly asStored: {
    readonly samples: number
    readonly medium: Medium
    /** Å in the file's own medium. */
    readonly first: number
    readonly last: number
    readonly fluxFirst: number
    readonly fluxLast: number
    readonly nonfinite: number
  }
  /** Set when joined from orders or arms: the hdu and row of each. */
  readonly joinedFrom?: readonly { readonly hdu: number; readonly row?: number }[]
  readonly notes: readonly Note[]
}
