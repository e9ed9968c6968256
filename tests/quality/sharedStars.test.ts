import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { checkSpectrum } from '../../src/quality/checkSpectrum.ts'
import { THRESHOLDS } from '../../src/tables/thresholds.ts'
import type { TypePosterior } from '../../src/typing/types.ts'
import { readShared, readSharedTable } from '../support/readShared.ts'
import { hasShared, NEEDS_SHARED } from '../support/shared.ts'

/** Every third star: the checks look at each alike, and reading them all would take long. */
const rows = hasShared
  ? readSharedTable('stars/manifest.tsv').filter(
      ({ set }, i) => (set === 'atlas' && i % 3 === 0) || set === 'standards',
    )
  : []

const LETTERS = 'OBAFGKM'

describe.skipIf(!hasShared)(`checks of real single stars (${NEEDS_SHARED})`, () => {
  it('raise no more than a note on a healthy star', () => {
    const alarms: string[] = []
    for (const row of rows) {
      const spectrum = readShared(`stars/${row.file}`)
      const typeNumber = 10 * LETTERS.indexOf(row.spectral_type[0]) + Number.parseFloat(row.spectral_type.slice(1))
      const type: TypePosterior = {
        state: 'typed',
        typeNumber,
        peculiar: [],
        evidence: [],
        ratios: [],
        featuresUsed: 30,
      }
      const { findings } = checkSpectrum(
        {
          spectrum,
          continuum: fitContinuum(spectrum),
          restFrame: { velocity: 0, error: 5, trusted: true, how: 'cross-correlation' },
          measurements: [],
          type,
        },
        THRESHOLDS,
      )
      for (const { level, text } of findings) if (level !== 'note') alarms.push(`${row.file}: ${text}`)
    }
    expect(rows.length).toBeGreaterThan(60)
    expect(alarms).toEqual([])
  })
})
