import { describe, expect, it } from 'vitest'
import { findJumps } from '../../src/night/jumps.ts'
import { seededNormal } from '../../src/numeric/random.ts'

const points = (values: readonly number[], error?: number) =>
  values.map((value, i) => ({
    mjd: 60000 + i / 24,
    value,
    label: String(i),
    ...(error === undefined ? {} : { error }),
  }))

describe('findJumps', () => {
  it('finds the planted jump at its place and size', () => {
    const normal = seededNormal(2)
    const values = Array.from({ length: 20 }, (_, i) => (i < 12 ? 0 : 60) + 3 * normal())
    const found = findJumps(points(values, 3), 20, 5)
    expect(found).toHaveLength(1)
    expect(found[0].at).toBe(12)
    expect(Math.abs(found[0].size - 60)).toBeLessThan(6)
  })

  it('finds nothing in noise, in a slow drift, and for one outlier', () => {
    const normal = seededNormal(3)
    for (let round = 0; round < 50; round++)
      expect(
        findJumps(
          points(
            Array.from({ length: 25 }, () => 5 * normal()),
            5,
          ),
          20,
          5,
        ),
      ).toEqual([])
    expect(findJumps(points(Array.from({ length: 25 }, (_, i) => 8 * i)), 20, 5)).toEqual([])
    expect(findJumps(points([1, 0, 1, 90, 0, 1, 0, 1], 2), 20, 5)).toEqual([])
  })

  it('judges two points by their errors', () => {
    expect(findJumps(points([0, 60], 3), 20, 5)).toHaveLength(1)
    expect(findJumps(points([0, 60], 20), 20, 5)).toEqual([])
  })

  it('finds nothing in fewer than two points', () => {
    expect(findJumps([], 1, 5)).toEqual([])
    expect(findJumps(points([5]), 1, 5)).toEqual([])
  })
})
