import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import type { ByteSource, Hdu } from '../../src/fits/types.ts'

/** How the pixels of a made frame are stored. */
export type Stored = 'unsigned 16' | 'signed 16' | 'scaled 16' | 'signed 32' | 'float 32' | 'float 64'

const BITPIX: Readonly<Record<Stored, number>> = {
  'unsigned 16': 16,
  'signed 16': 16,
  'scaled 16': 16,
  'signed 32': 32,
  'float 32': -32,
  'float 64': -64,
}

function card(keyword: string, value: string | number | boolean): string {
  const text =
    typeof value === 'string' ? `'${value.padEnd(8)}'` : value === true ? 'T' : value === false ? 'F' : String(value)
  return `${keyword.padEnd(8)}= ${typeof value === 'string' ? text : text.padStart(20)}`.padEnd(80)
}

/** A FITS image of the given pixels (row after row) in memory, built by the standard's rules, and its only HDU. */
export function madeFrame(
  pixels: ArrayLike<number>,
  width: number,
  stored: Stored,
): { readonly source: ByteSource; readonly hdu: Hdu } {
  const height = pixels.length / width
  const [scale, zero] = stored === 'unsigned 16' ? [1, 32768] : stored === 'scaled 16' ? [0.25, 100] : [1, 0]
  const cards = [
    card('SIMPLE', true),
    card('BITPIX', BITPIX[stored]),
    card('NAXIS', 2),
    card('NAXIS1', width),
    card('NAXIS2', height),
    ...(scale === 1 ? [] : [card('BSCALE', scale)]),
    ...(zero === 0 ? [] : [card('BZERO', zero)]),
    'END'.padEnd(80),
  ]
  const head = Buffer.from(cards.join('').padEnd(Math.ceil(cards.length / 36) * 2880))
  const size = Math.abs(BITPIX[stored]) / 8
  const data = Buffer.alloc(Math.ceil((pixels.length * size) / 2880) * 2880)
  for (let i = 0; i < pixels.length; i++) {
    const value = (pixels[i] - zero) / scale
    if (stored.endsWith('16')) data.writeInt16BE(Math.round(value), i * 2)
    else if (stored === 'signed 32') data.writeInt32BE(Math.round(value), i * 4)
    else if (stored === 'float 32') data.writeFloatBE(value, i * 4)
    else data.writeDoubleBE(value, i * 8)
  }
  const source = memorySource(Buffer.concat([head, data]))
  return { source, hdu: openFits(source).hdus[0] }
}
