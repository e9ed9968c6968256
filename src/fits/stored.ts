import { float32Of, float64Of, int16Of, int32Of, int64Of } from './bigEndian.ts'

/** How stored values become physical ones: zero + scale x stored; a stored `empty` becomes NaN. */
export interface Scaling {
  readonly scale: number
  readonly zero: number | bigint
  readonly empty?: bigint | undefined
}

/** The letters of TFORMn whose elements are plain numbers. */
export type NumberLetter = 'B' | 'I' | 'J' | 'K' | 'E' | 'D'

/** Stored big-endian values of a letter as a typed array of the machine's order. */
export function storedValues(
  bytes: Uint8Array,
  letter: NumberLetter,
): Uint8Array | Int16Array | Int32Array | BigInt64Array | Float32Array | Float64Array {
  switch (letter) {
    case 'B':
      return bytes
    case 'I':
      return int16Of(bytes)
    case 'J':
      return int32Of(bytes)
    case 'K':
      return int64Of(bytes)
    case 'E':
      return float32Of(bytes)
    case 'D':
      return float64Of(bytes)
  }
}

/**
 * Physical values of stored big-endian bytes, 64-bit integers scaled exactly before they become numbers.
 * `empty` applies to integers only (FITS 4.0, section 4.4.2.5): floats carry NaN.
 */
export function physicalValues(bytes: Uint8Array, letter: NumberLetter, scaling: Scaling): Float64Array {
  const stored = storedValues(bytes, letter)
  if (stored instanceof BigInt64Array) return physicalOf64(stored, scaling)
  if (stored instanceof Float64Array && scaling.scale === 1 && scaling.zero === 0) return stored
  const out = new Float64Array(stored.length)
  const { scale } = scaling
  const zero = Number(scaling.zero)
  if (scale === 1 && zero === 0) out.set(stored)
  else if (scale === 1) for (let i = 0; i < out.length; i++) out[i] = zero + (stored[i] as number)
  else for (let i = 0; i < out.length; i++) out[i] = zero + scale * (stored[i] as number)
  if (scaling.empty !== undefined && letter !== 'E' && letter !== 'D') {
    const empty = Number(scaling.empty)
    for (let i = 0; i < out.length; i++) if (stored[i] === empty) out[i] = NaN
  }
  return out
}

function physicalOf64(stored: BigInt64Array, { scale, zero, empty }: Scaling): Float64Array {
  const out = new Float64Array(stored.length)
  const exact = typeof zero === 'bigint' ? zero : Number.isInteger(zero) ? BigInt(zero) : undefined
  for (let i = 0; i < out.length; i++) {
    const value = stored[i] as bigint
    if (value === empty) out[i] = NaN
    else out[i] = scale === 1 && exact !== undefined ? Number(value + exact) : Number(zero) + scale * Number(value)
  }
  return out
}
