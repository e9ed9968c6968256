import { FormatError } from '../errors.ts'
import type { Place } from '../errors.ts'
import type { ByteSource, FitsFile, Hdu } from '../fits/types.ts'
import { assemble } from './assemble.ts'
import { refusalOf } from './axis.ts'
import type { Refusal } from './axis.ts'
import type { Container, HduAnswer } from './container.ts'
import { headersOf } from './container.ts'
import type { FoundSpectrum } from './found.ts'
import { readHeaderFacts } from './headerFacts.ts'
import { imageRole } from './imageRole.ts'
import { imageSpectra } from './imageSpectra.ts'
import { spectrumRole } from './role.ts'
import { tableSpectra } from './tableSpectra.ts'
import { velocityFrame } from './velocityFrame.ts'
import type { FrameAnswer } from './velocityFrame.ts'
import type { KeywordTable } from '../tables/types.ts'
import type { Note } from '../findings/types.ts'
import type { HeaderFacts, Spectrum } from './types.ts'

/** What one file gave. */
export interface ReadResult {
  readonly spectra: readonly Spectrum[]
  /** Of the file as a whole. */
  readonly facts: HeaderFacts
  /** Of the file as a whole: how its headers were understood. */
  readonly notes: readonly Note[]
  /** Set when the file is a raw 2-D frame. */
  readonly frame2d?: { readonly hdu: number }
  /** Why there is no spectrum. */
  readonly error?: { readonly code: string; readonly message: string; readonly where: Place }
}

/** Settings of `readSpectra`. */
export interface ReadOptions {
  readonly keywords: KeywordTable
  /** The file that holds the wavelengths, where one was named. */
  readonly companion?: { readonly file: FitsFile; readonly source: ByteSource }
  readonly fileName?: string
  /** Largest number of spectra that are read of one file; 5,000 when not given. */
  readonly maxSpectra?: number
}

/** More spectra than any multi-object spectrograph gives in one exposure. */
const MOST_SPECTRA = 5000
/** Samples of all spectra together that fit in memory: five arrays of 8 bytes each, 320 MB. */
const MOST_SAMPLES = 8_000_000
/** Fewest samples of a spectrum: the five or so filters of a photometric catalogue are none. */
const FEWEST_SAMPLES = 10

/**
 * The spectra of a file: of every image and table that holds a flux with wavelengths, each once, in the program's
 * units. A raw 2-D frame gives none and sets `frame2d`; a file with neither gives `error` with the likeliest reason.
 * A fault in one HDU does not keep the others from being read.
 *
 * @throws FormatError when the file has no HDU
 */
export function readSpectra(file: FitsFile, source: ByteSource, options: ReadOptions): ReadResult {
  if (file.hdus.length === 0)
    throw new FormatError('empty-file', 'file requires at least one HDU, got none', placeOf(options))
  const { keywords, companion } = options
  const most = options.maxSpectra ?? MOST_SPECTRA
  const container: Container = {
    file,
    source,
    ...(companion ? { companion } : {}),
    most,
    mostSamples: MOST_SAMPLES,
  }
  const spectra: Spectrum[] = []
  const refusals: Refusal[] = []
  const notes: Note[] = []
  let frame2d: Hdu | undefined
  let samples = 0
  let first: ReturnType<typeof readHeaderFacts> | undefined
  for (const hdu of file.hdus) {
    const room = { most: most - spectra.length, mostSamples: MOST_SAMPLES - samples }
    if (room.most <= 0 || room.mostSamples <= 0) {
      notes.push({
        code: 'spectra-limit',
        text: `reading stopped at HDU ${hdu.index}, after ${spectra.length} spectra of ${samples} samples`,
      })
      break
    }
    const answer = withoutShort(hduSpectra({ ...container, ...room }, hdu))
    if (answer.isFrame) frame2d ??= hdu
    refusals.push(...answer.refusals)
    if (answer.spectra.length === 0) {
      notes.push(...answer.notes)
      continue
    }
    const span = spanOf(answer.spectra)
    const headers = headersOf(file, hdu)
    const read = readHeaderFacts(headers, keywords)
    first ??= read
    const frame = velocityFrame(headers, keywords)
    for (const found of answer.spectra)
      spectra.push(finished(found, { hdu, file, read, frame, span, notes: answer.notes }))
    samples += answer.spectra.reduce((sum, { flux }) => sum + flux.length, 0)
  }
  const whole = first ?? readHeaderFacts(headersOf(file, file.hdus[frame2d?.index ?? 0]), keywords)
  // What was noticed in the other HDUs is kept with the first spectrum, so that nothing is lost on the way.
  if (spectra.length > 0 && notes.length > 0) spectra[0] = { ...spectra[0], notes: [...spectra[0].notes, ...notes] }
  const result = { spectra, facts: whole.facts, notes: [...file.notes, ...notes, ...whole.notes] }
  if (spectra.length > 0) return result
  const worst = refusals.reduce<Refusal | undefined>(
    (best, next) => (!best || next.weight > best.weight ? next : best),
    undefined,
  )
  const error = worst
    ? { code: worst.code, message: worst.message, where: refusalPlace(worst, options) }
    : { code: 'no-data', message: 'file requires an image or a table with data, got none', where: placeOf(options) }
  return { ...result, ...(frame2d ? { frame2d: { hdu: frame2d.index } } : {}), error }
}

