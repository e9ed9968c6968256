import { describe, expect, it } from 'vitest'
import { PATTERNS } from '../../src/tables/patterns.ts'
import { findRestFrame } from '../../src/velocity/findRestFrame.ts'
import { madeStar, MADE_STARS } from './madeStar.ts'

describe('findRestFrame', () => {
  it.each(['O', 'B', 'A', 'F', 'G', 'K'] as const)('recovers the shift of a made %s star within its errors', (kind) => {
    let outside = 0
    let trials = 0
    for (const velocity of [-600, -230, 0, 310, 600])
      for (const fwhm of [2, 4.5]) {
        const { spectrum, continuum } = madeStar({
          lines: MADE_STARS[kind],
          velocity,
          fwhm,
          snr: 50,
          seed: velocity + 601,
        })
        const frame = findRestFrame(spectrum, continuum, { patterns: PATTERNS })
        expect(frame.trusted).toBe(true)
        // exact: the shift put in; three standard errors hold for every one
        expect(Math.abs(frame.velocity - velocity)).toBeLessThan(3 * (frame.error ?? 0))
        trials++
        if (Math.abs(frame.velocity - velocity) > 2 * (frame.error ?? 0)) outside++
      }
    expect(outside / trials).toBeLessThan(0.25)
  })

  it('says that noise alone has no velocity', () => {
    for (const seed of [1, 2, 3, 4, 5]) {
      const { spectrum, continuum } = madeStar({ lines: [], snr: 20, seed })
      const frame = findRestFrame(spectrum, continuum, { patterns: PATTERNS })
      expect(frame).toMatchObject({ trusted: false, velocity: 0 })
      expect(frame.reason).toBeTruthy()
      expect(frame.error).toBeUndefined()
    }
  })

  it('requires a pattern', () => {
    const { spectrum, continuum } = madeStar({ lines: [] })
    expect(() => findRestFrame(spectrum, continuum, { patterns: [] })).toThrow('requires a line pattern, got none')
  })
})
