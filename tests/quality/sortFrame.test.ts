import { describe, expect, it } from 'vitest'
import { sortFrame } from '../../src/quality/sortFrame.ts'
import type { FrameKind, FrameStatistics } from '../../src/quality/types.ts'
import type { HeaderFacts } from '../../src/spectrum/types.ts'

/** Header facts of kinds of frames as observatories write them; common practice of the archives, no source. */
const CASES: readonly { readonly kind: FrameKind; readonly facts: HeaderFacts }[] = [
  { kind: 'bias', facts: { frameWords: 'BIAS', exposure: 0 } },
  { kind: 'bias', facts: { frameWords: 'zero' } },
  { kind: 'bias', facts: { frameWords: 'Bias Frame' } },
  { kind: 'bias', facts: { frameWords: 'CALIB; BIAS; IMAGE', object: 'BIAS' } },
  { kind: 'bias', facts: { frameWords: 'OBJECT', object: 'bias_003', exposure: 0 } },
  { kind: 'bias', facts: { object: 'zero', exposure: 0 } },
  { kind: 'bias', facts: { exposure: 0 } },
  { kind: 'dark', facts: { frameWords: 'DARK', exposure: 600 } },
  { kind: 'dark', facts: { frameWords: 'Dark Frame' } },
  { kind: 'dark', facts: { frameWords: 'expose', object: 'dark 600s' } },
  { kind: 'flat', facts: { frameWords: 'FLAT' } },
  { kind: 'flat', facts: { frameWords: 'Flat Field' } },
  { kind: 'flat', facts: { frameWords: 'CALIB; FLAT; SPECTRUM', object: 'FLAT' } },
  { kind: 'flat', facts: { frameWords: 'LAMP,FLAT' } },
  { kind: 'flat', facts: { frameWords: 'DOMEFLAT' } },
  { kind: 'flat', facts: { frameWords: 'LAMPFLAT' } },
  { kind: 'flat', facts: { frameWords: 'OBJECT', object: 'dflat' } },
  { kind: 'flat', facts: { frameWords: 'object', object: 'Quartz 3s' } },
  { kind: 'flat', facts: { frameWords: 'EXPOSE', object: 'domeflat blue' } },
  { kind: 'flat', facts: { frameWords: 'EXPOSE', object: 'LAMPFLAT: W for None', lamp: 'W' } },
  { kind: 'flat', facts: { frameWords: 'EXPOSE', lamp: 'W' } },
  { kind: 'skyflat', facts: { frameWords: 'FLAT,SKY' } },
  { kind: 'skyflat', facts: { frameWords: 'SKYFLAT' } },
  { kind: 'skyflat', facts: { frameWords: 'sky flat' } },
  { kind: 'skyflat', facts: { frameWords: 'flat', object: 'twilight' } },
  { kind: 'skyflat', facts: { frameWords: 'twilight flat' } },
  { kind: 'arc', facts: { frameWords: 'ARC' } },
  { kind: 'arc', facts: { frameWords: 'comp' } },
  { kind: 'arc', facts: { frameWords: 'COMPARISON' } },
  { kind: 'arc', facts: { frameWords: 'WAVE; CALIB; SPECTRUM', object: 'WAVE' } },
  { kind: 'arc', facts: { frameWords: 'WAVE,LAMP' } },
  { kind: 'arc', facts: { frameWords: 'calibration lamp', object: 'HeNeAr' } },
  { kind: 'arc', facts: { frameWords: 'EXPOSE', object: 'ARC: Xe for HD 1', lamp: 'Xe' } },
  { kind: 'arc', facts: { frameWords: 'OBJECT', object: 'arc_2' } },
  { kind: 'arc', facts: { frameWords: 'object', object: 'CuAr' } },
  { kind: 'arc', facts: { frameWords: 'object', object: 'ThAr lamp' } },
  { kind: 'arc', facts: { frameWords: 'object', object: 'HD 1234', lamp: 'HeNe' } },
  { kind: 'focus', facts: { frameWords: 'FOCUS' } },
  { kind: 'focus', facts: { frameWords: 'object', object: 'focus 3' } },
  { kind: 'acquisition', facts: { frameWords: 'ACQUISITION; OBJECT; IMAGE', object: 'HD 1' } },
  { kind: 'acquisition', facts: { frameWords: 'acq', object: 'HD 1' } },
  { kind: 'acquisition', facts: { frameWords: 'SLIT; ACQ' } },
  { kind: 'standard', facts: { frameWords: 'STD; CALIB; SPECTRUM', object: 'LTT 3218' } },
  { kind: 'standard', facts: { frameWords: 'STANDARD', object: 'HR 7001' } },
  { kind: 'sky', facts: { frameWords: 'SKY' } },
  { kind: 'sky', facts: { frameWords: 'SCIENCE; SKY; SPECTRUM', object: 'SKY' } },
  { kind: 'science', facts: { frameWords: 'OBJECT', object: 'HD 12345', exposure: 300 } },
  { kind: 'science', facts: { frameWords: 'SCIENCE; OBJECT; SPECTRUM', object: 'NGC 188 12' } },
  { kind: 'science', facts: { frameWords: 'EXPOSE', object: 'LHS6328', exposure: 120 } },
  { kind: 'science', facts: { frameWords: 'Light Frame', object: 'Vega', exposure: 5 } },
  { kind: 'science', facts: { frameWords: 'object', object: 'Arcturus', exposure: 1 } },
  { kind: 'science', facts: { frameWords: 'object', object: 'Wavelet 3', exposure: 1 } },
  { kind: 'science', facts: { frameWords: 'object', object: 'Focaccia', exposure: 1, lamp: 'none' } },
]

