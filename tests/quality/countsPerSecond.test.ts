import { describe, expect, it } from 'vitest'
import { countsPerSecond } from '../../src/quality/countsPerSecond.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'

const wavelength = Float64Array.from({ length: 501 }, (_, i) => 5000 + 2 * i)
const counts = (values: Partial<Spectrum>): Spectrum => ({
  wavelength,
  flux: wavelength.map((w) => (w < 5400 || w > 5600 ? 1000 : 300)),
  usable: new Uint8Array(501).fill(1),
  hdu: 0,
  medium: 'air',
  mediumHow: 'declared',
  frame: 'unknown',
  fluxUnit: 'adu',
  fluxKind: 'counts',
  uncertainty: 'none',
  convention: 'made for this test',
  role: 'star',
  facts: { exposure: 50 },
  asStored: { samples: 501, medium: 'air', first: 5000, last: 6000, fluxFirst: 1000, fluxLast: 1000, nonfinite: 0 },
  notes: [],
  ...values,
})

describe('countsPerSecond', () => {
  it('is the median about 5500 Å over the exposure time', () => {
    expect(countsPerSecond(counts({}))).toBe(300 / 50)
  })
  it('is absent without counts or an exposure time', () => {
    expect(countsPerSecond(counts({ fluxKind: 'flux density' }))).toBeUndefined()
    expect(countsPerSecond(counts({ facts: {} }))).toBeUndefined()
    expect(countsPerSecond(counts({ usable: new Uint8Array(501) }))).toBeUndefined()
  })
})
