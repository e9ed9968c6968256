import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import type { Continuum } from '../../src/continuum/types.ts'
import { type LineOptions, measureLines } from '../../src/features/measureLines.ts'
import type { Measurement } from '../../src/features/types.ts'
import { extinctionCcm89 } from '../support/extinction.ts'
import { type ProfileShape, profile, profileArea } from '../../src/numeric/profiles.ts'
import { seededNormal } from '../../src/numeric/random.ts'
import { MEASURED_LINES } from '../../src/tables/lines.ts'
import type { SpectralLine } from '../../src/tables/types.ts'
import type { RestFrame } from '../../src/velocity/types.ts'
import { asSpectrum, madeSpectrum } from '../support/madeSpectrum.ts'

const REST: RestFrame = { velocity: 0, trusted: true, how: 'none' }
const GRID = Float64Array.from({ length: 1200 }, (_, i) => 4700 + 0.5 * i)
const LINE: SpectralLine = {
  feature: 'Test',
  species: 'X',
  wavelength: 5000,
  levels: '',
  source: 'common',
  window: [4975, 5025],
}
const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2)

function flat(n: number, noise: number, error = 0): Continuum {
  return {
    level: new Float64Array(n).fill(1),
    error: new Float64Array(n).fill(error),
    isPseudo: false,
    supported: 1,
    noise: new Float64Array(n).fill(noise),
    noiseFrom: 'file',
  }
}

/** 1 − the sum of profiles, each [shape, depth, centre, width …], on the grid. */
function withLines(lines: readonly (readonly [ProfileShape, ...number[]])[], grid = GRID): Float64Array {
  const out = new Float64Array(5)
  return grid.map((w) => {
    let depth = 0
    for (const [shape, ...parameters] of lines) {
      profile(shape, w, Float64Array.from(parameters), 0, out)
      depth += out[0]
    }
    return 1 - depth
  })
}

function measure(
  flux: Float64Array,
  options: Partial<LineOptions> & { noise?: number; error?: number } = {},
): Measurement[] {
  const { noise = 1e-3, error = 0, ...rest } = options
  return measureLines(asSpectrum(GRID, flux), flat(GRID.length, noise, error), REST, {
    lines: [LINE],
    resolution: 4,
    ...rest,
  })
}

