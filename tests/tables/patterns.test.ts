import { describe, expect, it } from 'vitest'
import { PATTERNS } from '../../src/tables/patterns.ts'
import { OXYGEN_BANDS, SKY_LINES, TELLURIC_BANDS } from '../../src/tables/sky.ts'
import { SOURCES } from '../../src/tables/sources.ts'

describe('PATTERNS', () => {
  it('covers the types O to M without a gap or an overlap', () => {
    const ends = PATTERNS.map(({ types }) => types)
    expect(ends[0][0]).toBe(0)
    expect(ends[ends.length - 1][1]).toBe(70)
    for (let i = 1; i < ends.length; i++) expect(ends[i][0]).toBe(ends[i - 1][1])
  })

  it('has names of its own, sources, and lines in order of wavelength', () => {
    expect(new Set(PATTERNS.map(({ name }) => name)).size).toBe(PATTERNS.length)
    for (const { lines, source, bins } of PATTERNS) {
      expect(SOURCES).toHaveProperty(source)
      for (let i = 1; i < lines.length; i++) expect(lines[i][0]).toBeGreaterThanOrEqual(lines[i - 1][0])
      expect(lines.every(([, width, own]) => width > 0 && own >= 0)).toBe(true)
      // means, not spectra: nothing finer than 8 Å
      if (bins) expect(bins.step).toBeGreaterThanOrEqual(8)
    }
  })

  it('has the lines of the laboratory that mark its types', () => {
    const has = (name: string, at: number): boolean =>
      PATTERNS.some((p) => p.name === name && p.lines.some(([w]) => Math.abs(w - at) < 0.05))
    // wavelengths in air: NIST for He I, Moore 1966 for Ca II, Dirac for H
    expect(has('hot O', 4541.59)).toBe(true)
    expect(has('hot B', 4471.48)).toBe(true)
    expect(has('balmer A', 4340.46)).toBe(true)
    expect(has('metal F', 3933.66)).toBe(true)
    expect(has('metal K', 4226.73)).toBe(true)
  })

  it('leaves out the bands of the air', () => {
    for (const { covered } of PATTERNS)
      for (const [first, last] of covered)
        for (const { range } of TELLURIC_BANDS) expect(last <= range[0] || first >= range[1]).toBe(true)
  })
})

describe('sky tables', () => {
  it('name their sources and lie inside their ranges', () => {
    for (const { source } of [...SKY_LINES, ...TELLURIC_BANDS, ...OXYGEN_BANDS]) expect(SOURCES).toHaveProperty(source)
    for (const { lines, covered } of OXYGEN_BANDS)
      for (const [at] of lines) expect(at > covered[0][0] && at < covered[0][1]).toBe(true)
  })
})
