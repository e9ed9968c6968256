import { describe, expect, it } from 'vitest'
import { madeSpectrum } from '../../src/demo/madeSpectrum.ts'
import { SPECIAL_KINDS, specialLight } from '../../src/demo/specialSpectra.ts'

/** Mean flux of a window over that of two windows beside it. */
function depth(kind: (typeof SPECIAL_KINDS)[number], band: number[], blue: number[], red: number[]): number {
  const { wavelength, flux } = madeSpectrum(specialLight(kind))
  const mean = ([low, high]: number[]): number => {
    const inside = flux.filter((_, i) => wavelength[i] >= low && wavelength[i] <= high)
    return inside.reduce((sum, value) => sum + value, 0) / inside.length
  }
  return 1 - mean(band) / (0.5 * (mean(blue) + mean(red)))
}

describe('specialLight', () => {
  it.each(SPECIAL_KINDS)('gives light that is finite and positive everywhere: %s', (kind) => {
    const light = specialLight(kind)
    expect(light.every((value) => Number.isFinite(value) && value > 0)).toBe(true)
  })

  it('shows what each kind is known by', () => {
    // handbook descriptions (Jaschek & Jaschek 1987): Swan bands, Balmer lines tens of Å wide, He II 4686, Hα in emission
    expect(depth('carbon', [5110, 5160], [5200, 5230], [5230, 5260])).toBeGreaterThan(0.3)
    expect(depth('white dwarf', [4830, 4890], [4700, 4740], [4990, 5030])).toBeGreaterThan(0.15)
    expect(depth('hot subdwarf', [4680, 4691], [4660, 4672], [4700, 4710])).toBeGreaterThan(0.05)
    expect(depth('emission', [6555, 6571], [6500, 6530], [6600, 6630])).toBeLessThan(-0.5)
    expect(depth('nebular', [5000, 5013], [4980, 4990], [5025, 5040])).toBeLessThan(-3)
    expect(depth('composite', [4095, 4108], [4050, 4060], [4140, 4150])).toBeGreaterThan(0.1)
    expect(depth('composite', [5164, 5188], [5050, 5080], [5230, 5260])).toBeGreaterThan(0.1)
    expect(depth('brown dwarf', [8611, 8660], [8560, 8605], [8560, 8605])).toBeGreaterThan(0.15)
  })

  it('makes a metal-weak star weaker in metals than in hydrogen', () => {
    expect(depth('metal-weak', [3927, 3940], [3905, 3923], [4000, 4020])).toBeLessThan(0.45)
    expect(depth('metal-weak', [4851, 4871], [4810, 4830], [4895, 4915])).toBeGreaterThan(0.12)
  })
})

describe('madeSpectrum', () => {
  it('has the scatter that its sigma says', () => {
    const light = specialLight('hot subdwarf')
    const clean = madeSpectrum(light)
    const noisy = madeSpectrum(light, { snr: 50, seed: 3 })
    const sigma = noisy.sigma ?? new Float64Array()
    const pulls = noisy.flux.map((value, i) => (value - clean.flux[i]) / sigma[i])
    const variance = pulls.reduce((sum, pull) => sum + pull * pull, 0) / pulls.length
    // 3534 samples: the variance of unit normals scatters by √(2 / 3534) = 2.4 %; 5 σ
    expect(Math.abs(variance - 1)).toBeLessThan(0.12)
  })

  it('puts a line where its velocity says', () => {
    const { wavelength, flux } = madeSpectrum(specialLight('emission'), { velocity: 300, step: 1, first: 6000 })
    const top = wavelength[flux.indexOf(Math.max(...flux))]
    // 6562.79 (1 + 300 / 299792.458) = 6569.36
    expect(Math.abs(top - 6569.36)).toBeLessThanOrEqual(0.5)
  })
})
