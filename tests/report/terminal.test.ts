import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { columnWidth, cutToWidth, wrapToWidth } from '../../src/report/columnWidth.ts'
import { nightSummaryText } from '../../src/report/nightText.ts'
import { TABLE_NAMES } from '../../src/report/row.ts'
import { tableRows } from '../../src/report/tableRows.ts'
import { terminalTable } from '../../src/report/terminalTable.ts'
import { madeNight, madeOutcome } from '../support/madeNight.ts'
import { HOSTILE_NAME } from '../support/oddTargets.ts'

const { outcomes, night } = madeNight(9, { curves: false })
const all = [...outcomes, madeOutcome({ object: HOSTILE_NAME, curves: false })]
const ESCAPES = new RegExp('\\u001b\\[\\d+m', 'g')

describe('columnWidth', () => {
  // Unicode Standard Annex 11: wide letters fill two columns, marks none.
  it.each([
    ['Hα', 2],
    ['星の', 4],
    ['e\u0301', 1],
    ['', 0],
  ])('%j fills %i columns', (text, width) => expect(columnWidth(text)).toBe(width))

  it('cuts and wraps to the width for any text', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'grapheme' }), fc.integer({ min: 2, max: 30 }), (text, width) => {
        expect(columnWidth(cutToWidth(text, width))).toBeLessThanOrEqual(width)
        for (const line of wrapToWidth(text, width)) expect(columnWidth(line)).toBeLessThanOrEqual(width)
      }),
      { seed: 3 },
    )
  })
})

describe('terminalTable', () => {
  for (const width of [40, 80, 132, 200])
    it(`fits ${width} columns and lets no control character through`, () => {
      for (const name of TABLE_NAMES) {
        const text = terminalTable(name, tableRows(name, all, night), { width, colour: false })
        for (const line of text.split('\n')) expect(columnWidth(line), line).toBeLessThanOrEqual(width)
        expect(text.replaceAll('\n', '')).not.toMatch(/\p{Cc}/u)
      }
    })

  it('says the same with colours as without', () => {
    const rows = tableRows('spectra', all, night)
    const coloured = terminalTable('spectra', rows, { width: 120, colour: true })
    expect(coloured).toMatch(ESCAPES)
    expect(coloured.replace(ESCAPES, '')).toBe(terminalTable('spectra', rows, { width: 120, colour: false }))
  })

  it('keeps what matters most on a narrow terminal', () => {
    const [head] = terminalTable('spectra', tableRows('spectra', all, night), { width: 60, colour: false }).split('\n')
    for (const name of ['object', 'spectral_type', 'quality']) expect(head).toContain(name)
  })

  it('says so where there is no row', () => {
    expect(terminalTable('lines', [], { width: 80, colour: false })).toBe('no lines\n')
  })
})

describe('nightSummaryText', () => {
  it.each([30, 60, 100])('fits %i columns', (width) => {
    for (const line of nightSummaryText(night, outcomes, { width, colour: false }).split('\n'))
      expect(columnWidth(line), line).toBeLessThanOrEqual(width)
  })

  it('says first what to observe again, the most urgent first', () => {
    const text = nightSummaryText(night, outcomes, { width: 100, colour: false })
    const places = [
      'Observe again first',
      'Made 4: signal',
      'Made, never reached: listed but not observed (needs 25 min)',
      'Made 5: the type',
      'Files that could not be read',
      'no arc covers',
      'Targets',
    ]
    const found = places.map((place) => text.indexOf(place))
    expect(found.every((at) => at >= 0)).toBe(true)
    expect(found).toEqual([...found].sort((a, b) => a - b))
  })
})
