import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { findLines } from '../../src/features/findLines.ts'
import type { FoundLine } from '../../src/features/types.ts'
import { seededUniform } from '../../src/numeric/random.ts'
import { ALL_LINES } from '../../src/tables/lines.ts'
import { TELLURIC_BANDS } from '../../src/tables/sky.ts'
import type { RestFrame } from '../../src/velocity/types.ts'
import { type MadeLine, type MadeOptions, madeSpectrum } from '../support/madeSpectrum.ts'

const REST: RestFrame = { velocity: 0, error: 3, trusted: true, how: 'cross-correlation' }
const narrow = (lines: readonly (readonly [number, number])[], fwhm = 1): MadeLine[] =>
  lines.map(([wavelength, ew]) => ({ wavelength, ew, fwhm }))

function find(options: Partial<MadeOptions>, frame = REST): FoundLine[] {
  const { spectrum } = madeSpectrum(options)
  const resolution = options.fwhm ?? 4
  return findLines(spectrum, fitContinuum(spectrum), frame, { lines: ALL_LINES, telluric: TELLURIC_BANDS, resolution })
}

function near(lines: readonly FoundLine[], wavelength: number): FoundLine | undefined {
  return lines.find(({ centre }) => Math.abs(centre - wavelength) < 2)
}

