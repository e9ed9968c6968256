import { describe, expect, it } from 'vitest'
import { encodeFits } from '../src/fits/write.ts'
import { analyseFile, memorySource, nightOf, openBytes, readSpectra, settingsInForce, tableRows } from '../src/index.ts'

// A made spectrum without noise: 1500 samples from 3900 Å by 1.2 Å, so that the last lies at 3900 + 1499 · 1.2 Å.
const bytes = memorySource(
  encodeFits([
    {
      kind: 'image',
      bitpix: -64,
      dimensions: [1500],
      values: Float64Array.from({ length: 1500 }, (_, i) => 1000 + (i % 7)),
      cards: [
        { keyword: 'OBJECT', value: 'made star' },
        { keyword: 'CTYPE1', value: 'AWAV' },
        { keyword: 'CUNIT1', value: 'Angstrom' },
        { keyword: 'CRVAL1', value: 3900 },
        { keyword: 'CDELT1', value: 1.2 },
        { keyword: 'CRPIX1', value: 1 },
      ],
    },
  ]),
)

describe('the public API', () => {
  it('leads from bytes to spectra', () => {
    const { spectra } = readSpectra(openBytes(bytes), 'made.fits')
    expect(spectra).toHaveLength(1)
    expect(spectra[0].wavelength[1499]).toBeCloseTo(3900 + 1499 * 1.2, 9)
  })

  it('leads from bytes to an outcome, a night and rows', () => {
    const inForce = settingsInForce()
    const outcome = analyseFile(bytes, 'made.fits', { inForce, wantsCurves: false, wantsAllLines: false })
    const night = nightOf([outcome], { inForce })
    expect(tableRows('spectra', [outcome], night).map(({ file, object, samples }) => [file, object, samples])).toEqual([
      ['made.fits', 'made star', 1500],
    ])
  })
})