const NOISE: FrameStatistics = {
  width: 1000,
  height: 200,
  median: 500,
  p99: 512,
  max: 530,
  noise: 5,
  saturatedFraction: 0,
  nonfinite: 0,
  arcLines: 0,
}

describe('sortFrame', () => {
  for (const { kind, facts } of CASES)
    it(`takes ${JSON.stringify(facts)} for ${kind} by its header`, () => {
      expect(sortFrame(facts)).toMatchObject({ kind, kindHow: 'header' })
    })

  const trace = { position: 100, fwhm: 3, peak: 80 }
  const seen: readonly {
    readonly kind: FrameKind
    readonly facts: HeaderFacts
    readonly pixels: Partial<FrameStatistics>
  }[] = [
    { kind: 'bias', facts: {}, pixels: {} },
    { kind: 'dark', facts: { exposure: 900 }, pixels: { p99: 520 } },
    { kind: 'arc', facts: { exposure: 10 }, pixels: { p99: 20000, arcLines: 31, max: 50000 } },
    { kind: 'flat', facts: { exposure: 5 }, pixels: { median: 20000, p99: 32000, noise: 120 } },
    { kind: 'science', facts: { exposure: 600 }, pixels: { p99: 700, arcLines: 20, trace, traceContrast: 2 } },
    { kind: 'unknown', facts: { exposure: 600 }, pixels: { p99: 700, arcLines: 5 } },
  ]
  for (const { kind, facts, pixels } of seen)
    it(`takes a frame without words for ${kind} by its pixels ${JSON.stringify(pixels)}`, () => {
      expect(sortFrame(facts, { ...NOISE, ...pixels })).toMatchObject({ kind, kindHow: 'content' })
    })

  it('says so where header and pixels do not agree', () => {
    const lit = { ...NOISE, p99: 20000, arcLines: 31 }
    expect(sortFrame({ frameWords: 'BIAS' }, lit)).toMatchObject({ kind: 'bias', looksLike: 'arc' })
    expect(sortFrame({ frameWords: 'BIAS' }, NOISE).looksLike).toBeUndefined()
  })

  it('does not take the name of a lamp at hand for a lamp that burns where a star stands on the slit', () => {
    const star = { ...NOISE, p99: 700, arcLines: 20, trace, traceContrast: 2 }
    expect(sortFrame({ frameWords: 'OBJECT', object: 'SN 2019X', lamp: 'Neon' }, star).kind).toBe('science')
    expect(sortFrame({ frameWords: 'OBJECT', object: 'SN 2019X', lamp: 'Neon' }).kind).toBe('arc')
  })

  it('does not guess without words or pixels', () => {
    expect(sortFrame({})).toMatchObject({ kind: 'unknown' })
  })
})
