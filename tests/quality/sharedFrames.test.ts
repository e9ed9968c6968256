import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { inflateSource } from '../../src/fits/inflate.ts'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import { frameFacts } from '../../src/quality/frameFacts.ts'
import { frameStatistics } from '../../src/quality/frameStatistics.ts'
import { sortFrame } from '../../src/quality/sortFrame.ts'
import { readHeaderFacts } from '../../src/spectrum/headerFacts.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'
import { THRESHOLDS } from '../../src/tables/thresholds.ts'
import { readSharedTable } from '../support/readShared.ts'
import { hasShared, NEEDS_SHARED, sharedPath } from '../support/shared.ts'

const rows = hasShared ? readSharedTable('frames/manifest.tsv') : []

describe.skipIf(!hasShared)(`real 2-D frames of three instruments (${NEEDS_SHARED})`, () => {
  it.each(rows.map((row) => [row.file, row] as const))('sorts and measures %s as its manifest says', (file, row) => {
    const source = inflateSource(memorySource(readFileSync(sharedPath(`frames/${file}`))))
    const [hdu] = openFits(source).hdus
    const { facts } = readHeaderFacts([hdu.header], KEYWORDS)
    const statistics = frameStatistics(source, hdu, facts)
    const frame = frameFacts(facts, statistics, THRESHOLDS)
    expect(frame.kind).toBe(row.kind)
    expect(frame.kindHow).toBe('header')
    expect(statistics.width).toBe(Number(row.naxis1))
    expect(statistics.height).toBe(Number(row.naxis2))
    // the manifest gives three decimals; single-precision floats add 1 part in 10⁷
    for (const [measured, wanted] of [
      [statistics.median, row.median],
      [statistics.p99, row.p99],
      [statistics.max, row.max],
    ] as const)
      expect(Math.abs(measured - Number(wanted))).toBeLessThan(0.003 + 2e-7 * Number(wanted))
    expect(frame.findings).toEqual([])
    if (row.kind === 'arc') expect(frame.statistics?.arcLines).toBeGreaterThan(20)
    if (row.kind === 'science') expect(frame.statistics?.trace?.fwhm).toBeLessThan(6)
    // a flat divided by its own shape keeps no light of a lamp to know it by
    if (file !== 'blue_resp_blue.fits')
      expect(sortFrame(facts.exposure === undefined ? {} : { exposure: facts.exposure }, statistics).kind).toBe(
        row.kind,
      )
  })
})
