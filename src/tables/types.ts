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
}
