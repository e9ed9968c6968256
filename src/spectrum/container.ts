import type { ByteSource, FitsFile, Hdu } from '../fits/types.ts'
import type { Refusal } from './axis.ts'
import type { Headers } from './cards.ts'
import type { FoundSpectrum } from './found.ts'
import type { Note } from '../findings/types.ts'

/** An opened file with its bytes, and the file that holds its wavelengths where one was named. */
export interface Container {
  readonly file: FitsFile
  readonly source: ByteSource
  readonly companion?: { readonly file: FitsFile; readonly source: ByteSource }
  /** Largest number of spectra that are wanted of the file. */
  readonly most: number
  /** Largest number of samples of them all. */
  readonly mostSamples: number
}

/** Number of spectra of so many samples that may still be read. */
export function room({ most, mostSamples }: Container, samples: number): number {
  return Math.min(most, Math.max(1, Math.floor(mostSamples / Math.max(samples, 1))))
}

/** The note that an HDU holds more spectra than were read. */
export function limitNotes(hdu: Hdu, read: number, held: number): readonly Note[] {
  if (held <= read) return []
  return [{ code: 'spectra-limit', text: `HDU ${hdu.index} holds ${held} spectra, of which ${read} are read` }]
}

/** What one HDU gave: spectra, the reasons why there are none, and remarks on what was left aside. */
export interface HduAnswer {
  readonly spectra: readonly FoundSpectrum[]
  readonly refusals: readonly Refusal[]
  readonly notes: readonly Note[]
}

/** An answer with nothing in it but a refusal. */
export function refused(refusal: Refusal): HduAnswer {
  return { spectra: [], refusals: [refusal], notes: [] }
}

/** The headers that hold for an HDU: its own, then the primary one. */
export function headersOf(file: FitsFile, hdu: Hdu): Headers {
  const primary = file.hdus[0]
  return hdu.index === 0 ? [hdu.header] : [hdu.header, primary.header]
}

/** 'primary image', 'image extension SCI', 'binary table extension COADD', 'ASCII table extension' ... */
export function placeWords(hdu: Hdu): string {
  const name = hdu.name === '' || hdu.name === 'COMPRESSED_IMAGE' ? '' : ` ${hdu.name}`
  if (hdu.index === 0) return 'primary image'
  if (hdu.kind === 'image') return `image extension${name}`
  if (hdu.kind === 'compressed image') return `tile-compressed image${name}`
  if (hdu.kind === 'ascii table') return `ASCII table extension${name}`
  return `${hdu.kind === 'compressed table' ? 'compressed' : 'binary'} table extension${name}`
}
