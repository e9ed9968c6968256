import type { Note } from '../findings/types.ts'
import type { Medium, MediumHow, Spectrum, UncertaintyKind } from './types.ts'

/** How one spectrum was understood, as `describe` prints it: wavelengths in Å in the file's own medium. */
export interface SpectrumDescription {
  readonly file: string
  readonly hdu: number
  readonly row?: number
  readonly object?: string
  readonly samples: number
  readonly medium: Medium
  readonly mediumHow: MediumHow
  readonly wavelength: { readonly first: number; readonly last: number }
  readonly flux: { readonly first: number | null; readonly last: number | null; readonly unit: string }
  readonly nonfinite: number
  readonly uncertainty: UncertaintyKind
  readonly convention: string
  readonly notes: readonly Note[]
}

/** The description of a spectrum; a flux without a finite value is null, an absent row or object is left out. */
export function describeSpectrum(file: string, spectrum: Spectrum): SpectrumDescription {
  const { asStored, facts, row } = spectrum
  const finite = (value: number): number | null => (Number.isFinite(value) ? value : null)
  return {
    file,
    hdu: spectrum.hdu,
    ...(row === undefined ? {} : { row }),
    ...(facts.object === undefined ? {} : { object: facts.object }),
    samples: asStored.samples,
    medium: asStored.medium,
    mediumHow: spectrum.mediumHow,
    wavelength: { first: asStored.first, last: asStored.last },
    flux: { first: finite(asStored.fluxFirst), last: finite(asStored.fluxLast), unit: spectrum.fluxUnit },
    nonfinite: asStored.nonfinite,
    uncertainty: spectrum.uncertainty,
    convention: spectrum.convention,
    notes: spectrum.notes.map(({ code, text }) => ({ code, text })),
  }
}
