import { describe, expect, it } from 'vitest'
import { subtractRunningMean } from '../../src/numeric/runningMean.ts'

describe('subtractRunningMean', () => {
  it('takes out a constant and the middle of a slope', () => {
    expect([...subtractRunningMean(new Float64Array(5).fill(7), undefined, 2)]).toEqual([0, 0, 0, 0, 0])
    const slope = subtractRunningMean(Float64Array.of(0, 1, 2, 3, 4), undefined, 1)
    // exact arithmetic: means 0.5, 1, 2, 3, 3.5
    expect([...slope]).toEqual([-0.5, 0, 0, 0, 0.5])
  })

  it('leaves out samples without weight, and gives 0 there', () => {
    const found = subtractRunningMean(Float64Array.of(2, 1000, 4), Float64Array.of(1, 0, 1), 2)
    // mean of 2 and 4
    expect([...found]).toEqual([-1, 0, 1])
  })

  it('takes nothing for nothing', () => {
    expect(subtractRunningMean(new Float64Array(0), undefined, 3).length).toBe(0)
  })
})
