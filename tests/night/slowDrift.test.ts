import { describe, expect, it } from 'vitest'
import { findSlowDrift } from '../../src/night/slowDrift.ts'
import { seededNormal } from '../../src/numeric/random.ts'

const made = (perHour: number, noise: number, n = 20): { mjd: number; value: number; label: string }[] => {
  const normal = seededNormal(3)
  return Array.from({ length: n }, (_, i) => ({
    mjd: 61000 + i / 48,
    value: 5 + perHour * 0.5 * i + noise * normal(),
    label: '',
  }))
}

describe('findSlowDrift', () => {
  it('gives the slope of an exact line: 4 units an hour for 9.5 hours are 38', () => {
    const drift = findSlowDrift(made(4, 0), 20, 5)
    expect(drift?.perHour).toBeCloseTo(4, 6)
    expect(drift?.total).toBeCloseTo(38, 5)
  })

  it('finds a line through noise within its error, and none where there is only noise', () => {
    // Error of the slope: noise / sqrt(Σ(t − mean)²) = 2 / sqrt(166.25) = 0.155 an hour.
    expect(Math.abs((findSlowDrift(made(4, 2), 20, 5)?.perHour ?? NaN) - 4)).toBeLessThan(3 * 0.155)
    expect(findSlowDrift(made(0, 2), 1, 5)).toBeUndefined()
  })

  it('is not led astray by one wild point, and says nothing of five points or of one moment', () => {
    const points = made(4, 0.5).map((p, i) => (i === 7 ? { ...p, value: 900 } : p))
    expect(Math.abs((findSlowDrift(points, 20, 5)?.perHour ?? NaN) - 4)).toBeLessThan(0.2)
    expect(findSlowDrift(made(4, 0, 5), 1, 5)).toBeUndefined()
    expect(
      findSlowDrift(
        made(4, 0).map((p) => ({ ...p, mjd: 61000 })),
        1,
        5,
      ),
    ).toBeUndefined()
  })
})
