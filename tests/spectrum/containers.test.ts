import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { FormatError } from '../../src/errors.ts'
import { describeSpectrum } from '../../src/spectrum/describe.ts'
import type { SpectrumDescription } from '../../src/spectrum/describe.ts'
import { readSpectra } from '../../src/spectrum/readSpectra.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'
import { openShared } from '../fits/sharedFile.ts'
import { hasShared, sharedPath } from '../support/shared.ts'

type Row = Readonly<Record<string, string>>

function rows(path: string): readonly Row[] {
  const [head, ...lines] = readFileSync(sharedPath(path), 'utf8').trimEnd().split('\n')
  const names = head.split('\t')
  return lines.map((line) => Object.fromEntries(line.split('\t').map((value, i) => [names[i], value])))
}

/** Spectra of a file, or the code of its error. */
function understood(path: string): { readonly spectra: readonly SpectrumDescription[]; readonly code?: string } {
  try {
    const { source, file } = openShared(path)
    const result = readSpectra(file, source, { keywords: KEYWORDS })
    const spectra = result.spectra.map((spectrum) => describeSpectrum(path, spectrum))
    return { spectra, ...(result.error ? { code: result.error.code } : {}) }
  } catch (error) {
    if (error instanceof FormatError) return { spectra: [], code: error.code }
    throw error
  }
}

/** Ends of an unsorted table stand in the manifest in file order, 5400 to 3804 Å; its true range is 3800 to 6998 Å. */
const MANIFEST_ENDS = new Set(['synth/rows_unsorted_dups.fits'])

const near = (a: number | null, b: number, relative: number): boolean =>
  a !== null && Math.abs(a - b) <= relative * Math.max(Math.abs(a), Math.abs(b), 1e-300)

/** Every row of the manifest, whose values are those of the reference FITS library, is answered as it asks. */
describe.skipIf(!hasShared)('readSpectra on the shared containers', () => {
  const wanted = hasShared ? rows('containers/manifest.tsv').filter((row) => !row.expect.startsWith('FITS-level')) : []
  const cache = new Map<string, ReturnType<typeof understood>>()
  const answer = (path: string): ReturnType<typeof understood> => {
    const known = cache.get(path) ?? understood(path)
    cache.set(path, known)
    return known
  }

  it('finds every spectrum with its samples, range, flux and undefined values', () => {
    const missed: string[] = []
    for (const row of wanted) {
      if (row.expect !== 'ok' || MANIFEST_ENDS.has(row.path)) continue
      const ends = [Number(row.wave_first_A), Number(row.wave_last_A)].sort((a, b) => a - b)
      const flux = row.flux_0 === '' ? NaN : Number(row.flux_0)
      const hit = answer(row.path).spectra.some(
        (found) =>
          found.samples === Number(row.n) &&
          near(found.wavelength.first, ends[0], 5e-6) &&
          near(found.wavelength.last, ends[1], 5e-6) &&
          (!Number.isFinite(flux) || near(found.flux.first, flux, 1e-5) || near(found.flux.last, flux, 1e-5)) &&
          (row.flux_nonfinite === '' || found.nonfinite === Number(row.flux_nonfinite)),
      )
      if (!hit) missed.push(`${row.path} ${row.selector}`)
    }
    expect(missed).toEqual([])
  })

  it('refuses every file that holds no spectrum', () => {
    const taken = wanted
      .filter((row) => row.expect.startsWith('error') && !/ or |;/.test(row.expect))
      .filter((row) => answer(row.path).spectra.length > 0 || answer(row.path).code === undefined)
    expect(taken.map((row) => row.path)).toEqual([])
  })

  it('answers every other file with a spectrum or a reason', () => {
    for (const row of wanted) {
      const { spectra, code } = answer(row.path)
      expect(spectra.length > 0 || code !== undefined, row.path).toBe(true)
    }
  })

  it('knows the medium that a header declares', () => {
    const wrong = wanted.filter(
      (row) =>
        /^(header|CTYPE1|TUCD1|column name)/.test(row.medium_evidence) &&
        !/silent/.test(row.medium_evidence) &&
        !answer(row.path).spectra.some((found) => found.medium === row.medium && found.mediumHow === 'declared'),
    )
    expect(wrong.map((row) => row.path)).toEqual([])
  })

  it('notes how a medium was guessed, and never says "guessed" without it', () => {
    for (const { spectra } of cache.values())
      for (const found of spectra) {
        const codes = found.notes.map((note) => note.code)
        expect(codes, found.file).toContain(found.mediumHow === 'guessed' ? 'medium-guessed' : 'medium-declared')
      }
  })
})

describe.skipIf(!hasShared)('readSpectra on the shared stars', () => {
  const stars = hasShared ? [...rows('stars/manifest.tsv'), ...rows('stars/others.tsv')] : []

  it('reads one spectrum of every star, in the medium that its publication states', () => {
    const wrong: string[] = []
    for (const row of stars) {
      const { spectra } = understood(`../stars/${row.file}`)
      const [found] = spectra
      if (spectra.length !== 1 || found.medium !== row.medium || found.nonfinite > 0) wrong.push(row.file)
    }
    expect(wrong).toEqual([])
  })
})

describe.skipIf(!hasShared)('readSpectra on the shared raw frames', () => {
  it('takes no frame for spectra', () => {
    const frames = hasShared ? rows('frames/manifest.tsv').map((row) => row.file) : []
    expect(frames.length).toBeGreaterThan(0)
    for (const path of frames) {
      const { source, file } = openShared(`../frames/${path}`)
      const result = readSpectra(file, source, { keywords: KEYWORDS })
      expect(result.spectra, path).toHaveLength(0)
      expect(result.frame2d, path).toEqual({ hdu: 0 })
    }
  })
})
