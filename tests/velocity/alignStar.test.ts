import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { PATTERNS } from '../../src/tables/patterns.ts'
import { alignStar } from '../../src/velocity/alignStar.ts'
import { hasShared, NEEDS_SHARED } from '../support/shared.ts'
import { readStar } from '../support/typing/sharedStars.ts'
import { SPEED_OF_LIGHT } from '../../src/numeric/speedOfLight.ts'

/** The star with the samples of one arm moved by a velocity, as a wrong arc would do. */
function withArmMoved(star: Spectrum, [from, to]: readonly [number, number], velocity: number): Spectrum {
  const moved = star.wavelength.map((w) => (w > from && w < to ? w * (1 + velocity / SPEED_OF_LIGHT) : w))
  const kept = Array.from(moved.keys()).filter(
    (i) => moved[i] > Math.max(-Infinity, ...moved.slice(Math.max(0, i - 12), i)),
  )
  const pick = (values: Float64Array): Float64Array => Float64Array.from(kept, (i) => values[i])
  return {
    ...star,
    wavelength: pick(moved),
    flux: pick(star.flux),
    usable: Uint8Array.from(kept, (i) => star.usable[i]),
    sigma: undefined,
  }
}

describe.skipIf(!hasShared)(`alignStar (${NEEDS_SHARED})`, () => {
  const star = hasShared ? readStar('atlas/hd28099.fits') : undefined

  it('leaves a spectrum alone whose parts agree', () => {
    if (!star) return
    const aligned = alignStar(star, fitContinuum(star), { patterns: PATTERNS })
    expect(aligned.spectrum).toBe(star)
    expect(aligned.findings).toEqual([])
  })

  it('makes a scale straight that one arm bends by 300 km/s, and says so', () => {
    if (!star) return
    const before = alignStar(star, fitContinuum(star), { patterns: PATTERNS })
    const bent = withArmMoved(star, [4700, 5600], 300)
    const aligned = alignStar(bent, fitContinuum(bent), { patterns: PATTERNS })
    expect(aligned.findings.map((f) => f.code)).toContain('wavelength-scale-bent')
    const at = bent.wavelength.findIndex((w) => w > 5200)
    const back = (aligned.spectrum.wavelength[at] / bent.wavelength[at] - 1) * SPEED_OF_LIGHT
    // The arm is brought back within the error of a part's velocity (about 20 km/s at 4.5 Å).
    expect(Math.abs(back + 300)).toBeLessThan(60)
    expect(Math.abs(aligned.frame.velocity - before.frame.velocity)).toBeLessThan(30)
    expect(aligned.frame.peak ?? 0).toBeGreaterThan(0.8)
  })
})
