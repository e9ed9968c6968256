import { FormatError } from '../errors.ts'

const CLEAR = 256
const FIRST_FREE = 257
const FIRST_BITS = 9
const MOST_BITS = 16
const BLOCK_MODE = 0x80
const OUTPUT_STEP = 1 << 16

/**
 * Expands a Unix compress stream (adaptive Lempel-Ziv-Welch, Welch 1984, Computer 17, 8), chunk by chunk.
 * Codes grow from 9 bits to the width that the third byte names; code 256 clears the table where its top bit is set.
 * Codes are packed in groups of eight, and a group under way is dropped when the width changes.
 *
 * @param push  takes a chunk (to be copied); returns true when no more is wanted
 * @throws FormatError 'inflate' when the width is not known or a code comes before its entry
 */
export function expandLzw(packed: Uint8Array, push: (chunk: Uint8Array) => boolean): void {
  const flags = packed[2] ?? 0
  const mostBits = flags & 0x1f
  if (mostBits < FIRST_BITS || mostBits > MOST_BITS) {
    throw new FormatError('inflate', `compress stream requires codes of 9 to 16 bits, got ${mostBits}`, { byte: 2 })
  }
  const clears = (flags & BLOCK_MODE) !== 0
  const prefix = new Uint16Array(1 << mostBits)
  const suffix = new Uint8Array(1 << mostBits)
  for (let i = 0; i < CLEAR; i++) suffix[i] = i
  const stack = new Uint8Array((1 << mostBits) + 1)
  const out = new Uint8Array(OUTPUT_STEP + stack.length)
  let filled = 0
  let bits = FIRST_BITS
  let free = clears ? FIRST_FREE : CLEAR
  let previous = -1
  let first = 0
  let position = 24
  let group = 24
  const end = packed.length * 8
  while (position + bits <= end) {
    const byte = position >> 3
    const three = (packed[byte] as number) | ((packed[byte + 1] ?? 0) << 8) | ((packed[byte + 2] ?? 0) << 16)
    const code = (three >> (position & 7)) & ((1 << bits) - 1)
    position += bits
    if (code === CLEAR && clears) {
      position = nextGroup(position, group, bits)
      group = position
      bits = FIRST_BITS
      free = FIRST_FREE
      previous = -1
      continue
    }
    if (previous < 0 ? code >= CLEAR : code > free) {
      throw new FormatError('inflate', `compress stream requires codes up to ${free}, got ${code}`, { byte })
    }
    let depth = 0
    let at = code
    if (previous >= 0 && code === free) {
      stack[depth++] = first
      at = previous
    }
    while (at >= CLEAR) {
      stack[depth++] = suffix[at] as number
      at = prefix[at] as number
    }
    first = suffix[at] as number
    out[filled++] = first
    while (depth > 0) out[filled++] = stack[--depth] as number
    if (previous >= 0 && free < 1 << mostBits) {
      prefix[free] = previous
      suffix[free] = first
      free++
      if (free === 1 << bits && bits < mostBits) {
        position = nextGroup(position, group, bits)
        group = position
        bits++
      }
    }
    previous = code
    if (filled >= OUTPUT_STEP) {
      if (push(out.subarray(0, filled))) return
      filled = 0
    }
  }
  push(out.subarray(0, filled))
}

function nextGroup(position: number, group: number, bits: number): number {
  const size = bits * 8
  return group + Math.ceil((position - group) / size) * size
}
