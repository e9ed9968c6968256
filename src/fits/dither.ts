/** Length of the sequence, multiplier and modulus of its generator (FITS 4.0, appendix I; Park & Miller 1988). */
const LENGTH = 10_000
const MULTIPLIER = 16807
const MODULUS = 2147483647

/** Where in the sequence a tile starts is drawn from its first 500 numbers. */
const STARTS = 500

/** Stored integer that means exactly zero where zeros are kept apart (SUBTRACTIVE_DITHER_2). */
const EXACT_ZERO = -2147483646

let sequence: Float32Array | undefined

/** The 10,000 pseudo-random numbers in [0, 1) that dithering subtracts. */
export function ditherSequence(): Float32Array {
  if (sequence) return sequence
  const made = new Float32Array(LENGTH)
  let seed = 1
  for (let i = 0; i < LENGTH; i++) {
    seed = (MULTIPLIER * seed) % MODULUS
    made[i] = seed / MODULUS
  }
  sequence = made
  return made
}

/** How a tile of floating-point pixels was turned into integers. */
export interface Quantization {
  readonly scale: number
  readonly zero: number
  readonly method: 'NO_DITHER' | 'SUBTRACTIVE_DITHER_1' | 'SUBTRACTIVE_DITHER_2'
  /** ZDITHER0 and the number of the tile, counted from 0. */
  readonly seed: number
  readonly tile: number
  /** Stored integer that means undefined. */
  readonly blank: number | undefined
  /** True for ZBITPIX -32: the result is rounded to single precision, as it was before. */
  readonly single: boolean
}

/** Physical values of quantized pixels; NaN for blanks (FITS 4.0, section 10.2). */
export function dequantized(stored: Int32Array, how: Quantization): Float64Array {
  const { scale, zero, blank } = how
  const out = new Float64Array(stored.length)
  if (how.method === 'NO_DITHER') {
    for (let i = 0; i < out.length; i++) out[i] = stored[i] === blank ? NaN : zero + scale * (stored[i] as number)
  } else {
    const random = ditherSequence()
    const exactZeros = how.method === 'SUBTRACTIVE_DITHER_2'
    let start = (((how.tile + how.seed - 1) % LENGTH) + LENGTH) % LENGTH
    let next = Math.floor((random[start] as number) * STARTS)
    for (let i = 0; i < out.length; i++) {
      const value = stored[i] as number
      if (value === blank) out[i] = NaN
      else if (exactZeros && value === EXACT_ZERO) out[i] = 0
      else out[i] = (value - (random[next] as number) + 0.5) * scale + zero
      if (++next === LENGTH) {
        start = (start + 1) % LENGTH
        next = Math.floor((random[start] as number) * STARTS)
      }
    }
  }
  if (how.single) for (let i = 0; i < out.length; i++) out[i] = Math.fround(out[i] as number)
  return out
}
