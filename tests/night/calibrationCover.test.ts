import { describe, expect, it } from 'vitest'
import type { NightSummary } from '../../src/night/types.ts'
import { COVER_RULES } from '../../src/tables/coverRules.ts'
import {
  madeCalibrations,
  madeFrame,
  madeNight,
  madeSpectrum,
  MINUTE,
  NIGHT,
  said,
  SETUP,
  STARS,
  starFacts,
} from './madeOutcomes.ts'

const science = (more = {}, minutes = 0) =>
  madeFrame('science', { ...starFacts(STARS[0], NIGHT + minutes * MINUTE), ...more })
const standard = madeFrame('standard', starFacts(STARS[1], NIGHT + 20 * MINUTE))

const cover = (night: NightSummary) => night.cover.flatMap(({ findings }) => said(findings))

describe('calibration cover', () => {
  it('counts what fits a set-up and finds nothing where the rules are met', () => {
    const [row, ...others] = madeNight([...madeCalibrations(), science(), standard], []).cover
    expect(others).toEqual([])
    expect(row).toMatchObject({ science: 1, bias: 5, flat: 3, arc: 1, dark: 0, standard: 1, findings: [] })
    // the arc lies 6 min after the science frame and 14 min before the standard
    expect(row.arcGapHours).toBeCloseTo(14 / 60, 6)
  })

  it('finds that an arc, flats and bias frames are missing', () => {
    expect(cover(madeNight([science(), standard], []))).toEqual([
      'doubt few-bias-frames',
      'doubt few-flats',
      'doubt few-arcs',
    ])
    const withoutArc = madeCalibrations().filter(({ frame }) => frame?.kind !== 'arc')
    expect(cover(madeNight([...withoutArc, science(), standard], []))).toEqual(['doubt few-arcs'])
  })

  it('only notes where there are some but fewer than wanted', () => {
    const few = madeCalibrations().filter((_, i) => i !== 0 && i !== 5)
    expect(cover(madeNight([...few, science(), standard], []))).toEqual(['note few-bias-frames', 'note few-flats'])
  })

  it('does not count calibrations of another binning, says why, and names those that fit nothing', () => {
    const binned = madeCalibrations({ ...SETUP, binning: '2x2' })
    const night = madeNight([...binned, science(), standard], [])
    const texts = night.cover[0].findings.map(({ text }) => text)
    expect(texts[0]).toBe(
      'Set-up SPEC, B600, slit 1.5, 1x1: no bias frame fits, 5 wanted (5 bias frames of the folder differ in binning)',
    )
    expect(said(night.findings)).toEqual([
      'doubt calibration-does-not-fit',
      'doubt calibration-does-not-fit',
      'doubt calibration-does-not-fit',
    ])
    expect(night.findings[0].text).toBe(
      '5 bias frames of set-up SPEC, B600, slit 1.5, 2x2 fit no science exposure: other binning',
    )
  })

  it('takes a bias of any grating but flats and arcs of the same only', () => {
    const other = madeCalibrations({ ...SETUP, grating: 'R400' })
    expect(cover(madeNight([...other, science(), standard], []))).toEqual(['doubt few-flats', 'doubt few-arcs'])
  })

  it('does not count frames that cannot be used', () => {
    const dark = madeCalibrations().map((outcome) =>
      outcome.frame?.kind === 'arc'
        ? { ...outcome, frame: { ...outcome.frame, quality: 'unusable' as const } }
        : outcome,
    )
    const night = madeNight([...dark, science(), standard], [])
    expect(night.cover[0].findings.map(({ text }) => text)).toEqual([
      'Set-up SPEC, B600, slit 1.5, 1x1: no arc fits, 1 wanted (1 arc cannot be used)',
    ])
  })

  it('finds an arc that lies too far away in time', () => {
    const night = madeNight([...madeCalibrations(), science({}, 180), standard], [])
    // 180 − 6 min
    expect(night.cover[0].arcGapHours).toBeCloseTo(2.9, 6)
    expect(cover(night)).toEqual(['doubt arc-far-in-time'])
  })

  it('notes a missing standard and weak flats', () => {
    const weak = madeCalibrations().map((outcome) =>
      outcome.frame?.kind === 'flat' && outcome.frame.statistics
        ? {
            ...outcome,
            frame: {
              ...outcome.frame,
              statistics: { ...outcome.frame.statistics, p99: COVER_RULES.flatLevel.value / 2 },
            },
          }
        : outcome,
    )
    expect(cover(madeNight([...weak, science()], []))).toEqual(['note no-standard', 'note weak-flat'])
  })

  it('judges extracted spectra where the folder has no raw science frame, and nothing without any calibration', () => {
    expect(madeNight([...madeCalibrations(), madeSpectrum()], []).cover).toMatchObject([{ science: 1, arc: 1 }])
    expect(madeNight([madeSpectrum()], []).cover).toEqual([])
  })
})
