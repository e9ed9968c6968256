import type { FormatError } from '../errors.ts'
import type { Note } from '../findings/types.ts'
import type { Medium } from './types.ts'

/** The wavelengths of an axis or column, as the file has them. */
export interface Axis {
  /** shape (n) [Å in the file's own medium], in file order; may fall, may hold NaN where a column has no value. */
  readonly wavelength: Float64Array
  /** The medium where the axis itself declares it. */
  readonly medium?: Medium
  /** Which card or column declares it. */
  readonly mediumFrom?: string
  /** 'linear wavelength axis', 'wavelengths in column WAVE' ... */
  readonly words: string
  readonly notes: readonly Note[]
}

/** Why there is no wavelength axis. `weight` grows with how much speaks for a spectrum all the same. */
export interface Refusal {
  readonly code: string
  readonly message: string
  readonly keyword?: string
  readonly hdu?: number
  readonly byte?: number
  readonly row?: number
  readonly weight: number
}

export type AxisAnswer = { readonly axis: Axis } | { readonly refusal: Refusal }

/** Wraps a refusal. */
export function refuse(code: string, message: string, weight: number, keyword?: string): { readonly refusal: Refusal } {
  return { refusal: { code, message, weight, ...(keyword === undefined ? {} : { keyword }) } }
}

/** The refusal that a fault of the file means. */
export function refusalOf(error: FormatError, hdu: number): Refusal {
  const { keyword, byte, row } = error.where
  return {
    code: error.code,
    message: error.message,
    weight: 10,
    hdu,
    ...(keyword === undefined ? {} : { keyword }),
    ...(byte === undefined ? {} : { byte }),
    ...(row === undefined ? {} : { row }),
  }
}

/** Wavelengths [Å] within which a spectrum is taken for one: 1 Å (X rays) to 1 cm, where radio begins. */
export const WAVELENGTH_LIMITS = { low: 1, high: 1e8 } as const

/** The refusal of wavelengths that no spectrum can have (none finite, not positive, constant, radio); else undefined. */
export function wavelengthFault(wavelength: Float64Array, what: string): { readonly refusal: Refusal } | undefined {
  let low = Infinity
  let high = -Infinity
  for (const value of wavelength) {
    if (!Number.isFinite(value)) continue
    if (value < low) low = value
    if (value > high) high = value
  }
  if (low > high) return refuse('no-finite-wavelength', `${what} requires at least one finite wavelength, got none`, 9)
  if (low === high && wavelength.length > 1)
    return refuse('constant-wavelength', `${what} requires wavelengths that differ, got ${low} Å throughout`, 8)
  if (low < WAVELENGTH_LIMITS.low || high > WAVELENGTH_LIMITS.high) {
    const rule = `${what} requires wavelengths from ${WAVELENGTH_LIMITS.low} to ${WAVELENGTH_LIMITS.high} Å`
    return refuse('wavelength-out-of-range', `${rule}, got ${figure(low)} to ${figure(high)} Å`, 6)
  }
  return undefined
}

/** A number as text with up to seven significant digits, for notes and messages. */
export function figure(value: number): string {
  return String(Number(value.toPrecision(7)))
}
