import { describe, expect, it } from 'vitest'
import { FINE_SAMPLES } from '../../src/demo/grid.ts'
import { lineTransmission } from '../../src/demo/starLight.ts'
import { bandStrength, smoothed, withStrengths } from '../../src/demo/withStrengths.ts'
import { BANDS } from '../../src/tables/bands.ts'
import { median } from '../../src/numeric/median.ts'

const FWHM = 10
const strengths = (light: Float64Array): (number | undefined)[] => {
  const seen = smoothed(light, FWHM)
  return BANDS.map((band) => bandStrength(seen, band))
}

describe('withStrengths', () => {
  it('brings the bands of one star near to those of another', () => {
    const [start, goal] = [lineTransmission(40, 5), lineTransmission(50, 3)]
    const wanted = strengths(goal).map((strength, k) => {
      const { unit, band } = BANDS[k]
      return unit === 'mag' && strength !== undefined ? -2.5 * Math.log10(1 - strength / (band[1] - band[0])) : strength
    })
    const off = (light: Float64Array): number =>
      median(strengths(light).map((strength, k) => Math.abs((strength ?? NaN) - (strengths(goal)[k] ?? NaN))))
    const before = off(start)
    const after = off(withStrengths(start, BANDS, wanted, { fwhm: FWHM }))
    expect(before).toBeGreaterThan(0.2)
    expect(after).toBeLessThan(before / 5)
  })

  it('leaves light alone where nothing is wanted', () => {
    const light = lineTransmission(40, 5)
    expect(
      withStrengths(
        light,
        BANDS,
        BANDS.map(() => undefined),
        { fwhm: FWHM },
      ),
    ).toEqual(light)
  })
})

describe('bandStrength', () => {
  it('is nothing for even light and unknown without light', () => {
    const band = { ...BANDS[0], band: [5000, 5020], blue: [4980, 4990], red: [5030, 5040] } as const
    const even = new Float64Array(FINE_SAMPLES).fill(0.7)
    expect(bandStrength(smoothed(even, FWHM), band)).toBeCloseTo(0, 12)
    expect(bandStrength(new Float64Array(FINE_SAMPLES), band)).toBeUndefined()
  })
})
