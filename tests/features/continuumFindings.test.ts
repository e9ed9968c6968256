import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { continuumFindings } from '../../src/features/continuumFindings.ts'
import { asSpectrum, madeSpectrum } from '../support/madeSpectrum.ts'

const codes = (continuum: Parameters<typeof continuumFindings>[0]) =>
  continuumFindings(continuum).map(({ code }) => code)

describe('continuumFindings', () => {
  it('is silent for a hot star whose file states its uncertainty', () => {
    expect(codes(fitContinuum(madeSpectrum({ kind: 'A0', withSigma: true }).spectrum))).toEqual([])
  })

  it('says that a cool star has a pseudo-continuum and that noise was measured', () => {
    expect(codes(fitContinuum(madeSpectrum({ kind: 'K5' }).spectrum))).toEqual([
      'pseudo-continuum',
      'noise-not-in-file',
    ])
  })

  it('says that a spectrum without light has no continuum, and why a level is weak', () => {
    const dark = asSpectrum(
      Float64Array.from({ length: 100 }, (_, i) => 4000 + i),
      new Float64Array(100),
    )
    expect(codes(fitContinuum(dark))).toEqual(['no-continuum'])
    const weak = { ...fitContinuum(madeSpectrum({ kind: 'A0', withSigma: true }).spectrum), supported: 0.1 }
    expect(continuumFindings(weak)).toMatchObject([
      { level: 'doubt', value: 0.1, limit: 0.15, text: 'The continuum rests on 10 % of the spectrum, under 15 %' },
    ])
  })
})
