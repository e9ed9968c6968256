import { describe, expect, it } from 'vitest'
import { frameFacts } from '../../src/quality/frameFacts.ts'
import type { FrameStatistics } from '../../src/quality/types.ts'
import type { HeaderFacts } from '../../src/spectrum/types.ts'
import { THRESHOLDS } from '../../src/tables/thresholds.ts'

const BIAS: FrameStatistics = {
  width: 1000,
  height: 200,
  median: 500,
  p99: 509,
  max: 520,
  noise: 4,
  saturatedFraction: 0,
  nonfinite: 0,
  arcLines: 0,
}
const FLAT: FrameStatistics = { ...BIAS, median: 20000, p99: 31000, max: 33000, noise: 120 }
const ARC: FrameStatistics = { ...BIAS, p99: 9000, max: 40000, arcLines: 25, arcPeak: 20000 }
const STAR: FrameStatistics = {
  ...BIAS,
  p99: 900,
  arcLines: 9,
  trace: { position: 90, fwhm: 3, peak: 300 },
  traceContrast: 9,
}

const codes = (facts: HeaderFacts, statistics: FrameStatistics): readonly string[] =>
  frameFacts(facts, statistics, THRESHOLDS).findings.map(({ code, level }) => `${level} ${code}`)

describe('checkFrame', () => {
  it('finds nothing in healthy frames of each kind', () => {
    expect(codes({ frameWords: 'bias', readNoise: 5.6, gain: 1.4 }, BIAS)).toEqual([])
    expect(codes({ frameWords: 'dark', exposure: 600 }, BIAS)).toEqual([])
    expect(codes({ frameWords: 'flat' }, FLAT)).toEqual([])
    expect(codes({ frameWords: 'arc' }, ARC)).toEqual([])
    expect(codes({ frameWords: 'object', object: 'HD 1' }, STAR)).toEqual([])
  })

  it('finds an arc and a flat whose lamp was off, and makes them unusable', () => {
    expect(codes({ frameWords: 'arc' }, BIAS)).toEqual(['fault lamp-off'])
    expect(codes({ frameWords: 'flat', gain: 1.4 }, BIAS)).toEqual(['fault lamp-off'])
    expect(frameFacts({ frameWords: 'arc' }, BIAS, THRESHOLDS).quality).toBe('unusable')
  })

  it('does not call an evenly lit flat dark: its noise is that of its photons', () => {
    // 20,000 photons at a gain of 1 scatter by 141
    expect(codes({ frameWords: 'flat', gain: 1 }, { ...FLAT, p99: 20330, noise: 141 })).toEqual([])
  })

  it('finds a saturated lamp', () => {
    expect(codes({ frameWords: 'flat' }, { ...FLAT, saturatedFraction: 0.2 })).toEqual(['doubt lamp-saturated'])
    expect(codes({ frameWords: 'arc' }, { ...ARC, saturatedFraction: 0.005 })).toEqual([])
  })

  it('finds an arc of too few lines', () => {
    expect(codes({ frameWords: 'arc' }, { ...ARC, arcLines: 3 })).toEqual(['doubt few-arc-lines'])
  })

  it('finds light and too much noise in a bias', () => {
    expect(codes({ frameWords: 'bias' }, { ...BIAS, p99: 700 })).toEqual([
      'doubt kind-disagrees',
      'doubt bias-holds-light',
    ])
    // header: 5.6 e⁻ / 1.4 e⁻ per count = 4 counts
    expect(codes({ frameWords: 'bias', readNoise: 5.6, gain: 1.4 }, { ...BIAS, noise: 9 })).toEqual([
      'doubt bias-noise',
    ])
  })

  it('finds a science frame without a star, and one far out of focus', () => {
    expect(
      codes({ frameWords: 'object', object: 'HD 1' }, { ...STAR, trace: undefined, traceContrast: undefined }),
    ).toEqual(['doubt no-trace'])
    const wide = { ...STAR, trace: { position: 90, fwhm: 44, peak: 300 } }
    expect(codes({ frameWords: 'object', object: 'HD 1' }, wide)).toEqual(['doubt wide-trace'])
  })

  it('says when the kind is told by pixels alone', () => {
    expect(codes({ exposure: 10 }, ARC)).toEqual(['note kind-from-pixels'])
  })

  it('leaves out statistics that mean nothing for the kind', () => {
    expect(
      frameFacts({ frameWords: 'arc' }, { ...ARC, trace: STAR.trace }, THRESHOLDS).statistics?.trace,
    ).toBeUndefined()
    expect(frameFacts({ frameWords: 'object', object: 'x' }, STAR, THRESHOLDS).statistics?.arcLines).toBeUndefined()
  })
})
