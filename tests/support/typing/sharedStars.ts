import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { fitContinuum } from '../../../src/continuum/fitContinuum.ts'
import { inflateSource } from '../../../src/fits/inflate.ts'
import { openFits } from '../../../src/fits/open.ts'
import type { ByteSource } from '../../../src/fits/types.ts'
import { readSpectra } from '../../../src/spectrum/readSpectra.ts'
import type { Spectrum } from '../../../src/spectrum/types.ts'
import { KEYWORDS } from '../../../src/tables/keywords.ts'
import { PATTERNS } from '../../../src/tables/patterns.ts'
import { BANDS } from '../../../src/tables/bands.ts'
import { type TypingInput, typingInput } from '../../../src/typing/typingInput.ts'
import { parseType } from '../../../src/typing/typeName.ts'
import type { Continuum } from '../../../src/continuum/types.ts'
import type { Resolution, RestFrame } from '../../../src/velocity/types.ts'
import { alignStar } from '../../../src/velocity/alignStar.ts'
import { sharedPath } from '../shared.ts'

/** FWHM [Å] that all spectra are brought to before they are measured for a type. */
export const COMMON_FWHM = 13

/** One row of the manifest of published stars. */
export interface SharedStar {
  readonly file: string
  readonly set: 'atlas' | 'averages' | 'pickles' | 'standards'
  readonly name: string
  readonly spectralType: string
  readonly typeNumber: number
  /** Undefined where none is published. */
  readonly luminosity?: number
  /** Metals as published: solar unless said otherwise. */
  readonly metals: 'solar' | 'weak' | 'rich'
  readonly reference: string
  readonly sha256: string
}

const CLASSES: Readonly<Record<string, number>> = { I: 1, II: 2, III: 3, IV: 4, V: 5 }

/** Rows of the manifest of the sets asked for, in its order; the checksum is of the file. */
export function sharedStars(sets: readonly string[]): SharedStar[] {
  const [head, ...lines] = readFileSync(sharedPath('stars/manifest.tsv'), 'utf8').trimEnd().split('\n')
  const names = head.split('\t')
  return lines.flatMap((line): SharedStar[] => {
    const cells = line.split('\t')
    const cell = (name: string): string => cells[names.indexOf(name)] ?? ''
    const set = cell('set') as SharedStar['set']
    if (!sets.includes(set)) return []
    const written = cell('spectral_type')
    const metalWeak = /^MPF/.test(written) || /weak/.test(cell('alternate_type_or_metallicity'))
    const typeNumber = parseType(written.replace(/^MP/, ''))?.typeNumber
    if (typeNumber === undefined) throw new RangeError(`manifest requires a type, got ${written}`)
    const luminosity = CLASSES[cell('luminosity_class')]
    return [
      {
        file: cell('file'),
        set,
        name: cell('name'),
        spectralType: written + cell('luminosity_class'),
        typeNumber,
        ...(luminosity === undefined ? {} : { luminosity }),
        metals: metalWeak ? 'weak' : /rich/.test(cell('alternate_type_or_metallicity')) ? 'rich' : 'solar',
        reference: cell('reference'),
        sha256: createHash('sha256')
          .update(readFileSync(sharedPath(`stars/${cell('file')}`)))
          .digest('hex'),
      },
    ]
  })
}

/** A file of the shared stars as the program reads it. */
export function readStar(file: string): Spectrum {
  const bytes = readFileSync(sharedPath(`stars/${file}`))
  const raw: ByteSource = {
    size: bytes.length,
    read: (offset, length) => {
      if (offset < 0 || offset + length > bytes.length) throw new RangeError('read requires a range inside the file')
      return bytes.subarray(offset, offset + length)
    },
  }
  const source = inflateSource(raw)
  const [spectrum] = readSpectra(openFits(source), source, { keywords: KEYWORDS, fileName: file }).spectra
  if (!spectrum) throw new RangeError(`${file} requires a spectrum, got none`)
  return spectrum
}

/**
 * Å, FWHM of a set's spectra: the atlas as published; of the other two as they were found here, by smoothing the atlas
 * until narrow features agreed on the average (they are stated as R = 500 and 11 Å).
 */
const SET_FWHM: Readonly<Record<SharedStar['set'], number | undefined>> = {
  atlas: 4.5,
  averages: 12.5,
  pickles: 13.5,
  standards: undefined,
}

/** The typing input of a published star by the program's own stages, at its set's resolution. */
export function measuredInput(star: SharedStar): { readonly input: TypingInput; readonly parts: StarParts } {
  const spectrum = readStar(star.file)
  const fwhm = SET_FWHM[star.set]
  return inputOf(spectrum, fwhm === undefined ? undefined : { fwhm, how: 'header', isUpperLimit: false })
}

export interface StarParts {
  readonly spectrum: Spectrum
  readonly continuum: Continuum
  readonly frame: RestFrame
}

/** The typing input of a spectrum by the program's own stages. */
export function inputOf(
  spectrum: Spectrum,
  resolution?: Resolution,
): { readonly input: TypingInput; readonly parts: StarParts } {
  const continuum = fitContinuum(spectrum)
  const aligned = alignStar(spectrum, continuum, { patterns: PATTERNS })
  const input = typingInput(aligned.spectrum, continuum, aligned.frame, {
    windows: BANDS,
    commonFwhm: COMMON_FWHM,
    ...(resolution ? { resolution } : {}),
  })
  return { input, parts: { spectrum: aligned.spectrum, continuum, frame: aligned.frame } }
}
