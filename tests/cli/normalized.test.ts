import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { writeNormalized } from '../../cli/normalized.ts'
import { encodeFits } from '../../src/fits/write.ts'
import { analyseFile, memorySource, openBytes, readSpectra, settingsInForce } from '../../src/index.ts'

const folder = mkdtempSync(join(tmpdir(), 'darkline-normalized-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const bytes = encodeFits([
  {
    kind: 'image',
    bitpix: -64,
    dimensions: [1500],
    values: Float64Array.from({ length: 1500 }, (_, i) => 1000 + 0.2 * i + (i % 7)),
    cards: [
      { keyword: 'CTYPE1', value: 'AWAV' },
      { keyword: 'CUNIT1', value: 'Angstrom' },
      { keyword: 'CRVAL1', value: 3900 },
      { keyword: 'CDELT1', value: 1.2 },
    ],
  },
])
const provenance = { version: '0.0.0', settingsDigest: 'made', calibration: 'made' }
const analysed = (file: string) =>
  analyseFile(memorySource(bytes), file, {
    inForce: settingsInForce(),
    wantsCurves: false,
    wantsAllLines: false,
    wantsNormalised: true,
  })

describe('writeNormalized', () => {
  it('writes a file that this program reads back, about 1, and keeps it out of the outcome', () => {
    const outcome = analysed('night/a.fits')
    expect(outcome.spectra[0].normalised?.spectrum.flux).toHaveLength(1500)
    const left = writeNormalized(outcome, { folder, provenance })
    expect(left.spectra[0].normalised).toBeUndefined()
    const [name] = readdirSync(folder)
    expect(name).toMatch(/^a-[0-9a-f]{8}\.fits$/)
    const [{ flux }] = readSpectra(openBytes(memorySource(readFileSync(join(folder, name)))), name).spectra
    expect(flux).toHaveLength(1500)
    // A continuum without lines leaves 1; the flux rises and falls by 0.3 % (6 of about 1,150 peak to peak).
    expect(flux.every((value) => Math.abs(value - 1) < 0.02)).toBe(true)
  })

  it('keeps files of one name in two folders apart, and odd names within the folder', () => {
    for (const file of ['b/a.fits', '../a.fits', 'a/../../x y.fit.gz', '/deep/ñ.fits'])
      writeNormalized(analysed(file), { folder, provenance })
    const names = readdirSync(folder)
    expect(names).toHaveLength(5)
    expect(names.map((name) => name.replace(/[0-9a-f]{8}\.fits$/, '')).sort()).toEqual(['a-', 'a-', 'a-', 'x_y-', 'ñ-'])
  })

  it('gives the same bytes whenever it is run', () => {
    const [first, second] = ['one', 'two'].map((name) => {
      writeNormalized(analysed('a.fits'), { folder: join(folder, name), provenance })
      const [written] = readdirSync(join(folder, name))
      return readFileSync(join(folder, name, written))
    })
    expect(first.equals(second)).toBe(true)
  })
})
