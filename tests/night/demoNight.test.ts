import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { demoNight } from '../../src/demo/demoNight.ts'
import type { Finding } from '../../src/findings/types.ts'
import { memorySource } from '../../src/fits/source.ts'
import { parseTargets } from '../../src/night/parseTargets.ts'
import type { NightSummary } from '../../src/night/types.ts'
import { analyseFile } from '../../src/pipeline/analyseFile.ts'
import { nightOf } from '../../src/pipeline/nightOf.ts'
import { settingsInForce } from '../../src/pipeline/settingsInForce.ts'
import type { Outcome } from '../../src/quality/types.ts'

/** The whole invented night through the program's own stages, in memory. */
function runDemo(clean: boolean): { readonly outcomes: readonly Outcome[]; readonly night: NightSummary } {
  const inForce = settingsInForce()
  const outcomes: Outcome[] = []
  let list = ''
  for (const { path, bytes } of demoNight({ clean })) {
    if (path === 'targets.csv') list = new TextDecoder().decode(bytes)
    if (!path.includes('.fits')) continue
    const outcome = analyseFile(memorySource(bytes), path, { inForce, wantsCurves: false, wantsAllLines: false })
    outcomes.push({ ...outcome, sha256: createHash('sha256').update(bytes).digest('hex') })
  }
  return { outcomes, night: nightOf(outcomes, { inForce, targets: parseTargets(list, 'targets.csv').targets }) }
}

function allFindings(outcomes: readonly Outcome[], night: NightSummary): readonly Finding[] {
  return [
    ...outcomes.flatMap(({ frame, spectra, notes }) => [
      ...(frame?.findings ?? []),
      ...notes,
      ...spectra.flatMap(({ findings }) => findings),
    ]),
    ...night.findings,
    ...night.spectra.flatMap(({ findings }) => findings),
    ...[...night.cover, ...night.drifts, ...night.targets].flatMap(({ findings }) => findings),
    ...[...night.frameFindings.values()].flat(),
  ]
}

describe('the invented demo night', () => {
  it('gives no finding worse than a note when it is clean', () => {
    const { outcomes, night } = runDemo(true)
    expect(allFindings(outcomes, night).filter(({ level }) => level !== 'note')).toEqual([])
    expect(night.observeAgain).toEqual([])
    expect(night.counts).toMatchObject({ doubtful: 0, unusable: 0, unreadable: 0 })
  })

  it('has each of its planted troubles found', () => {
    const { outcomes, night } = runDemo(false)
    const codes = new Set(
      allFindings(outcomes, night)
        .filter(({ level }) => level !== 'note')
        .map(({ code }) => code),
    )
    for (const code of [
      'position-off-target', // wrong star, by its place
      'type-unlike-expected', // and by its type
      'flat-topped', // saturated
      'low-signal-to-noise', // too faint
      'cosmic-ray-on-line',
      'few-arcs', // the arcs of one set-up are missing
      'sky-over-subtracted',
      'clock-out-of-order', // clock slip
      'lamp-off',
      'never-observed',
      'zero-point-jump',
    ])
      expect(codes, code).toContain(code)
    expect(allFindings(outcomes, night).map(({ code }) => code)).toContain('duplicate-file')
    expect(outcomes.filter(({ error }) => error).map(({ error }) => error?.code)).toEqual(['truncated-data'])
    expect(night.observeAgain?.map(({ target }) => target)).toEqual(['Pellandor', 'Hespora', 'Dorvath', 'Quorine'])
  })
})
