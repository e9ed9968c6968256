import { FormatError } from '../errors.ts'
import { textOf } from './text.ts'
import type { ByteSource } from './types.ts'

const LINE_FEED = 10
const CARRIAGE_RETURN = 13

/**
 * Returns when the source begins as a FITS file does (FITS 4.0, section 4.4.1.1); says what else it looks like
 * when it does not.
 *
 * @throws FormatError 'not-fits'
 */
export function requireFits(source: ByteSource): void {
  const head = source.read(0, Math.min(source.size, 512))
  const text = textOf(head)
  const begins = /^SIMPLE {0,3}=/i.test(text)
  const broken = head[80] === LINE_FEED || head[80] === CARRIAGE_RETURN
  if (begins && !broken) return
  const got = broken && begins ? 'cards that end in line breaks' : looksLike(head, text)
  throw new FormatError('not-fits', `file requires "SIMPLE  =" and cards of 80 characters at its start, got ${got}`, {
    byte: begins ? 80 : 0,
  })
}

function looksLike(head: Uint8Array, text: string): string {
  if (head.length === 0) return 'an empty file'
  if (/^\s+SIMPLE {0,3}=/.test(text)) return `${text.search(/S/)} bytes of white space before it`
  if (/^\s*<(!doctype html|html)/i.test(text)) return 'an HTML page'
  if (/^\s*<\?xml|^\s*<VOTABLE/i.test(text)) return 'an XML document'
  if (text.startsWith('XTENSION')) return 'an extension without a primary HDU'
  if (head[0] === 0x50 && head[1] === 0x4b) return 'a zip archive'
  if (text.startsWith('BZh')) return 'a bzip2 stream'
  if (text.startsWith('\u00fd7zXZ')) return 'an xz stream'
  if (text.startsWith('(\u00b5/\u00fd')) return 'a zstd stream'
  if (text.slice(257, 262) === 'ustar') return 'a tar archive'
  if (head.every((byte) => byte === 0)) return 'zero bytes'
  if (head.every((byte) => byte >= 32 || (byte >= 9 && byte <= 13))) return `text: ${quoted(text)}`
  return `bytes 0x${Buffer.from(head.subarray(0, 8)).toString('hex')}`
}

function quoted(text: string): string {
  const line = text.trim().split(/[\r\n]/, 1)[0] ?? ''
  return `"${line.slice(0, 40).replace(/[^\x20-\x7e]/g, '?')}"`
}
