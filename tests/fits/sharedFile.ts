import { readFileSync } from 'node:fs'
import { inflateSource } from '../../src/fits/inflate.ts'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import type { ByteSource, FitsFile, Hdu } from '../../src/fits/types.ts'
import { sharedPath } from '../support/shared.ts'

/** A file of the shared containers, inflated and opened. */
export function openShared(path: string): { readonly source: ByteSource; readonly file: FitsFile } {
  return openBytes(new Uint8Array(readFileSync(sharedPath(`containers/${path}`))))
}

/** Bytes of a file, inflated and opened. */
export function openBytes(bytes: Uint8Array): { readonly source: ByteSource; readonly file: FitsFile } {
  const source = inflateSource(memorySource(bytes))
  return { source, file: openFits(source) }
}

/** The HDU of that number; throws where the file has none. */
export function hduAt(file: FitsFile, index: number): Hdu {
  const hdu = file.hdus[index]
  if (!hdu) throw new RangeError(`file requires an HDU ${index}, got ${file.hdus.length}`)
  return hdu
}
