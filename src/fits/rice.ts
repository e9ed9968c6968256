import { FormatError } from '../errors.ts'

/** Widths of the Rice code for each pixel size (FITS 4.0, section 10.4.1, and Rice, Yeh & Miller 1993). */
const WIDTHS = { 1: { choice: 3, most: 6 }, 2: { choice: 4, most: 14 }, 4: { choice: 5, most: 25 } } as const

/** Bytes of a pixel that Rice-coded tiles come in. */
export type PixelSize = 1 | 2 | 4

/** How a Rice-coded tile was made. */
export interface RiceForm {
  readonly pixels: number
  readonly pixelSize: PixelSize
  /** Pixels that share one choice of split. */
  readonly blockSize: number
}

/**
 * The integers of a Rice-coded tile: the first as it is, then differences of neighbours in blocks that each choose how
 * many low bits are written plainly. Bytes are unsigned, wider pixels signed.
 *
 * @throws FormatError 'compression' when the code ends before the last pixel
 */
export function decodeRice(code: Uint8Array, { pixels, pixelSize, blockSize }: RiceForm): Int32Array {
  const { choice, most } = WIDTHS[pixelSize]
  const out = new Int32Array(pixels)
  if (pixels === 0) return out
  const bits = 8 * pixelSize
  const spare = 32 - bits
  const wrap = pixelSize === 1 ? (v: number): number => v & 0xff : (v: number): number => (v << spare) >> spare
  let last = 0
  for (let i = 0; i < pixelSize; i++) last = (last << 8) | (code[i] ?? 0)
  last = wrap(last)
  let at = pixelSize
  let buffer = 0
  let held = 0
  const end = code.length
  const read = (count: number): number => {
    let value = 0
    let need = count
    while (need > 0) {
      if (held === 0) {
        if (at >= end) throw early(pixels)
        buffer = code[at++] as number
        held = 8
      }
      const take = need < held ? need : held
      value = (value << take) | ((buffer >> (held - take)) & ((1 << take) - 1))
      held -= take
      need -= take
    }
    return value >>> 0
  }
  const zeros = (): number => {
    let count = 0
    for (;;) {
      const rest = held === 0 ? 0 : buffer & ((1 << held) - 1)
      if (rest !== 0) {
        const lead = Math.clz32(rest) - (32 - held)
        held -= lead + 1
        return count + lead
      }
      count += held
      if (at >= end) throw early(pixels)
      buffer = code[at++] as number
      held = 8
    }
  }
  for (let start = 0; start < pixels; start += blockSize) {
    const stop = Math.min(start + blockSize, pixels)
    const split = read(choice) - 1
    if (split < 0) {
      out.fill(last, start, stop)
      continue
    }
    for (let i = start; i < stop; i++) {
      const mapped = split === most ? read(bits) : ((zeros() << split) | read(split)) >>> 0
      const difference = (mapped & 1) === 1 ? ~(mapped >>> 1) : mapped >>> 1
      last = wrap(last + difference)
      out[i] = last
    }
  }
  return out
}

function early(pixels: number): FormatError {
  return new FormatError('compression', `Rice code requires ${pixels} pixels, got the end of the tile before them`)
}
