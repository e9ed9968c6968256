import { describe, expect, it } from 'vitest'
import { expectedLight, expectedLightOf } from '../../src/demo/expectedLight.ts'
import { fineGrid } from '../../src/demo/grid.ts'
import { likeMean } from '../../src/demo/likeMean.ts'
import { lineTransmission } from '../../src/demo/starLight.ts'
import { BANDS } from '../../src/tables/bands.ts'
import { CALIBRATION } from '../../src/tables/calibration.ts'

const expectation = { calibration: CALIBRATION, bands: BANDS }
const grid = fineGrid()

describe('likeMean', () => {
  const middle = Float64Array.from({ length: 300 }, (_, i) => 4005 + 10 * i)

  it('brings the level to the mean and leaves narrow lines standing', () => {
    const light = lineTransmission(40, 5)
    const wanted = middle.map(() => 0.8)
    const found = likeMean(light, middle, wanted)
    const mean = (from: number, to: number): number => {
      const inside = found.filter((_, i) => grid[i] >= from && grid[i] < to)
      return inside.reduce((sum, value) => sum + value, 0) / inside.length
    }
    // over more than the 90 Å that the factor is smoothed over
    expect(Math.abs(mean(4800, 5400) - 0.8)).toBeLessThan(0.01)
    const at = Math.round((5269.8 - grid[0]) * 2)
    expect(found[at]).toBeLessThan(0.75 * found[at - 12])
  })

  it('leaves light alone where the mean is not known', () => {
    const light = lineTransmission(40, 5)
    expect(
      likeMean(
        light,
        middle,
        middle.map(() => NaN),
      ),
    ).toEqual(light)
  })
})

describe('expectedLight', () => {
  it.each([
    { name: 'B3 V', type: 13, luminosity: 5 },
    { name: 'G8 III', type: 48, luminosity: 3 },
    { name: 'M2 I', type: 62, luminosity: 1 },
  ])('is finite and positive everywhere: $name', ({ type, luminosity }) => {
    const light = expectedLight(type, luminosity, expectation)
    expect(light.every((value) => Number.isFinite(value) && value > 0)).toBe(true)
  })

  it('is made once for each type and class', () => {
    const lightOf = expectedLightOf(expectation)
    expect(lightOf(20, 5)).toBe(lightOf(20, 5))
    expect(lightOf(20, 5)).not.toBe(lightOf(20, 3))
  })
})