describe('findLines', () => {
  it('finds at S/N 50 at least 95 % of the lines above 5 σ, and nothing else', () => {
    let wanted = 0
    let found = 0
    let named = 0
    let right = 0
    const width = Math.hypot(4, 1.5)
    // error of the width of a line of known shape: 1.0645·FWHM·ε / √(√π σ/δ)
    const error = (1.0645 * width * 0.02) / Math.sqrt((Math.sqrt(Math.PI) * width) / 2.3548 / 1.4)
    for (let seed = 1; seed <= 8; seed++) {
      const uniform = seededUniform(seed * 77)
      const truth = Array.from({ length: 110 }, () => ({
        wavelength: 3700 + uniform() * 5400,
        ew: (uniform() < 0.8 ? 1 : -1) * 0.15 * 20 ** uniform(),
        fwhm: 1.5,
      })).sort((a, b) => a.wavelength - b.wavelength)
      const lines = find({ kind: 'bare', snr: 50, seed, lines: truth }).filter(({ significance }) => significance > 5)
      named += lines.length
      right += lines.filter(({ centre }) =>
        truth.some((line) => Math.abs(line.wavelength - centre) < 0.75 * width),
      ).length
      // lines closer than one FWHM count as one
      const groups: { places: number[]; ew: number }[] = []
      for (const { wavelength, ew } of truth) {
        const last = groups[groups.length - 1]
        if (last && wavelength - last.places[last.places.length - 1] < width) {
          last.places.push(wavelength)
          last.ew += ew
        } else groups.push({ places: [wavelength], ew })
      }
      const all = find({ kind: 'bare', snr: 50, seed, lines: truth })
      for (const { places, ew } of groups) {
        if (Math.abs(ew) < 5 * error) continue
        wanted++
        if (all.some(({ centre }) => places.some((place) => Math.abs(centre - place) < 0.75 * width))) found++
      }
    }
    // measured: recall 0.955 of 919 in 12 spectra, precision 1.000 of 847
    expect(wanted).toBeGreaterThan(500)
    expect(found / wanted).toBeGreaterThan(0.94)
    expect(right / named).toBeGreaterThan(0.98)
  })

  it('names the lines of a nebula and tells the night sky from it', () => {
    const known: [number, number, string, string][] = [
      // published wavelengths in air of a public sky survey's list; invented strengths, 5007/4959 and 6583/6548 = 3
      [3868.76, -30, '[Ne III]', 'nebular'],
      [4101.73, -22, 'H I', 'stellar'],
      [4340.46, -42, 'H I', 'stellar'],
      [4363.21, -6, '[O III]', 'nebular'],
      [4861.32, -90, 'H I', 'stellar'],
      [4958.91, -130, '[O III]', 'nebular'],
      [5006.84, -390, '[O III]', 'nebular'],
      [5875.62, -14, 'He I', 'stellar'],
      [6300.3, -3, '[O I]', 'sky'],
      [6548.05, -20, '[N II]', 'nebular'],
      [6562.8, -280, 'H I', 'stellar'],
      [6583.45, -60, '[N II]', 'nebular'],
      [6716.44, -14, '[S II]', 'nebular'],
      [6730.82, -16, '[S II]', 'nebular'],
      [7135.79, -15, '[Ar III]', 'nebular'],
    ]
    const lines = find({ kind: 'bare', snr: 50, lines: narrow(known.map(([wavelength, ew]) => [wavelength, ew])) })
    for (const [wavelength, ew, species, origin] of known) {
      const line = near(lines, wavelength)
      expect(line).toMatchObject({
        kind: 'emission',
        origin,
        candidates: [expect.objectContaining({ species }), ...(line?.candidates.slice(1) ?? [])],
      })
      expect(Math.abs((line?.ew ?? NaN) / ew - 1)).toBeLessThan(0.1)
    }
    expect(lines.length).toBeLessThanOrEqual(known.length + 1)
  })

  it('names helium in a hot star and marks interstellar bands as not stellar, at 90 km/s', () => {
    const shift = 1 + 90 / 299792.458
    const helium: [number, number][] = [
      [4026.19, 1.2],
      [4387.93, 0.6],
      [4471.48, 1.3],
      [4713.15, 0.3],
      [4921.93, 0.7],
      [5875.62, 0.8],
      [6678.15, 0.7],
    ]
    const interstellar: [number, number][] = [
      [5780.5 / shift, 0.5],
      [6613.6 / shift, 0.3],
    ]
    const lines = find(
      { kind: 'B', snr: 100, velocity: 90, lines: [...narrow(helium, 2), ...narrow(interstellar)] },
      { ...REST, velocity: 90 },
    )
    for (const [wavelength] of helium) {
      const line = near(lines, wavelength)
      expect(line).toMatchObject({ kind: 'absorption', origin: 'stellar' })
      expect(line?.candidates[0].species).toBe('He I')
    }
    for (const wavelength of [4340.46, 4861.32, 6562.79])
      expect(near(lines, wavelength)?.candidates[0].species).toBe('H I')
    for (const wavelength of [5780.5, 6613.6]) expect(near(lines, wavelength)?.origin).toBe('interstellar')
  })

  it('names metals in a cool star', () => {
    const lines = find({ kind: 'G2', snr: 100 })
    for (const [wavelength, species] of [
      [3933.66, 'Ca II'],
      [4226.73, 'Ca I'],
      [5183.6, 'Mg I'],
      [8542.09, 'Ca II'],
      [8662.14, 'Ca II'],
    ] as const)
      expect(near(lines, wavelength)?.candidates[0].species).toBe(species)
  })

  it('marks what lies in an oxygen band as telluric, and says what it cannot name', () => {
    const lines = find({
      kind: 'bare',
      snr: 100,
      lines: narrow([
        [6880, 1.5],
        [7605, 3],
        [8000, 1],
      ]),
    })
    expect(near(lines, 6880)?.origin).toBe('telluric')
    expect(near(lines, 7605)?.origin).toBe('telluric')
    expect(near(lines, 8000)).toMatchObject({ origin: 'unknown', kind: 'absorption' })
  })

  it('states the photon energy and the levels of hydrogen', () => {
    const line = near(find({ kind: 'A0', snr: 100 }), 4861.32)
    // hc/λ in vacuum, 12 398.42 / 4862.68
    expect(line?.candidates[0].photonEnergy).toBeCloseTo(2.5497, 3)
    expect(line?.candidates[0].levels).toBe('n = 2 to 4 (Balmer)')
  })

  it('finds nothing in a spectrum without lines, nor in a handful of samples', () => {
    let count = 0
    for (let seed = 1; seed <= 6; seed++) count += find({ kind: 'bare', snr: 50, seed }).length
    // 4 σ in 6 × 4,000 samples of white noise: about one in five spectra
    expect(count).toBeLessThan(5)
    expect(find({ kind: 'bare', from: 5000, to: 5004 })).toEqual([])
  })
})
