import { FormatError } from '../errors.ts'
import { noteFinding } from '../findings/reading.ts'
import { inflateSource } from '../fits/inflate.ts'
import { openFits } from '../fits/open.ts'
import type { ByteSource, FitsFile } from '../fits/types.ts'
import { frameFacts } from '../quality/frameFacts.ts'
import { frameStatistics } from '../quality/frameStatistics.ts'
import { setupName } from '../quality/setupName.ts'
import { sortFrame } from '../quality/sortFrame.ts'
import type { ErrorFacts, FrameFacts, Outcome, SpectrumOutcome } from '../quality/types.ts'
import { joinOrders } from '../spectrum/joinOrders.ts'
import { readSpectra, type ReadResult } from '../spectrum/readSpectra.ts'
import type { HeaderFacts, Spectrum } from '../spectrum/types.ts'
import { KEYWORDS } from '../tables/keywords.ts'
import { analyseSpectrum, type AnalyseOptions } from './analyseSpectrum.ts'

/** An opened file with its bytes as they are after inflation. */
export interface OpenedFile {
  readonly file: FitsFile
  readonly source: ByteSource
}

/** Opens bytes as FITS, inflating them first where they are compressed; throws FormatError where they are no FITS. */
export function openBytes(bytes: ByteSource): OpenedFile {
  const source = inflateSource(bytes)
  return { file: openFits(source), source }
}

/** The spectra of an opened file, as `describe` lists them: before orders and arms are joined. */
export function spectraOf(
  opened: OpenedFile,
  name: string,
  options: { readonly companion?: OpenedFile; readonly maxSpectra?: number } = {},
): ReadResult {
  return readSpectra(opened.file, opened.source, { keywords: KEYWORDS, fileName: name, ...options })
}

/**
 * All that one file says: its spectra measured and typed, or its statistics as a 2-D frame, or the error that names
 * file, place, rule and value. Never throws for what a file holds.
 *
 * @param bytes  the file as it lies on disk, compressed or not
 * @param name   as shown to the user
 */
export function analyseFile(
  bytes: ByteSource,
  name: string,
  options: AnalyseOptions & { readonly companion?: OpenedFile },
): Outcome {
  const base = { file: name, size: bytes.size, spectra: [], notes: [] }
  try {
    const opened = openBytes(bytes)
    const notes = opened.file.notes.map(noteFinding)
    const result = spectraOf(opened, name, { companion: options.companion, maxSpectra: options.inForce.spectraLimit })
    const facts = withSite(result.facts, options)
    if (result.frame2d) {
      const hdu = opened.file.hdus[result.frame2d.hdu]
      return {
        ...base,
        notes,
        frame: frameFacts(facts, frameStatistics(opened.source, hdu, facts), options.inForce.thresholds),
      }
    }
    const spectra = joinOrders(result.spectra).map((spectrum) => analyseOne(spectrum, options))
    return {
      ...base,
      notes,
      spectra,
      frame: frameOfSpectra(facts, spectra),
      ...(result.error && spectra.length === 0
        ? { error: plainError(result.error.code, result.error.message, result.error.where) }
        : {}),
    }
  } catch (error) {
    if (error instanceof FormatError) return { ...base, error: plainError(error.code, error.message, error.where) }
    if (error instanceof RangeError || error instanceof TypeError) {
      return {
        ...base,
        error: {
          code: 'unforeseen',
          message: `file requires a form the reader knows, got one that ends in: ${error.message}`,
        },
      }
    }
    throw error
  }
}

function analyseOne(spectrum: Spectrum, options: AnalyseOptions): SpectrumOutcome {
  return analyseSpectrum({ ...spectrum, facts: withSite(spectrum.facts, options) }, options)
}

function withSite(facts: HeaderFacts, { inForce }: AnalyseOptions): HeaderFacts {
  return facts.site || !inForce.site ? facts : { ...facts, site: inForce.site }
}

/** The row of `frames` for a file of 1-D spectra. */
function frameOfSpectra(facts: HeaderFacts, spectra: readonly SpectrumOutcome[]): FrameFacts {
  const sorted = sortFrame(facts)
  const kind = sorted.kind === 'unknown' && spectra.some((s) => s.type.state !== 'none') ? 'science' : sorted.kind
  return {
    kind,
    kindHow: kind === sorted.kind ? sorted.kindHow : 'content',
    setup: setupName(facts),
    facts,
    quality: spectra.some((s) => s.quality === 'usable')
      ? 'usable'
      : spectra.some((s) => s.quality === 'doubtful')
        ? 'doubtful'
        : 'unusable',
    findings: [],
  }
}

function plainError(code: string, message: string, { hdu, row, keyword, byte }: FormatError['where']): ErrorFacts {
  return {
    code,
    message,
    ...(hdu === undefined ? {} : { hdu }),
    ...(row === undefined ? {} : { row }),
    ...(keyword === undefined ? {} : { keyword }),
    ...(byte === undefined ? {} : { byte }),
  }
}
