import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { PALETTE } from '../../src/report/palette.ts'
import { plainText } from '../../src/report/plainText.ts'
import { spread } from '../../src/report/spread.ts'
import { clockTime, dateAndTime, nightDates } from '../../src/report/timeWords.ts'
import {
  duration,
  featureWord,
  percent,
  shortNumber,
  signed,
  typeNumberOf,
  typeRange,
  typeWord,
  withError,
} from '../../src/report/words.ts'

describe('words', () => {
  it('names type numbers to half a subclass and reads them back', () => {
    // Type numbers as the project defines them: O0 = 0, B0 = 10 ... M0 = 60.
    expect([0, 9.5, 10, 42.2, 60, 69.9].map(typeWord)).toEqual(['O0', 'O9.5', 'B0', 'G2', 'M0', 'M9.5'])
    for (let number = 0; number < 70; number += 0.5) expect(typeNumberOf(`${typeWord(number)} V`)).toBe(number)
    expect(typeNumberOf('DA')).toBeUndefined()
    expect(typeRange(41, 43)).toBe('G1–G3')
    expect(typeRange(42, 42.1)).toBe('G2')
  })

  it('never says that a probability is nothing or all when it is not', () => {
    expect([0, 0.0002, 0.003, 0.05, 0.62, 0.995, 1].map(percent)).toEqual([
      '0 %',
      '<0.1 %',
      '0.3 %',
      '5 %',
      '62 %',
      '>99 %',
      '100 %',
    ])
  })

  it('gives two digits of an error and as many decimals to its value', () => {
    expect(withError(1.2345, 0.0123)).toBe('1.234 ± 0.012')
    expect(withError(-123.4, 12)).toBe('−123 ± 12')
    expect(withError(5, undefined)).toBe('5')
    expect([0, 12345.6, 0.00001, 3.14159].map(shortNumber)).toEqual(['0', '12346', '1.00e-5', '3.14'])
  })

  it('signs a number, but not one that rounds to nothing', () => {
    expect([1.26, -0.44, 0.04, -0.04].map((value) => signed(value, 1))).toEqual(['+1.3', '−0.4', '0.0', '0.0'])
  })

  it('writes feature keys as a person does', () => {
    expect(['Hbeta', 'CaK', 'FeI5270', 'TiO7050', 'HeII4542', 'Mgb', 'G4300', 'NaD'].map(featureWord)).toEqual([
      'Hβ',
      'Ca K',
      'Fe I 5270',
      'TiO 7050',
      'He II 4542',
      'Mg b',
      'G 4300',
      'Na D',
    ])
  })
})

describe('times', () => {
  // MJD 51544.5 is 2000 January 1, 12 h (the epoch J2000.0 by definition).
  it('are those of the calendar, to the minute', () => {
    expect(dateAndTime(51544.5)).toBe('2000-01-01 12:00')
    expect(clockTime(51544 + 59.6 / 1440)).toBe('01:00')
    expect(nightDates(51544.5, 51544.9)).toBe('1 January 2000')
    expect(nightDates(51543.9, 51544.5)).toBe('31 December 1999 to 1 January 2000')
  })
})

describe('plainText', () => {
  it('leaves one line without control characters or direction marks, composed', () => {
    expect(plainText(' a\u0000b\r\n\u202ec\u200b  e\u0301 ')).toBe('a b c é')
    expect(plainText('\u0007')).toBe('')
  })
})

describe('spread', () => {
  const places = fc
    .array(fc.double({ min: 0, max: 100, noNaN: true }), { minLength: 1, maxLength: 10 })
    .map((list) => list.sort((a, b) => a - b))

  it('keeps labels in order, apart, and inside, for any wanted places that have room', () => {
    fc.assert(
      fc.property(places, (wanted) => {
        const widths = wanted.map(() => 9)
        const found = spread(wanted, widths, 0, 100)
        expect(found[0]).toBeGreaterThanOrEqual(4.5 - 1e-9)
        expect(found[found.length - 1]).toBeLessThanOrEqual(95.5 + 1e-9)
        for (let i = 1; i < found.length; i++) expect(found[i] - found[i - 1]).toBeGreaterThanOrEqual(9 - 1e-9)
      }),
      { seed: 5 },
    )
  })

  it('leaves labels where they are wanted when nothing is in the way', () => {
    expect(spread([10, 50, 90], [8, 8, 8], 0, 100)).toEqual([10, 50, 90])
  })

  it('moves two that clash by the same amount', () => {
    expect(spread([50, 52], [10, 10], 0, 100)).toEqual([46, 56])
  })
})

describe('PALETTE', () => {
  // WCAG 2.1, relative luminance and contrast ratio: text needs 4.5 to 1.
  const luminance = (colour: string): number => {
    const [r, g, b] = [1, 3, 5].map((i) => {
      const c = Number.parseInt(colour.slice(i, i + 2), 16) / 255
      return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4
    })
    return 0.2126 * r + 0.7152 * g + 0.0722 * b
  }
  it('sets all text with a contrast of 4.5 to 1 or more', () => {
    for (const colour of [PALETTE.ink, PALETTE.quiet, PALETTE.blue])
      expect(1.05 / (luminance(colour) + 0.05)).toBeGreaterThan(4.5)
  })
})

describe('duration', () => {
  it('is in the unit an observer plans with', () => {
    expect([27, 599, 600, 5200, 7200, 43000].map(duration)).toEqual([
      '27 s',
      '599 s',
      '10 min',
      '87 min',
      '2 h',
      '12 h',
    ])
  })
})

describe('percent near ten', () => {
  it('never falls into an exponent', () => {
    for (let p = 0.05; p < 0.2; p += 0.0007) expect(percent(p)).toMatch(/^\d+ %$/)
  })
})
