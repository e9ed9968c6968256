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

  it('has a systematic error below 0.05 of the width at 4 Å and S/N 100', () => {
    for (const kind of ['O', 'B', 'A', 'F', 'G', 'K'] as const) {
      let sum = 0
      for (let i = 0; i < 6; i++) {
        const velocity = -500 + 200 * i
        const made = madeStar({ lines: MADE_STARS[kind], velocity, fwhm: 4, snr: 100, seed: i + 31, weakLines: 100 })
        sum += findRestFrame(made.spectrum, made.continuum, { patterns: PATTERNS }).velocity - velocity
      }
      // 0.05 × 4 Å at 4800 Å
      expect(Math.abs(sum / 6)).toBeLessThan(((0.05 * 4) / 4800) * 299792.458)
    }
  })

  it.each([
    [3850, 4600],
    [4000, 5500],
    [4500, 7000],
    [5800, 7400],
  ])('works where only %i to %i Å are covered', (first, last) => {
    for (const kind of ['B', 'A', 'F', 'G', 'K'] as const) {
      const made = madeStar({ lines: MADE_STARS[kind], velocity: -140, fwhm: 4, snr: 60, range: [first, last] })
      const frame = findRestFrame(made.spectrum, made.continuum, { patterns: PATTERNS })
      if (!frame.trusted) continue
      expect(Math.abs(frame.velocity + 140)).toBeLessThan(3 * (frame.error ?? 0))
    }
    const { spectrum, continuum } = madeStar({ lines: MADE_STARS.G, fwhm: 4, snr: 60, range: [first, last] })
    expect(findRestFrame(spectrum, continuum, { patterns: PATTERNS }).trusted).toBe(true)
  })

  it('bears a wavelength scale that is 1 Å off or stretched by 0.1 %', () => {
    for (const kind of ['B', 'A', 'G', 'K'] as const) {
      const off = madeStar({ lines: MADE_STARS[kind], velocity: 60, fwhm: 4, scale: (w) => w + 1 })
      const moved = findRestFrame(off.spectrum, off.continuum, { patterns: PATTERNS })
      // 1 Å is 46 km/s at 6500 Å and 78 km/s at 3850 Å
      expect(moved.velocity).toBeGreaterThan(60 + 40)
      expect(moved.velocity).toBeLessThan(60 + 85)
      const long = madeStar({ lines: MADE_STARS[kind], velocity: 60, fwhm: 4, scale: (w) => 4800 + 1.001 * (w - 4800) })
      const stretched = findRestFrame(long.spectrum, long.continuum, { patterns: PATTERNS })
      // 0.1 % of the distance from 4800 Å: from −78 km/s at 3800 Å to +80 km/s at 6563 Å
      expect(stretched.trusted).toBe(true)
      expect(Math.abs(stretched.velocity - 60)).toBeLessThan(80)
    }
  })

  it('is not misled by emission in the Balmer lines, cosmic rays and dead samples', () => {
    for (const kind of ['B', 'A', 'G'] as const) {
      const { spectrum, continuum } = madeStar({ lines: MADE_STARS[kind], velocity: 210, fwhm: 4, snr: 60 })
      const flux = spectrum.flux.map((f, i) => {
        const w = spectrum.wavelength[i]
        const emission = 2500 * Math.exp(-(((w - 6567.4) / 3) ** 2)) + 900 * Math.exp(-(((w - 4864.7) / 2.5) ** 2))
        return i % 97 === 5 ? f + 6000 : i % 211 === 7 ? -400 : f + emission
      })
      const frame = findRestFrame({ ...spectrum, flux }, continuum, { patterns: PATTERNS })
      expect(frame.trusted).toBe(true)
      expect(Math.abs(frame.velocity - 210)).toBeLessThan(3 * (frame.error ?? 0))
    }
  })

  it('takes the pattern asked for, and leaves what it is given as it was', () => {
    const { spectrum, continuum } = madeStar({ lines: MADE_STARS.G, velocity: 33 })
    const before = spectrum.flux.slice()
    const frame = findRestFrame(spectrum, continuum, { patterns: PATTERNS, preferred: 'metal K' })
    expect(frame.pattern).toBe('metal K')
    expect(spectrum.flux).toEqual(before)
  })

  it('does not trust a spectrum of few, constant or missing samples', () => {
    const { spectrum, continuum } = madeStar({ lines: MADE_STARS.G })
    const flat = findRestFrame({ ...spectrum, flux: spectrum.flux.map(() => 1000) }, continuum, { patterns: PATTERNS })
    const masked = new Uint8Array(spectrum.flux.length)
    const nothing = findRestFrame({ ...spectrum, usable: masked }, continuum, { patterns: PATTERNS })
    const few = madeStar({ lines: MADE_STARS.G, range: [4000, 4015] })
    const short = findRestFrame(few.spectrum, few.continuum, { patterns: PATTERNS })
    const beyond = madeStar({ lines: [], range: [9200, 9800] })
    const outside = findRestFrame(beyond.spectrum, beyond.continuum, { patterns: PATTERNS })
    for (const frame of [flat, nothing, short, outside]) {
      expect(frame).toMatchObject({ trusted: false, velocity: 0 })
      expect(frame.reason).toBeTruthy()
    }
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
