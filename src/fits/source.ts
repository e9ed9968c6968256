import { FormatError } from '../errors.ts'
import type { ByteSource, FitsNote, Hdu } from './types.ts'

/** A source over bytes in memory; what it reads are views, to be left unchanged. */
export function memorySource(bytes: Uint8Array, notes: readonly FitsNote[] = []): ByteSource {
  return {
    size: bytes.length,
    read(offset, length) {
      if (offset < 0 || length < 0 || offset + length > bytes.length) {
        throw new RangeError(`read requires a range within ${bytes.length} bytes, got ${offset} + ${length}`)
      }
      return bytes.subarray(offset, offset + length)
    },
    notes,
  }
}

/**
 * The bytes of a range of an HDU's data.
 *
 * @throws FormatError 'truncated-data' when the file ends within the range
 */
export function readData(source: ByteSource, hdu: Hdu, offset: number, length: number): Uint8Array {
  requireData(source, hdu, offset, length)
  return source.read(offset, length)
}

/** Throws FormatError 'truncated-data' when the file ends within the range, or the HDU's own fault when it has one. */
export function requireData(source: ByteSource, hdu: Hdu, offset: number, length: number): void {
  if (hdu.fault) {
    const { code, message, keyword } = hdu.fault
    throw new FormatError(code, message, { hdu: hdu.index, ...(keyword === undefined ? {} : { keyword }) })
  }
  if (offset + length <= source.size) return
  const cut = source.notes?.find((note) => note.code.endsWith('-cut'))
  const message = `data requires ${hdu.dataSize} bytes from byte ${hdu.dataByte}, got the end of the file at byte ${source.size}`
  throw new FormatError('truncated-data', cut ? `${message} (${cut.text})` : message, {
    hdu: hdu.index,
    byte: source.size,
  })
}
