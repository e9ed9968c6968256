import { describe, expect, it } from 'vitest'
import { resolveSettings, settingsToml } from '../../src/settings/resolveSettings.ts'
import type { SettingSpec } from '../../src/settings/types.ts'

const SPECS: readonly SettingSpec[] = [
  {
    key: 'quality.low-snr',
    default: 20,
    unit: 'per Å',
    min: 0,
    max: 1000,
    meaning: 'S/N below which a spectrum is doubtful',
    source: 'made for this test',
  },
  { key: 'quality.spikes', default: true, meaning: 'Whether spikes are looked for', source: 'made for this test' },
  {
    key: 'pages.paper',
    default: 'A4',
    choices: ['A4', 'Letter'],
    meaning: 'Paper of the pages',
    source: 'made for this test',
  },
]

describe('resolveSettings', () => {
  it('takes the default, then the file, then the command line, and says which', () => {
    const settings = resolveSettings(
      SPECS,
      { name: 'my.toml', text: '[quality]\nlow-snr = 15\nspikes = false\n' },
      { 'quality.spikes': true },
    )
    expect([...settings.values()].map((s) => [s.spec.key, s.value, s.origin, s.line])).toEqual([
      ['quality.low-snr', 15, 'file', 2],
      ['quality.spikes', true, 'command line', undefined],
      ['pages.paper', 'A4', 'default', undefined],
    ])
    expect(settings.get('quality.low-snr')?.value).toBe(15)
  })

  it.each([
    ['a syntax error', '[quality]\nlow-snr = = 3\n', /my\.toml, line 2, column \d+: TOML requires valid syntax/],
    [
      'a misspelt key',
      '[quality]\n  low-snrr = 3\n',
      'my.toml, line 2, column 3: settings require a known key, got quality.low-snrr (nearest: quality.low-snr)',
    ],
    [
      'an unknown section',
      '[qualty]\nx = 1\n',
      /my\.toml, line 1, column 1: settings require one of the sections quality, pages, got qualty \(nearest: quality\)/,
    ],
    [
      'a value out of range',
      '[quality]\nlow-snr = -1\n',
      'my.toml, line 2, column 1: quality.low-snr requires at least 0 per Å, got -1',
    ],
    [
      'a value of another kind',
      'quality.low-snr = "high"\n',
      'my.toml, line 1, column 1: quality.low-snr requires a number, got "high"',
    ],
    [
      'a word that is no choice',
      '[pages]\npaper = "A3"',
      'my.toml, line 2, column 1: pages.paper requires one of A4, Letter, got "A3"',
    ],
    [
      'a number that is none',
      '[quality]\nlow-snr = nan',
      'my.toml, line 2, column 1: quality.low-snr requires a finite number, got NaN',
    ],
    [
      'a section given as a list',
      '[[quality]]\nlow-snr = 3\n',
      /settings require \[quality\] once as a table, got a list of tables/,
    ],
  ])('names file, line, column, rule and value for %s', (_, text, message) => {
    expect(() => resolveSettings(SPECS, { name: 'my.toml', text })).toThrow(message)
  })

  it('writes a document that reads back as the same settings', () => {
    const settings = resolveSettings(SPECS, undefined, { 'quality.low-snr': 33, 'pages.paper': 'Letter' })
    const again = resolveSettings(SPECS, { name: 'written.toml', text: settingsToml(settings) })
    expect([...again.values()].map((s) => s.value)).toEqual([33, true, 'Letter'])
  })
})
