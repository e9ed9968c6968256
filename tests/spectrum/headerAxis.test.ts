import { describe, expect, it } from 'vitest'
import { image, ramp, readMade } from './made.ts'

describe('headerAxis', () => {
  it.each([
    ['CRVAL1', { CRVAL1: 'hello', CDELT1: 1.5 }, 'hello'],
    ['CRVAL1', { CRVAL1: '3800,5', CDELT1: 1.5 }, '3800,5'],
    ['CDELT1', { CRVAL1: 4000, CDELT1: 'wide' }, 'wide'],
  ])('names %s and its value where it is no number', (keyword, cards, text) => {
    const { spectra, error } = readMade([image(ramp(100), cards)])
    expect(spectra).toEqual([])
    expect(error).toMatchObject({
      code: 'no-wavelength-axis',
      where: { hdu: 0, keyword },
    })
    expect(error?.message).toContain(`${keyword} requires a number, got ${text}`)
  })

  it('says that the cards are missing where they are', () => {
    expect(readMade([image(ramp(100), {})]).error?.message).toContain('requires CRVAL1 with a step')
  })
})
