import { textValue } from './header.ts'
import type { ByteSource, Hdu } from './types.ts'
import { BLOCK_SIZE } from './card.ts'
import { FormatError } from '../errors.ts'

/** What a checksum keyword of an HDU says against what its bytes give. */
export interface ChecksumVerdict {
  readonly state: 'right' | 'wrong' | 'absent'
  /** As written in the header. */
  readonly written?: string
  /** The sum of the bytes: decimal, of the data for DATASUM; of the whole HDU for CHECKSUM (right when all bits are 1). */
  readonly found: string
}

/** Verdicts on both checksums of an HDU. */
export interface ChecksumReport {
  readonly datasum: ChecksumVerdict
  readonly checksum: ChecksumVerdict
}

const ALL_ONES = 0xffffffff
const STEP = 1 << 20

/**
 * The 32-bit ones'-complement sum of big-endian words with end-around carry (FITS 4.0, appendix J). Bytes that do not
 * fill a last word count as if zeros followed.
 *
 * @param before  sum of the bytes that came before, a whole number of words
 */
export function onesComplementSum(bytes: Uint8Array, before = 0): number {
  let high = before >>> 16
  let low = before & 0xffff
  const whole = bytes.length - (bytes.length % 4)
  let i = 0
  while (i < whole) {
    // 2^16 words keep both halves below 2^32 + 2^16, exact in a double
    const stop = Math.min(whole, i + (1 << 18))
    for (; i < stop; i += 4) {
      high += ((bytes[i] as number) << 8) | (bytes[i + 1] as number)
      low += ((bytes[i + 2] as number) << 8) | (bytes[i + 3] as number)
    }
    ;[high, low] = carried(high, low)
  }
  if (whole < bytes.length) {
    high += ((bytes[i] ?? 0) << 8) | (bytes[i + 1] ?? 0)
    low += (bytes[i + 2] ?? 0) << 8
    ;[high, low] = carried(high, low)
  }
  return high * 0x10000 + low
}

/** Carries out of the low half go into the high half, those out of the high half into the low half. */
function carried(high: number, low: number): [number, number] {
  let h = high
  let l = low
  while (h > 0xffff || l > 0xffff) {
    const upper = Math.floor(h / 0x10000)
    const lower = Math.floor(l / 0x10000)
    h = (h % 0x10000) + lower
    l = (l % 0x10000) + upper
  }
  return [h, l]
}

const EXCLUDED = new Set([0x3a, 0x3b, 0x3c, 0x3d, 0x3e, 0x3f, 0x40, 0x5b, 0x5c, 0x5d, 0x5e, 0x5f, 0x60])
const ZERO = 0x30

/**
 * The 16 characters that stand for a checksum in ASCII: each byte is split over four letters or digits, none of them
 * punctuation, and the string is turned right by one place (FITS 4.0, appendix J).
 *
 * @param sum  32-bit sum of the HDU while CHECKSUM holds sixteen zeros
 */
export function encodedChecksum(sum: number): string {
  const value = ALL_ONES - sum
  const characters = new Array<number>(16)
  for (let byte = 0; byte < 4; byte++) {
    const part = Math.floor(value / 2 ** (24 - 8 * byte)) & 0xff
    const quarters = [0, 1, 2, 3].map((i) => Math.floor(part / 4) + ZERO + (i === 0 ? part % 4 : 0))
    for (let pair = 0; pair < 4; pair += 2) {
      while (EXCLUDED.has(quarters[pair] as number) || EXCLUDED.has(quarters[pair + 1] as number)) {
        quarters[pair] = (quarters[pair] as number) + 1
        quarters[pair + 1] = (quarters[pair + 1] as number) - 1
      }
    }
    quarters.forEach((code, i) => (characters[4 * i + byte] = code))
  }
  const text = String.fromCharCode(...characters)
  return text.slice(-1) + text.slice(0, -1)
}

/**
 * Whether DATASUM and CHECKSUM of an HDU match its bytes. Of a compressed HDU, those of the bytes as stored.
 *
 * @throws FormatError 'truncated-data' when the file ends within the HDU
 */
export function verifyChecksums(source: ByteSource, hdu: Hdu): ChecksumReport {
  const header = hdu.stored?.header ?? hdu.header
  const end = hdu.dataByte + hdu.dataSize
  if (end > source.size) {
    const message = `checksum requires the whole HDU to byte ${end}, got the end of the file at byte ${source.size}`
    throw new FormatError('truncated-data', message, { hdu: hdu.index, byte: source.size })
  }
  // padding that the file lacks counts as the zeros it would hold
  const padded = Math.min(source.size, hdu.dataByte + Math.ceil(hdu.dataSize / BLOCK_SIZE) * BLOCK_SIZE)
  const data = sumOf(source, hdu.dataByte, padded)
  const whole = sumOf(source, hdu.headerByte, hdu.dataByte, data)
  const datasum = textValue(header, 'DATASUM')?.trim() ?? numberText(header.get('DATASUM')?.value)
  const checksum = textValue(header, 'CHECKSUM')
  return {
    datasum: verdict(datasum, data, Number(datasum) === data),
    checksum: verdict(checksum, whole, whole === ALL_ONES || whole === 0),
  }
}

function verdict(written: string | undefined, found: number, right: boolean): ChecksumVerdict {
  if (written === undefined || written.trim() === '') return { state: 'absent', found: String(found) }
  return { state: right ? 'right' : 'wrong', written, found: String(found) }
}

function numberText(value: unknown): string | undefined {
  return typeof value === 'number' || typeof value === 'bigint' ? String(value) : undefined
}

function sumOf(source: ByteSource, from: number, to: number, before = 0): number {
  let sum = before
  for (let at = from; at < to; at += STEP) sum = onesComplementSum(source.read(at, Math.min(STEP, to - at)), sum)
  return sum
}
