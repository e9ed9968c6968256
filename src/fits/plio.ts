import { FormatError } from '../errors.ts'
import { int16Of } from './bigEndian.ts'

const HEADER_WORDS = 7

/**
 * The pixels of a PLIO_1 tile, a mask stored as runs (FITS 4.0, section 10.4.3): 16-bit words of a 4-bit
 * instruction and a 12-bit number that run along the pixels with one current value.
 *
 * @throws FormatError 'compression' on an instruction that is not known or runs past the tile
 */
export function decodePlio(code: Uint8Array, pixels: number): Int32Array {
  const words = int16Of(code)
  const out = new Int32Array(pixels)
  const old = (words[2] ?? 0) > 0
  const first = old ? 3 : (words[1] ?? HEADER_WORDS)
  const length = old ? (words[2] ?? 0) : ((words[4] ?? 0) << 15) + (words[3] ?? 0)
  let value = 1
  let at = 0
  for (let i = first; i < Math.min(length, words.length); i++) {
    const word = (words[i] as number) & 0xffff
    const number = word & 0xfff
    switch (word >> 12) {
      case 0: // a run of zeros
        at += number
        break
      case 1: // the value itself, with its high bits in the next word
        value = (((words[++i] ?? 0) & 0xffff) << 12) + number
        break
      case 2:
        value += number
        break
      case 3:
        value -= number
        break
      case 4: // a run of the value
        fill(out, at, number, value)
        at += number
        break
      case 5: // zeros, then one pixel of the value
        at += number
        fill(out, at - 1, 1, value)
        break
      case 6:
        value += number
        fill(out, at++, 1, value)
        break
      case 7:
        value -= number
        fill(out, at++, 1, value)
        break
      default:
        throw new FormatError('compression', `PLIO code requires instructions 0 to 7, got ${word >> 12}`)
    }
    if (at > pixels) throw new FormatError('compression', `PLIO code requires ${pixels} pixels, got a run to ${at}`)
  }
  return out
}

function fill(out: Int32Array, at: number, count: number, value: number): void {
  out.fill(value, Math.max(0, at), Math.max(0, at + count))
}