describe('measureLines', () => {
  it('recovers analytic profiles to 1e-4 by the fit of the same shape', () => {
    for (const [shape, widths] of [
      ['gaussian', [2]],
      ['lorentzian', [1.5]],
      ['voigt', [1, 0.7]],
    ] as const) {
      const parameters = [0.4, 5000.3, ...widths]
      const fitted = measure(withLines([[shape, ...parameters]]), { lines: [{ ...LINE, profile: shape }] })[1]
      // closed forms of the areas; pixel centres of 0.5 Å sample the profile itself
      expect((fitted.ew ?? NaN) / profileArea(shape, parameters)).toBeCloseTo(1, 4)
      expect(fitted).toMatchObject({ method: shape, status: 'measured' })
      expect(fitted.centre).toBeCloseTo(5000.3, 4)
      expect(fitted.depth).toBeCloseTo(0.4, 4)
    }
  })

  it('loses by direct integration what lies outside the window, to 1e-4', () => {
    const fine = Float64Array.from({ length: 2000 }, (_, i) => 4950 + 0.05 * i)
    for (const [reach, gaussian, lorentzian] of [
      [1, 0.981527, 0.704833],
      [2, 0.999998, 0.844042],
      [3, 1, 0.894863],
    ]) {
      const line = { ...LINE, window: [5000 - 4 * reach, 5000 + 4 * reach] as const }
      const share = (shape: ProfileShape, width: number) => {
        const flux = withLines([[shape, 0.4, 5000, width]], fine)
        const [{ ew = NaN }] = measureLines(asSpectrum(fine, flux), flat(2000, 1e-3), REST, {
          lines: [line],
          methods: ['integration'],
        })
        return ew / profileArea(shape, [0.4, 5000, width])
      }
      // exact: erf(reach·2√ln 2) and (2/π)·atan(2·reach)
      expect(Math.abs(share('gaussian', 4 / FWHM_PER_SIGMA) - gaussian)).toBeLessThan(1e-4)
      expect(Math.abs(share('lorentzian', 2) - lorentzian)).toBeLessThan(1e-4)
    }
  })

  it('states the error of Cayrel 1988 for a fitted Gaussian', () => {
    // Cayrel 1988, IAU Symp. 132, 345, eq. 6: 1.5 ε √(FWHM·δ), ε = 1/(S/N): FWHM 5, δ 0.5, S/N 100 → 0.0237 Å
    const fitted = measure(withLines([['gaussian', 0.3, 5000, 5 / FWHM_PER_SIGMA]]), { noise: 0.01 })[1]
    expect((fitted.ewErrNoise ?? NaN) / (1.5 * 0.01 * Math.sqrt(5 * 0.5))).toBeCloseTo(1, 1)
  })

  it('keeps errors from noise and from the continuum apart', () => {
    const [direct] = measure(withLines([['gaussian', 0.3, 5000, 2]]), { noise: 0.01, error: 0.01 })
    // pixel sum 0.01·√(50·0.5) = 0.05 Å; level 1 % of the light left in the window, 50 − 1.504
    expect(direct.ewErrNoise).toBeCloseTo(0.05, 3)
    expect(direct.ewErrContinuum).toBeCloseTo(0.01 * (50 - 1.504), 4)
    expect(direct.ewErr).toBeCloseTo(Math.hypot(0.05, 0.485), 3)
  })

  it('shifts a fitted width as its continuum error says', () => {
    const flux = withLines([['gaussian', 0.3, 5000, 2]])
    const [, fitted] = measure(flux, { error: 0.002 })
    const [, shifted] = measure(flux.map((value) => value / 1.002))
    const moved = Math.abs((shifted.ew ?? NaN) - (fitted.ew ?? NaN))
    expect(moved / (fitted.ewErrContinuum ?? NaN)).toBeCloseTo(1, 1)
  })

  it('fits overlapping lines together', () => {
    const pair = [
      { ...LINE, feature: 'A', wavelength: 4997, window: undefined },
      { ...LINE, feature: 'B', wavelength: 5003, window: undefined },
    ].map(({ window: _, ...line }) => line)
    const flux = withLines([
      ['gaussian', 0.3, 4997, 1.7],
      ['gaussian', 0.5, 5003, 1.7],
    ])
    const fits = measure(flux, { lines: pair }).filter(({ method }) => method === 'joint fit')
    expect(fits.map(({ ew = NaN }) => ew)).toEqual([
      expect.closeTo(profileArea('gaussian', [0.3, 0, 1.7]), 3),
      expect.closeTo(profileArea('gaussian', [0.5, 0, 1.7]), 3),
    ])
  })

  it('reports lines closer than one FWHM as one blend', () => {
    const lines = [
      { ...LINE, feature: 'A', wavelength: 4999.5 },
      { ...LINE, feature: 'B', wavelength: 5001.5 },
    ]
    const rows = measure(withLines([['gaussian', 0.3, 5000.5, 2]]), { lines })
    expect(rows.map(({ status }) => status)).toEqual(['blend', 'blend', 'blend', 'blend'])
    expect(rows[1].reason).toBe('within one FWHM of B')
    expect(rows[3]).toMatchObject({ reason: 'measured as part of A' })
    expect(rows[3].ew).toBeUndefined()
  })

  it('gives a line that is not there its value, its error and a limit', () => {
    const normal = seededNormal(4)
    const rows = measure(
      GRID.map(() => 1 + 0.01 * normal()),
      { noise: 0.01 },
    )
    for (const row of rows) {
      expect(row.status).toBe('absent')
      expect(row.reason).toBe('weaker than three standard errors')
      expect(row.limit3sigma).toBeCloseTo(3 * (row.ewErr ?? NaN), 12)
      expect(Math.abs(row.ew ?? NaN)).toBeLessThan(row.limit3sigma ?? NaN)
    }
  })

  it('measures emission as negative', () => {
    const rows = measure(withLines([['gaussian', -3, 5000, 2]]))
    for (const row of rows) expect(row.ew).toBeCloseTo(-3 * 2 * Math.sqrt(2 * Math.PI), 1)
  })

  it('tells what is outside and what is masked', () => {
    const far = measure(withLines([]), { lines: [{ ...LINE, wavelength: 4702, window: [4690, 4714] }] })
    expect(far[0]).toMatchObject({
      status: 'uncovered',
      reason: 'window 4690.0–4714.0 Å lies outside the data by 41 %',
    })
    const usable = Uint8Array.from(GRID, (w) => (w > 4990 ? 0 : 1))
    const masked = measureLines(asSpectrum(GRID, withLines([]), usable), flat(GRID.length, 0.01), REST, {
      lines: [LINE],
    })
    expect(masked.map(({ status, ew }) => [status, ew])).toEqual([
      ['masked', undefined],
      ['masked', undefined],
    ])
  })
})

