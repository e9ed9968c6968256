import { describe, expect, it } from 'vitest'
import type { Finding } from '../../src/findings/types.ts'
import { countsText, doubtsOf, doubtText, nightFindings } from '../../src/report/doubts.ts'
import { shortSetups } from '../../src/report/setupWords.ts'
import { targetViews } from '../../src/report/targetView.ts'
import { madeNight } from '../support/madeNight.ts'

const doubt = (code: string, text: string): Finding => ({ level: 'doubt', code, text })

/** The made night with a finding of the night on some of its spectra. */
function nightWith(found: Readonly<Record<number, readonly Finding[]>>) {
  const { outcomes, night } = madeNight(9, { curves: false })
  const spectra = night.spectra.map((one, i) => ({ ...one, findings: [...one.findings, ...(found[i] ?? [])] }))
  return { outcomes, night: { ...night, spectra } }
}

describe('doubtsOf', () => {
  it('names each target in doubt with its gravest finding, those with the same one together', () => {
    const fault: Finding = { level: 'fault', code: 'too-faint', text: 'No part rises above its noise' }
    const { outcomes, night } = nightWith({
      0: [doubt('clock', 'The time is odd')],
      1: [doubt('clock', 'The time is odd too')],
      7: [doubt('clock', 'x'), fault],
    })
    const doubts = doubtsOf(outcomes, night, targetViews(outcomes, night))
    expect(doubts.map((d) => [d.name, d.level, d.alike, d.more])).toEqual([
      ['Made 8', 'fault', [], 1],
      ['Made 1', 'doubt', ['Made 2'], 0],
    ])
    expect(doubts.map((d) => doubtText(d))).toEqual([
      'No part rises above its noise (and 1 more)',
      'The time is odd; alike: Made 2',
    ])
  })

  it('leaves out what is to be observed again anyway, and notes', () => {
    const { outcomes, night } = nightWith({
      3: [doubt('clock', 'The time is odd')],
      0: [{ level: 'note', code: 'n', text: 'n' }],
    })
    expect(night.observeAgain.map(({ target }) => target)).toContain('Made 4')
    expect(doubtsOf(outcomes, night, targetViews(outcomes, night))).toEqual([])
  })

  it('names a raw frame in doubt by its file, and a target that has raw frames only', () => {
    const { outcomes, night } = madeNight(9, { curves: false })
    const i = outcomes.findIndex(({ frame }) => frame?.kind === 'flat')
    const rawOnly = {
      ...night.targets[0],
      target: 'Made raw',
      spectra: [],
      findings: [{ level: 'note', code: 'only-raw-frames', text: 'Made raw: 1 raw frame' } as const],
    }
    const changed = {
      ...night,
      targets: [...night.targets, rawOnly],
      frameFindings: new Map([[i, [doubt('odd', 'The flat is odd')]]]),
    }
    expect(doubtsOf(outcomes, changed, targetViews(outcomes, changed)).map((d) => [d.name, d.text])).toEqual([
      [outcomes[i].file, 'The flat is odd'],
      ['Made raw', '1 raw frame'],
    ])
  })
})

describe('nightFindings', () => {
  it('holds those of calibrations and of drifts too, the gravest first, without targets never observed', () => {
    const { night } = madeNight(9, { curves: false })
    const missed = doubt('never-observed', 'Made, never reached has no spectrum')
    expect(nightFindings({ ...night, findings: [...night.findings, missed] }).map(({ code }) => code)).toEqual([
      'no-arc',
      'common-offset',
      'zero-point-drift',
    ])
  })
})

describe('countsText', () => {
  it('counts listed targets that were never reached among those to observe again', () => {
    const { night } = madeNight(9, { curves: false })
    expect(countsText(night)).toMatch(/^3 of 10 targets to observe again, 1 of them never reached; 9 spectra: /)
    expect(countsText({ ...night, observeAgain: [], notObserved: [] })).toMatch(/^9 targets, none to observe again; /)
  })
})

describe('shortSetups', () => {
  it('leaves out what all set-ups share, never all of a name', () => {
    const short = shortSetups(['S, R400, slit 1.5', 'S, B600, slit 1.5', 'S, slit 1.5'])
    expect([...short.values()]).toEqual(['R400', 'B600', 'S, slit 1.5'])
    expect(shortSetups(['S, slit 1.5']).get('S, slit 1.5')).toBe('S, slit 1.5')
    expect(shortSetups([]).size).toBe(0)
  })
})
