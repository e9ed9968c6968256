import type { Axis } from './axis.ts'
import type { Headers } from './cards.ts'
import type { WavelengthLabel } from './medium.ts'
import type { Note } from '../findings/types.ts'
import type { HeaderFacts, Spectrum, UncertaintyKind } from './types.ts'

/** Values of one plane that go with a flux, and what they are. */
export interface UncertaintyPlane {
  readonly values: Float64Array
  readonly kind: UncertaintyKind
}

/** Flags of one plane: `bad` says which values mark a bad sample. */
export interface FlagPlane {
  readonly values: Float64Array
  readonly isBad: (value: number) => boolean
  readonly words: string
}

/** A spectrum as the file has it, in file order and units, before any conversion. Arrays share one length. */
export interface FoundSpectrum {
  readonly hdu: number
  readonly row?: number
  readonly axis: Axis
  readonly label?: WavelengthLabel
  readonly flux: Float64Array
  readonly fluxUnit: string
  readonly isNormalised?: boolean
  readonly uncertainty?: UncertaintyPlane
  readonly flags?: FlagPlane
  readonly sky?: Float64Array
  readonly headers: Headers
  readonly convention: string
  /** What the row itself says of the object. */
  readonly own?: Pick<HeaderFacts, 'object' | 'ra' | 'dec'>
  readonly role?: Spectrum['role']
  readonly notes: readonly Note[]
}
