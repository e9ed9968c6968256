import { gunzipSync } from 'node:zlib'
import { FormatError } from '../errors.ts'

/**
 * The bytes of a gzip-packed tile or column piece.
 *
 * @param expected  the most bytes that may come out
 * @throws FormatError 'compression' when the stream is damaged or holds more
 */
export function gunzipped(code: Uint8Array, expected: number): Uint8Array {
  try {
    return gunzipSync(code, { maxOutputLength: Math.max(1, expected) })
  } catch (error) {
    const message = `gzip tile requires at most ${expected} bytes in a whole stream, got a damaged or longer one`
    throw new FormatError('compression', message, {}, { cause: error })
  }
}

/** Bytes in their own order again, after all first bytes, all second bytes and so on were stored together (GZIP_2). */
export function unshuffled(bytes: Uint8Array, size: number): Uint8Array {
  if (size <= 1) return bytes
  const count = Math.floor(bytes.length / size)
  const out = new Uint8Array(count * size)
  for (let part = 0; part < size; part++) {
    const from = part * count
    for (let i = 0; i < count; i++) out[i * size + part] = bytes[from + i] as number
  }
  return out
}
