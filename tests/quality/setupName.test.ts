import { describe, expect, it } from 'vitest'
import { setupDifferences, setupName } from '../../src/quality/setupName.ts'

describe('setupName', () => {
  it('names a set-up by its values in a fixed order', () => {
    expect(
      setupName({ instrument: 'SPEC', grating: '600', gratingTilt: 12.5, slit: '1.5 arcsec', binning: '2x2' }),
    ).toBe('SPEC, 600 tilt 12.5, slit 1.5 arcsec, 2x2')
  })

  it('leaves out what the header does not give, and an open filter', () => {
    expect(setupName({ grating: 'Gr#13', slit: 'slit#1.0', filter: 'Free' })).toBe('Gr#13, slit#1.0')
    expect(setupName({ filter: 'clear; GG495' })).toBe('filter clear; GG495')
    expect(setupName({})).toBe('not stated')
  })
})

describe('setupDifferences', () => {
  const science = { instrument: 'SPEC', binning: '2x2', window: '[1:10]', grating: '600', slit: '1.5' }
  it('names the facts that differ', () => {
    expect(setupDifferences(science, { ...science, binning: '1x1', slit: '3' }, 'all')).toEqual(['binning', 'slit'])
    expect(setupDifferences(science, { ...science, binning: '1x1', slit: '3' }, 'readout')).toEqual(['binning'])
  })
  it('does not hold a fact against a frame whose header does not give it', () => {
    expect(setupDifferences(science, { binning: '2x2' }, 'all')).toEqual([])
  })
  it('takes numbers within a thousandth and spellings apart in blanks and case for the same', () => {
    expect(setupDifferences({ gain: 1.4, slit: '1.5 ARCSEC' }, { gain: 1.4005, slit: '1.5arcsec' }, 'all')).toEqual([])
  })
})
