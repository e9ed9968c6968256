import { describe, expect, it } from 'vitest'
import { noteFinding, READING_RULES } from '../../src/findings/reading.ts'

describe('noteFinding', () => {
  it('is as grave as the rule of the note says, a doubt at most, and a note without a rule', () => {
    expect([READING_RULES['gzip-cut'].level, READING_RULES['no-flux'].level]).toEqual(['doubt', 'fault'])
    expect(
      ['medium-guessed', 'gzip-cut', 'no-flux', 'never-heard'].map((code) => noteFinding({ code, text: 'so' })),
    ).toEqual([
      { level: 'note', code: 'medium-guessed', text: 'so' },
      { level: 'doubt', code: 'gzip-cut', text: 'so' },
      { level: 'doubt', code: 'no-flux', text: 'so' },
      { level: 'note', code: 'never-heard', text: 'so' },
    ])
  })
})
