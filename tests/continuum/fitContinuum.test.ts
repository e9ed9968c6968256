import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { extinctionCcm89 } from '../support/extinction.ts'
import { type MadeKind, type MadeOptions, asSpectrum, madeSpectrum } from '../support/madeSpectrum.ts'

/** Relative errors of the level over a range of a made spectrum. */
function errors(options: Partial<MadeOptions>, from: number, to: number): number[] {
  const made = madeSpectrum(options)
  const { level } = fitContinuum(made.spectrum)
  const out: number[] = []
  made.spectrum.wavelength.forEach((w, i) => {
    if (w > from && w < to) out.push(level[i] / made.continuum[i] - 1)
  })
  return out
}

function rms(values: readonly number[]): number {
  return Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length)
}

describe('fitContinuum', () => {
  it('finds the true level of A to F stars with thousands of weak lines redward of 4500 Å', () => {
    // known level; S/N 100, FWHM 4 Å, five fields of lines a kind that no constant was chosen on. Wanted: 0.5 %.
    // Measured: A0 0.23 %, A5 0.35 %, F0 0.44 %, F5 0.46 % (single fields up to 0.62 %)
    for (const kind of ['A0', 'A5', 'F0', 'F5'] as const) {
      const all = [31, 32, 33, 34, 35].flatMap((star) => errors({ kind, star, seed: star }, 4500, 9200))
      expect(rms(all)).toBeLessThan(0.005)
    }
  })

  it('has an error at every sample that covers what is wrong with it', () => {
    for (const kind of ['O', 'A0', 'F5'] as const) {
      const made = madeSpectrum({ kind, star: 8, seed: 8 })
      const { level, error } = fitContinuum(made.spectrum)
      const pulls = [...level.keys()]
        .filter((i) => made.spectrum.wavelength[i] > 4500)
        .map((i) => (level[i] - made.continuum[i]) / error[i])
      // a placement error is shared by hundreds of samples, so the share within 2 σ is either near all or well below
      expect(pulls.filter((pull) => Math.abs(pull) < 2).length / pulls.length).toBeGreaterThan(0.85)
    }
  })

  const REPEAT: readonly MadeKind[] = ['A0', 'F5', 'G2', 'K5', 'M4']
  const BASE = { snr: 100, fwhm: 4, star: 7, seed: 21 }
  const middle = (kind: MadeKind, changes: Partial<MadeOptions>, from: number, to: number) =>
    errors({ ...BASE, kind, ...changes }, from, to)

  for (const [name, changes] of [
    ['noise (S/N 40 for 100)', { snr: 40, seed: 22 }],
    ['resolution (8 for 4 Å)', { fwhm: 8 }],
    ['a response of a factor 10', { response: (w: number) => 10 ** ((w - 3600) / 5600) }],
    [
      'reddening of A(V) = 3 (Cardelli, Clayton & Mathis 1989)',
      { response: (w: number) => 10 ** (-0.4 * 3 * extinctionCcm89(w)) },
    ],
  ] as const)
    it(`repeats over ${name}`, () => {
      for (const kind of REPEAT) {
        const first = middle(kind, {}, 3900, 9100)
        const second = middle(kind, changes, 3900, 9100)
        const change = rms(first.map((value, i) => (1 + second[i]) / (1 + value) - 1))
        // wanted: 1.5 %; measured on these: see DEVELOPERS.md
        expect(change).toBeLessThan(0.015)
      }
    })

  it('is not moved by cosmic rays, gaps or emission lines', () => {
    const clean = errors({ kind: 'F5', seed: 3 }, 4500, 9100)
    const dirty = errors(
      {
        kind: 'F5',
        seed: 3,
        cosmicRays: 60,
        gaps: [[5300, 5360]],
        lines: [
          { wavelength: 5006.84, ew: -60, fwhm: 3 },
          { wavelength: 6562.8, ew: -150, fwhm: 4 },
        ],
      },
      4500,
      9100,
    )
    expect(rms(clean.map((value, i) => dirty[i] - value))).toBeLessThan(0.004)
  })

  it('sets a level everywhere, beside gaps of hundreds of Å and in a short piece around one hydrogen line', () => {
    const gap = madeSpectrum({ kind: 'A0', gaps: [[5200, 6100]] })
    expect(fitContinuum(gap.spectrum).level.every((value) => value > 0)).toBe(true)
    const piece = madeSpectrum({ kind: 'A0', from: 4790, to: 4940, step: 0.5 })
    expect(fitContinuum(piece.spectrum).level.every((value) => value > 0)).toBe(true)
  })

  it('says where its level is a pseudo-continuum', () => {
    expect(fitContinuum(madeSpectrum({ kind: 'A0' }).spectrum).isPseudo).toBe(false)
    expect(fitContinuum(madeSpectrum({ kind: 'M4' }).spectrum).isPseudo).toBe(true)
  })

  it('scales with the flux and changes no input', () => {
    const { spectrum } = madeSpectrum({ kind: 'G2' })
    const before = spectrum.flux.slice()
    const { level } = fitContinuum(spectrum)
    const scaled = fitContinuum({ ...spectrum, flux: spectrum.flux.map((value) => value * 1e-15) })
    expect(spectrum.flux).toEqual(before)
    level.forEach((value, i) => expect(scaled.level[i] / value / 1e-15).toBeCloseTo(1, 4))
  })

  it('gives NaN for a spectrum without light, without samples or all masked', () => {
    const grid = Float64Array.from({ length: 500 }, (_, i) => 4000 + i)
    for (const spectrum of [
      asSpectrum(grid, new Float64Array(500)),
      asSpectrum(grid, new Float64Array(500).fill(1), new Uint8Array(500)),
      asSpectrum(grid, new Float64Array(500).fill(-3)),
      asSpectrum(grid.slice(0, 2), Float64Array.of(1, 1)),
      asSpectrum(new Float64Array(0), new Float64Array(0)),
    ]) {
      const { level, supported } = fitContinuum(spectrum)
      expect(level.every((value) => !(value > 0))).toBe(true)
      expect(supported).toBe(0)
    }
  })
})
