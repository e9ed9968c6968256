import { describe, expect, it } from 'vitest'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { withinRange } from '../../src/spectrum/withinRange.ts'

const spectrum: Spectrum = {
  wavelength: Float64Array.of(1000, 3000, 5000, 11000, 20000),
  flux: Float64Array.of(1, 2, 3, 4, 5),
  sigma: Float64Array.of(0.1, 0.2, 0.3, 0.4, 0.5),
  usable: Uint8Array.of(1, 1, 0, 1, 1),
  hdu: 0,
  medium: 'air',
  mediumHow: 'declared',
  frame: 'unknown',
  fluxUnit: '',
  fluxKind: 'unknown',
  uncertainty: 'sigma',
  convention: 'made for this test',
  role: 'star',
  facts: {},
  asStored: { samples: 5, medium: 'air', first: 1000, last: 20000, fluxFirst: 1, fluxLast: 5, nonfinite: 0 },
  notes: [],
}

describe('withinRange', () => {
  it('keeps the samples of the range with both limits, in every array', () => {
    const cut = withinRange(spectrum, 3000, 11000)
    expect([...cut.wavelength]).toEqual([3000, 5000, 11000])
    expect([...cut.flux]).toEqual([2, 3, 4])
    expect([...(cut.sigma ?? [])]).toEqual([0.2, 0.3, 0.4])
    expect([...cut.usable]).toEqual([1, 0, 1])
    expect(cut.asStored.samples).toBe(5)
  })
  it('gives the spectrum itself when it lies within, and an empty one when it lies beside', () => {
    expect(withinRange(spectrum, 0, 30000)).toBe(spectrum)
    expect(withinRange(spectrum, 30000, 40000).wavelength).toHaveLength(0)
  })
})
