import { Gunzip, Inflate } from 'fflate'
import { gunzipSync } from 'node:zlib'
import { FormatError } from '../errors.ts'
import { announcedSize } from './announced.ts'
import { expandLzw } from './lzw.ts'
import { memorySource } from './source.ts'
import type { ByteSource, FitsNote } from './types.ts'

/** Bounds of what a compressed file may grow to. */
export interface InflateLimits {
  /** Bytes of inflated output that are never passed. */
  readonly mostBytes: number
}

/** 256 MiB: while the output grows half as much again is held, and one file may cost 512 MiB in all. */
const LIMITS: InflateLimits = { mostBytes: 2 ** 28 }

/**
 * What the last four bytes of a gzip file claim of its size is believed up to this many bytes and this many times the
 * packed size (FITS files pack to a tenth at best); beyond it the stream is inflated step by step.
 */
const TRUSTED_SIZE = 64 << 20
const TRUSTED_RATIO = 100

/** Packed bytes that are held at once; a larger gzip file is read in steps, other forms are refused. */
const MOST_PACKED = 2 ** 27
const STEP = 16_384

/**
 * The source itself, or the inflated bytes when it holds gzip (by its first bytes, whatever the file's name; several
 * members as well), Unix compress, or a zip archive with one deflated file. Inflating stops where the FITS headers say
 * that the last HDU ends, so that the output is bounded by what they announce, and by `mostBytes`.
 * A stream that ends early, goes on beyond `mostBytes` or whose check value is wrong (looked at up to 64 MiB of output)
 * keeps what came out, with a note.
 *
 * @throws FormatError 'inflate' when the stream is damaged before anything came out, 'too-large' when the packed bytes
 *   of another form than gzip are more than can be held
 */
export function inflateSource(source: ByteSource, limits: InflateLimits = LIMITS): ByteSource {
  if (source.size < 3) return source
  const magic = source.read(0, Math.min(4, source.size))
  const gzip = magic[0] === 0x1f && magic[1] === 0x8b
  const lzw = magic[0] === 0x1f && magic[1] === 0x9d
  const zip = magic[0] === 0x50 && magic[1] === 0x4b && magic[2] === 3 && magic[3] === 4
  if (!gzip && !lzw && !zip) return source
  if (gzip) return inflateGzip(source, limits)
  if (source.size > MOST_PACKED) {
    throw new FormatError('too-large', `packed file requires at most ${MOST_PACKED} bytes, got ${source.size}`)
  }
  const packed = source.read(0, source.size)
  const sink = growingSink(limits)
  if (lzw) expandLzw(packed, sink.push)
  else inflateZip(packed, sink)
  return sink.source([])
}

function inflateGzip(source: ByteSource, limits: InflateLimits): ByteSource {
  const n = source.size
  const tail = source.read(Math.max(0, n - 4), Math.min(4, n))
  const claimed = Buffer.from(tail).readUIntLE(0, tail.length)
  const packed = n <= MOST_PACKED ? source.read(0, n) : undefined
  if (packed && claimed <= Math.min(TRUSTED_SIZE, limits.mostBytes, n * TRUSTED_RATIO)) {
    try {
      return memorySource(gunzipSync(packed, { maxOutputLength: Math.max(1, claimed) }))
    } catch {
      // several members, a wrong check value or a cut stream: the slow way tells them apart
    }
  }
  const sink = growingSink(limits)
  const notes: FitsNote[] = []
  const stream = new Gunzip((chunk) => void sink.push(chunk))
  try {
    for (let at = 0; at < n && !sink.full(); at += STEP) {
      stream.push(source.read(at, Math.min(STEP, n - at)), at + STEP >= n)
    }
    if (packed && !sink.full() && sink.size() <= TRUSTED_SIZE) notes.push(...remark(packed, sink.size()))
  } catch (error) {
    if (sink.size() === 0) {
      throw new FormatError('inflate', 'gzip stream requires whole data, got none', {}, { cause: error })
    }
    notes.push(cutNote(sink.size()))
  }
  return sink.source(notes)
}

function cutNote(size: number): FitsNote {
  return { code: 'gzip-cut', text: `gzip stream ends early or is damaged after ${size} bytes of output` }
}

/** What a whole pass says of a stream that the quick way refused: cut, a wrong check value, or nothing wrong. */
function remark(packed: Uint8Array, size: number): readonly FitsNote[] {
  try {
    gunzipSync(packed, { maxOutputLength: size + 1 })
    return []
  } catch (error) {
    if (error instanceof Error && /unexpected end of file/.test(error.message)) return [cutNote(size)]
    return [{ code: 'gzip-check', text: 'check value of the gzip stream does not match its bytes' }]
  }
}

const ZIP_HEADER = 30
const ZIP_DEFLATED = 8

function inflateZip(packed: Uint8Array, sink: Sink): void {
  const view = new DataView(packed.buffer, packed.byteOffset, packed.length)
  const method = packed.length < ZIP_HEADER ? -1 : view.getUint16(8, true)
  if (method !== ZIP_DEFLATED) {
    throw new FormatError('inflate', `zip archive requires a deflated file first, got method ${method}`)
  }
  const start = ZIP_HEADER + view.getUint16(26, true) + view.getUint16(28, true)
  let ended = false
  const stream = new Inflate((chunk, last) => {
    sink.push(chunk)
    ended ||= last
  })
  try {
    for (let at = start; at < packed.length && !sink.full() && !ended; at += STEP)
      stream.push(packed.subarray(at, at + STEP))
  } catch (error) {
    throw new FormatError('inflate', 'zip archive requires whole deflated data, got damage', {}, { cause: error })
  }
}

interface Sink {
  /** Takes bytes; true once no more are wanted. */
  readonly push: (chunk: Uint8Array) => boolean
  readonly full: () => boolean
  readonly size: () => number
  readonly source: (notes: readonly FitsNote[]) => ByteSource
}

/** Collects output until the HDUs that its headers announce are complete. */
function growingSink({ mostBytes }: InflateLimits): Sink {
  let held = new Uint8Array(1 << 16)
  let size = 0
  let wanted = 0
  const walk = announcedSize()
  const full = (): boolean => size >= mostBytes || wanted === Infinity
  return {
    push(chunk) {
      if (full()) return true
      const taken = Math.min(chunk.length, mostBytes - size)
      if (size + taken > held.length) {
        // What the headers announce is set aside at once: pages that are never written cost nothing.
        const grown = new Uint8Array(Math.min(mostBytes, Math.max(size + taken, held.length * 2, wanted)))
        grown.set(held.subarray(0, size))
        held = grown
      }
      held.set(taken === chunk.length ? chunk : chunk.subarray(0, taken), size)
      size += taken
      if (size >= wanted) wanted = walk(held.subarray(0, size))
      return full()
    },
    full,
    size: () => size,
    source(notes) {
      const stopped = { code: 'inflate-cut', text: `inflating stops after ${mostBytes} bytes` }
      return memorySource(held.subarray(0, size), size >= mostBytes ? [...notes, stopped] : notes)
    },
  }
}
