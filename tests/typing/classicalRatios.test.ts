import { describe, expect, it } from 'vitest'
import type { Measurement } from '../../src/features/types.ts'
import { CALIBRATION } from '../../src/tables/calibration.ts'
import { classicalRatios } from '../../src/typing/classicalRatios.ts'
import { expectedFeatures } from '../../src/typing/expected.ts'

function line(feature: string, ew: number, ewErr = 0.05): Measurement {
  return { feature, species: '', wavelengthRest: 0, unit: 'Å', method: 'side bands', status: 'measured', ew, ewErr }
}

function ratio(name: string, lines: readonly Measurement[], type?: number) {
  return classicalRatios(lines, type).find((one) => one.name === name)
}

describe('classicalRatios', () => {
  it('reads equal He I 4471 and He II 4542 as O7 (Morgan, Keenan & Kellman 1943)', () => {
    const found = ratio('He I 4471 / He II 4542', [line('HeI4471', 0.8), line('HeII4542', 0.8)])
    expect(found?.value).toBe(1)
    expect(found?.reading).toContain('O7')
  })

  it('has the error of a quotient', () => {
    const found = ratio('He I 4471 / He II 4542', [line('HeI4471', 1, 0.1), line('HeII4542', 2, 0.1)])
    // σ² = (0.1/2)² + (0.5 · 0.1/2)²
    expect(found?.error).toBeCloseTo(Math.hypot(0.05, 0.025), 12)
  })

  it('gives no value, but the reason, where a line is missing or the denominator is not detected', () => {
    expect(ratio('He I 4471 / He II 4542', [line('HeI4471', 1)])).toMatchObject({
      reason: expect.stringContaining('was not measured'),
    })
    const weak = ratio('He I 4471 / He II 4542', [line('HeI4471', 1), line('HeII4542', 0.1)])
    expect(weak).toMatchObject({ reason: expect.stringContaining('is not detected') })
    expect(weak?.value).toBeUndefined()
  })

  it('quotes for a type only what classifiers use there', () => {
    expect(classicalRatios([], 42).map(({ name }) => name)).not.toContain('He I 4471 / He II 4542')
    expect(classicalRatios([], 7).map(({ name }) => name)).toContain('He I 4471 / He II 4542')
  })

  it('names a source for each', () => {
    for (const { source } of classicalRatios([])) expect(source).toMatch(/\d{4}/)
  })

  it('runs along the sequence as classifiers say: K over H + Hε rises from A0 to F5, Sr II over Fe I in supergiants', () => {
    const at = (type: number, luminosity: number) =>
      expectedFeatures(CALIBRATION, type, luminosity).map(({ feature, value }) => line(feature, value, 0.001))
    const calcium = [20, 24, 28, 32].map((type) => ratio('Ca II K / (Ca II H + Hε)', at(type, 5))?.value ?? NaN)
    expect([...calcium].sort((a, b) => a - b)).toEqual(calcium)
    // Jaschek & Jaschek 1987: very weak at A0, equal at F0.
    expect(calcium[0]).toBeLessThan(0.25)
  })
})
