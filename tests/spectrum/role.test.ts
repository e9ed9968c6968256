import { describe, expect, it } from 'vitest'
import { spectrumRole } from '../../src/spectrum/role.ts'
import { velocityFrame } from '../../src/spectrum/velocityFrame.ts'
import { headerOf } from '../../src/fits/header.ts'
import type { CardValue } from '../../src/fits/types.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'

describe('spectrumRole', () => {
  it.each([
    'ARC: Xe',
    'arc_2',
    'HgArNe',
    'ThAr9500A',
    'Cu',
    'CuHeAr_930m3',
    'HeAr239',
    'Fe-Ar',
    'comp',
    'lamp',
    'WAVE',
  ])('takes the object "%s" for a lamp', (object) => {
    expect(spectrumRole({ object })).toBe('lamp')
  })

  it.each([
    'HE 0107-5240',
    'AR Lac',
    'CD-38 245',
    'KR Aur',
    'Arcturus',
    'NE Gem',
    'Feige 110',
    'HD 30501',
    'BD+17 4708',
    'Theta Lyr',
    'Sky map target',
  ])('never takes the star "%s" for a lamp', (object) => {
    expect(spectrumRole({ object })).not.toBe('lamp')
  })

  it('goes by the words about the frame first', () => {
    expect(spectrumRole({ object: '2020zgl', frameWords: 'ARC' })).toBe('lamp')
    expect(spectrumRole({ object: 'SN-1979C', frameWords: 'SKY; SCIENCE' })).toBe('sky')
    expect(spectrumRole({ object: 'none', frameWords: 'FLAT' })).toBe('calibration')
    expect(spectrumRole({ object: 'HD 1', frameWords: 'OBJECT; SCIENCE; SPECTRUM' })).toBe('star')
    expect(spectrumRole({})).toBe('star')
  })
})

describe('velocityFrame', () => {
  const of = (cards: Readonly<Record<string, CardValue>>): ReturnType<typeof velocityFrame> =>
    velocityFrame(
      [headerOf(Object.entries(cards).map(([keyword, value]) => ({ keyword, value, comment: '', byte: 0 })))],
      KEYWORDS,
    )

  it.each([
    [{ SPECSYS: 'BARYCENT' }, 'barycentric'],
    [{ SPECSYS: 'HELIOCEN' }, 'heliocentric'],
    [{ SPECSYS: 'TOPOCENT' }, 'topocentric'],
    [{ HELCORR: 'COMPLETE' }, 'heliocentric'],
    [{ HELCORR: 'OMIT' }, 'unknown'],
    [{ BARYCORR: true }, 'barycentric'],
    [{ BARYCORR: false }, 'unknown'],
    [{ 'ESO DRS BERV': 7.1 }, 'barycentric'],
    [{ BSS_VHEL: 0 }, 'unknown'],
    [{ BSS_VHEL: -12.3 }, 'heliocentric'],
    [{ VHELIO: 12 }, 'unknown'],
    [{}, 'unknown'],
  ])('reads %j', (cards, frame) => {
    expect(of(cards as Readonly<Record<string, CardValue>>).frame).toBe(frame)
  })

  it('gives the velocity that was taken out only where one was', () => {
    expect(of({ 'ESO DRS BERV': 7.1 }).applied).toBe(7.1)
    expect(of({ VHELIO: 12 }).applied).toBeUndefined()
  })
})
