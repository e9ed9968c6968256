import { describe, expect, it } from 'vitest'
import { PATTERNS } from '../../src/tables/patterns.ts'
import { checkMedium } from '../../src/velocity/checkMedium.ts'
import { checkStretch, partVelocities } from '../../src/velocity/checkStretch.ts'
import { commonOffset } from '../../src/velocity/commonOffset.ts'
import { findRestFrame } from '../../src/velocity/findRestFrame.ts'
import { straightenScale } from '../../src/velocity/straightenScale.ts'
import type { RestFrame } from '../../src/velocity/types.ts'
import { madeStar, MADE_STARS } from './madeStar.ts'

const frameAt = (velocity: number, error = 5): RestFrame => ({
  velocity,
  error,
  trusted: true,
  how: 'cross-correlation',
})
const codes = (found: readonly { readonly code: string }[]): string[] => found.map(({ code }) => code)

describe('checkMedium', () => {
  // 82 to 85 km/s: the index of air between 4000 and 8000 Å (Ciddor 1996)
  it('reports a velocity that is off a known one by air and vacuum', () => {
    const found = checkMedium({ mediumHow: 'declared' }, frameAt(103), { knownVelocity: 20 })
    expect(codes(found)).toEqual(['air-vacuum-by-velocity'])
    expect(found[0]).toMatchObject({ level: 'doubt', value: 83, unit: 'km/s' })
  })

  it('tells another difference from a known velocity from that of air and vacuum', () => {
    expect(codes(checkMedium({ mediumHow: 'declared' }, frameAt(220), { knownVelocity: 20 }))).toEqual([
      'velocity-differs-from-known',
    ])
    expect(checkMedium({ mediumHow: 'declared' }, frameAt(30), { knownVelocity: 20 })).toEqual([])
  })

  it('only notes a lone star’s 83 km/s where the medium was guessed', () => {
    expect(checkMedium({ mediumHow: 'guessed' }, frameAt(-84), {})).toMatchObject([
      { code: 'air-vacuum-possible', level: 'note' },
    ])
    expect(checkMedium({ mediumHow: 'declared' }, frameAt(-84), {})).toEqual([])
    expect(checkMedium({ mediumHow: 'guessed' }, frameAt(30), {})).toEqual([])
  })

  it('leaves the word to a zero point, and says nothing of an untrusted velocity', () => {
    const zeroPoint = { offset: 1, error: 2, from: '[O I] 5577' }
    expect(checkMedium({ mediumHow: 'guessed' }, frameAt(84), { zeroPoint })).toEqual([])
    expect(checkMedium({ mediumHow: 'guessed' }, { velocity: 0, trusted: false, how: 'none' }, {})).toEqual([])
  })
})

describe('commonOffset', () => {
  const stars = [-22, 14, 3, -8, 31, -15].map((velocity) => ({ velocity, error: 6 }))

  it('finds what six stars share, and that it is the difference of air and vacuum', () => {
    const found = commonOffset(stars.map(({ velocity, error }) => ({ velocity: velocity + 85, error })))
    // median of the six, −2.5, moved by 85
    expect(found?.offset).toBeCloseTo(82.5, 9)
    expect(found).toMatchObject({ stars: 6, isCommon: true, isMedium: true })
  })

  it('finds no common velocity in stars that move at random', () => {
    expect(commonOffset(stars)).toMatchObject({ isCommon: false, isMedium: false })
  })

  it('needs five stars with a velocity', () => {
    expect(commonOffset(stars.slice(0, 4))).toBeUndefined()
    expect(commonOffset(stars.map((s) => ({ ...s, error: 150 })))).toBeUndefined()
  })

  it('is not led astray by one fast star', () => {
    expect(commonOffset([...stars, { velocity: 900, error: 6 }])?.isCommon).toBe(false)
  })
})

describe('checkStretch and straightenScale', () => {
  /** The arm from 4700 Å on is 5 Å off, as seen in some published spectra. */
  const made = madeStar({
    lines: MADE_STARS.G,
    fwhm: 4.5,
    weakLines: 300,
    velocity: 40,
    scale: (w) => (w > 4700 && w < 5750 ? w + 5 : w),
  })

  it('finds an arm that is off, and makes the scale straight again', () => {
    const { spectrum, continuum } = made
    const frame = findRestFrame(spectrum, continuum, { patterns: PATTERNS })
    const found = checkStretch(partVelocities(spectrum, continuum, frame, PATTERNS))
    expect(found).toMatchObject([{ code: 'wavelength-scale-bent', level: 'doubt' }])
    // 5 Å at 5000 Å are 300 km/s
    expect(Math.abs((found[0].value ?? 0) - 300)).toBeLessThan(60)
    const straight = straightenScale(spectrum, continuum, frame, PATTERNS)
    expect(straight).toBeDefined()
    if (straight === undefined) return
    expect(straight.wavelength.every((w, i, all) => i === 0 || w > all[i - 1])).toBe(true)
    const again = findRestFrame(straight, continuum, { patterns: PATTERNS })
    expect(checkStretch(partVelocities(straight, continuum, again, PATTERNS))).toEqual([])
    expect(again.peak ?? 0).toBeGreaterThan(frame.peak ?? 0)
    expect(straight.notes.at(-1)?.code).toBe('scale-straightened')
  })

  it('finds nothing in a straight scale', () => {
    for (const kind of ['B', 'A', 'F', 'G', 'K'] as const) {
      const { spectrum, continuum } = madeStar({ lines: MADE_STARS[kind], fwhm: 4.5, velocity: -120, snr: 60 })
      const frame = findRestFrame(spectrum, continuum, { patterns: PATTERNS })
      expect(checkStretch(partVelocities(spectrum, continuum, frame, PATTERNS))).toEqual([])
    }
  })
})
