import { bigEndianOf } from './bigEndian.ts'
import type { Bitpix } from './types.ts'
import type { FitsCardInput } from './writeCard.ts'

/** An image to write, primary or extension. Without dimensions it has no data. */
export interface FitsImageInput {
  readonly kind: 'image'
  readonly bitpix: Bitpix
  /** Fastest axis first. */
  readonly dimensions: readonly number[]
  /** Physical values, as many as the dimensions say; NaN of an integer image becomes `blank`. */
  readonly values?: ArrayLike<number>
  readonly scale?: number
  readonly zero?: number
  readonly blank?: number
  readonly name?: string
  readonly cards?: readonly FitsCardInput[]
}

const LIMITS: Readonly<Record<8 | 16 | 32 | 64, readonly [number, number]>> = {
  8: [0, 255],
  16: [-32768, 32767],
  32: [-2147483648, 2147483647],
  64: [Number.MIN_SAFE_INTEGER, Number.MAX_SAFE_INTEGER],
}

/** The cards that describe an image after SIMPLE or XTENSION. */
export function imageCards(image: FitsImageInput, primary: boolean): readonly FitsCardInput[] {
  const { bitpix, dimensions, scale = 1, zero = 0, blank, name } = image
  return [
    { keyword: 'BITPIX', value: bitpix, comment: 'bits a value, negative for floating point' },
    { keyword: 'NAXIS', value: dimensions.length, comment: 'number of axes' },
    ...dimensions.map((value, i) => ({ keyword: `NAXIS${i + 1}`, value, comment: `length of axis ${i + 1}` })),
    ...(primary
      ? [{ keyword: 'EXTEND', value: true, comment: 'extensions may follow' }]
      : [
          { keyword: 'PCOUNT', value: 0, comment: 'no parameters' },
          { keyword: 'GCOUNT', value: 1, comment: 'one array' },
        ]),
    ...(name === undefined ? [] : [{ keyword: 'EXTNAME', value: name, comment: 'name of this HDU' }]),
    ...(scale === 1 && zero === 0
      ? []
      : [
          { keyword: 'BSCALE', value: scale, comment: 'value = BZERO + BSCALE x stored' },
          { keyword: 'BZERO', value: zero, comment: 'value = BZERO + BSCALE x stored' },
        ]),
    ...(blank === undefined ? [] : [{ keyword: 'BLANK', value: blank, comment: 'stored value of undefined pixels' }]),
  ]
}

/**
 * The stored bytes of an image.
 *
 * @throws RangeError when the count or a value does not fit
 */
export function imageBytes(image: FitsImageInput): Uint8Array {
  const { bitpix, dimensions, values, scale = 1, zero = 0, blank } = image
  const count = dimensions.length === 0 ? 0 : dimensions.reduce((product, n) => product * n, 1)
  if ((values?.length ?? 0) !== count) {
    throw new RangeError(`image requires ${count} values, got ${values?.length ?? 0}`)
  }
  if (!values || count === 0) return new Uint8Array(0)
  const identity = scale === 1 && zero === 0
  const stored = identity ? values : Float64Array.from(values, (value) => (value - zero) / scale)
  if (bitpix === -32) return bigEndianOf(Float32Array.from(stored))
  if (bitpix === -64) return bigEndianOf(Float64Array.from(stored))
  return integerBytes(stored, bitpix, blank)
}

/** Integers of a width in big-endian order; NaN becomes `blank`. Throws RangeError when a value does not fit. */
export function integerBytes(values: ArrayLike<number>, bits: 8 | 16 | 32 | 64, blank: number | undefined): Uint8Array {
  const [low, high] = LIMITS[bits]
  const whole = new Float64Array(values.length)
  for (let i = 0; i < whole.length; i++) {
    const value = values[i] as number
    const rounded = Number.isNaN(value) ? blank : Math.round(value)
    if (rounded === undefined || !(rounded >= low && rounded <= high)) {
      throw new RangeError(`integer of ${bits} bits requires a value from ${low} to ${high}, got ${value}`)
    }
    whole[i] = rounded
  }
  if (bits === 8) return Uint8Array.from(whole)
  if (bits === 16) return bigEndianOf(Int16Array.from(whole))
  if (bits === 32) return bigEndianOf(Int32Array.from(whole))
  return bigEndianOf(BigInt64Array.from(whole, BigInt))
}
