import { describe, expect, it } from 'vitest'
import { inOrder } from '../../cli/batch.ts'

const later = (ms: number): Promise<void> => new Promise((done) => setTimeout(done, ms))

describe('inOrder', () => {
  it('gives results in the order of the items whatever order they end in', async () => {
    const results: number[] = []
    for await (const r of inOrder([30, 1, 20, 1, 5], 3, async (ms) => (await later(ms), ms))) results.push(r)
    expect(results).toEqual([30, 1, 20, 1, 5])
  })

  it('never has more under way than asked, and draws items only as there is room', async () => {
    let underWay = 0
    let most = 0
    let drawn = 0
    function* items(): Generator<number> {
      for (; drawn < 20; drawn++) yield drawn
    }
    for await (const _ of inOrder(items(), 4, async () => {
      most = Math.max(most, ++underWay)
      await later(1)
      underWay--
    })) {
      expect(drawn).toBeLessThanOrEqual(20)
    }
    expect(most).toBe(4)
  })

  it('passes a failure on at its turn', async () => {
    const seen: number[] = []
    await expect(async () => {
      for await (const r of inOrder([1, 2, 3], 3, async (i) => {
        if (i === 2) throw new Error('two')
        return i
      }))
        seen.push(r)
    }).rejects.toThrow('two')
    expect(seen).toEqual([1])
  })
})