describe('measureLines over many draws of noise', () => {
  const DRAWS = 1000
  const CASES = [
    { name: 'a weak line at S/N 30', shape: 'gaussian', depth: 0.3, widths: [2], snr: 30 },
    { name: 'a strong line at S/N 50', shape: 'gaussian', depth: 0.7, widths: [2.5], snr: 50 },
    { name: 'an emission line at S/N 20', shape: 'gaussian', depth: -1.5, widths: [1.5], snr: 20 },
    { name: 'a line with wings at S/N 100', shape: 'voigt', depth: 0.5, widths: [2, 1.5], snr: 100 },
  ] as const

  for (const { name, shape, depth, widths, snr } of CASES)
    it(`finds the width of ${name} within one error in 63 to 73 % of draws, within two in 93 to 97 %`, () => {
      const clean = withLines([[shape, depth, 5000, ...widths]])
      const line = { ...LINE, profile: shape }
      const [{ ew: direct = NaN }] = measure(clean, { lines: [line] })
      const truth = [direct, profileArea(shape, [depth, 5000, ...widths])]
      const normal = seededNormal(Math.round(1000 * depth) + 31 * snr)
      const within = [
        [0, 0],
        [0, 0],
      ]
      for (let k = 0; k < DRAWS; k++) {
        const flux = clean.map((value) => value + normal() / snr)
        const rows = measure(flux, { lines: [line], noise: 1 / snr })
        rows.forEach(({ ew = NaN, ewErr = NaN }, m) => {
          const pull = Math.abs(ew - truth[m]) / ewErr
          if (pull < 1) within[m][0]++
          if (pull < 2) within[m][1]++
        })
      }
      for (const [one, two] of within) {
        // the bounds; a normal error gives 68.3 ± 1.5 % and 95.4 ± 0.7 %
        expect(one / DRAWS).toBeGreaterThan(0.63)
        expect(one / DRAWS).toBeLessThan(0.73)
        expect(two / DRAWS).toBeGreaterThan(0.93)
        expect(two / DRAWS).toBeLessThan(0.97)
      }
    })

  it('covers the truth with the continuum fitted and the noise measured in every draw', () => {
    const line = { ...LINE, wavelength: 5500, window: [5480, 5520] as const }
    const made = (seed: number) =>
      madeSpectrum({
        kind: 'bare',
        from: 4500,
        to: 6500,
        snr: 60,
        seed,
        lines: [{ wavelength: 5500, ew: 1.2, fwhm: 3 }],
      })
    const count = 200
    let one = 0
    let two = 0
    for (let seed = 1; seed <= count; seed++) {
      const { spectrum } = made(seed)
      const [{ ew = NaN, ewErr = NaN }] = measureLines(spectrum, fitContinuum(spectrum), REST, {
        lines: [line],
        resolution: 4,
      })
      const pull = Math.abs(ew - 1.2) / ewErr
      if (pull < 1) one++
      if (pull < 2) two++
    }
    // 200 draws: 68 ± 3.3 %; the placement error is stated for lines too, so the share may be higher, never much lower
    expect(one / count).toBeGreaterThan(0.62)
    expect(two / count).toBeGreaterThan(0.92)
  })
})

describe('measureLines under a response curve', () => {
  const RESPONSES = [
    ['a response of a factor 10', (w: number) => 10 ** ((w - 3600) / 5600)],
    [
      'reddening of A(V) = 3 after Cardelli, Clayton & Mathis 1989',
      (w: number) => 10 ** (-0.4 * 3 * extinctionCcm89(w)),
    ],
  ] as const
  // Blueward of 4500 Å in G stars, where the level is a pseudo-continuum, reddening moves it by up to 0.6 % (measured:
  // Hδ 4 %, Hγ 1.5 %), within the error stated.
  const FROM = { A0: 4000, F5: 4000, G2: 4450 } as const

  for (const [name, response] of RESPONSES)
    it(`changes no equivalent width by more than 1 % or 0.05 Å (${name})`, () => {
      for (const kind of ['A0', 'F5', 'G2'] as const) {
        const [plain, changed] = [() => 1, response].map((curve) => {
          const { spectrum } = madeSpectrum({ kind, snr: 200, response: curve })
          const lines = MEASURED_LINES.filter(({ wavelength }) => wavelength > 4000)
          return measureLines(spectrum, fitContinuum(spectrum), REST, {
            lines,
            resolution: 4,
            methods: ['integration'],
          })
        })
        plain.forEach(({ ew = NaN, ewErr = NaN, wavelengthRest }, k) => {
          const bound = wavelengthRest > FROM[kind] ? Math.max(0.05, 0.01 * Math.abs(ew)) : ewErr
          expect(Math.abs((changed[k].ew ?? NaN) - ew)).toBeLessThan(bound)
        })
      }
    })
})