/** Leaves out what has too few samples to be a spectrum (the arrays of a catalogue), with the reason. */
function withoutShort(answer: HduAnswer & { readonly isFrame?: boolean }): HduAnswer & { readonly isFrame?: boolean } {
  const short = answer.spectra.filter(({ flux }) => flux.length < FEWEST_SAMPLES)
  if (short.length === 0) return answer
  const refusals = short.map(({ hdu, row, flux }): Refusal => ({
    code: 'too-few-samples',
    message: `spectrum requires at least ${FEWEST_SAMPLES} samples, got ${flux.length}`,
    weight: 3,
    hdu,
    ...(row === undefined ? {} : { row }),
  }))
  const spectra = answer.spectra.filter(({ flux }) => flux.length >= FEWEST_SAMPLES)
  return { ...answer, spectra, refusals: [...answer.refusals, ...refusals] }
}

function placeOf({ fileName }: ReadOptions): Place {
  return fileName === undefined ? {} : { file: fileName }
}

function refusalPlace(refusal: Refusal, options: ReadOptions): Place {
  const { hdu, row, keyword } = refusal
  return {
    ...placeOf(options),
    ...(hdu === undefined ? {} : { hdu }),
    ...(row === undefined ? {} : { row }),
    ...(keyword === undefined ? {} : { keyword }),
    ...(refusal.byte === undefined ? {} : { byte: refusal.byte }),
  }
}

function hduSpectra(container: Container, hdu: Hdu): HduAnswer & { readonly isFrame?: boolean } {
  try {
    if (hdu.fault) throw new FormatError(hdu.fault.code, hdu.fault.message, faultPlace(hdu.fault))
    if (hdu.kind === 'image' || hdu.kind === 'compressed image') {
      if (hdu.dimensions.length === 0) return { spectra: [], refusals: [], notes: [] }
      const role = imageRole(hdu.name)
      // Planes that belong to another HDU are read with it; a name that says nothing may still be a spectrum.
      if (role !== undefined && role !== 'flux' && role !== 'normalised')
        return { spectra: [], refusals: [], notes: [] }
      return imageSpectra(container, hdu)
    }
    return hdu.columns.length === 0 ? { spectra: [], refusals: [], notes: [] } : tableSpectra(container, hdu)
  } catch (error) {
    if (!(error instanceof FormatError)) throw error
    const refusal = refusalOf(error, hdu.index)
    return {
      spectra: [],
      refusals: [refusal],
      notes: [{ code: error.code, text: `HDU ${hdu.index}: ${error.message}` }],
    }
  }
}

function faultPlace({ keyword }: { readonly keyword?: string }): Place {
  return keyword === undefined ? {} : { keyword }
}

function spanOf(spectra: readonly FoundSpectrum[]): readonly [number, number] {
  let low = Infinity
  let high = -Infinity
  for (const { axis } of spectra) {
    for (const value of axis.wavelength) {
      if (value < low) low = value
      if (value > high) high = value
    }
  }
  return [low, high]
}

interface HduContext {
  readonly hdu: Hdu
  readonly file: FitsFile
  readonly read: ReturnType<typeof readHeaderFacts>
  readonly frame: FrameAnswer
  readonly span: readonly [number, number]
  readonly notes: readonly Note[]
}

function finished(found: FoundSpectrum, { hdu, file, read, frame, span, notes }: HduContext): Spectrum {
  const facts: HeaderFacts = {
    ...read.facts,
    ...found.own,
    ...(frame.applied === undefined ? {} : { velocityApplied: frame.applied }),
  }
  const hduNotes = [...file.notes, ...hdu.notes, ...(hdu.index === 0 ? [] : file.hdus[0].notes)]
  return assemble(found, {
    facts,
    factNotes: [...notes, ...hduNotes, ...frame.notes, ...read.notes],
    frame: frame.frame,
    role: found.role ?? spectrumRole(facts),
    span,
  })
}
