import { mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import type { Continuum } from '../../src/continuum/types.ts'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { measureBands } from '../../src/features/measureBands.ts'
import { seededNormal } from '../../src/numeric/random.ts'
import { extinctionCcm89 } from '../support/extinction.ts'
import type { BandWindow } from '../../src/tables/types.ts'
import { LICK_BANDS } from '../../src/tables/publishedWindows.ts'
import type { RestFrame } from '../../src/velocity/types.ts'
import { asSpectrum, madeSpectrum } from '../support/madeSpectrum.ts'
import { requirePython, runPython } from '../support/tools.ts'

const REST: RestFrame = { velocity: 0, trusted: true, how: 'none' }
const WINDOW: BandWindow = {
  feature: 'Test',
  species: '',
  wavelength: 5000,
  band: [4990, 5010],
  blue: [4960, 4980],
  red: [5020, 5040],
  unit: 'Å',
  source: 'common',
}
const GRID = Float64Array.from({ length: 800 }, (_, i) => 4700 + 0.75 * i)

/** A continuum that is exactly 1, with the given noise. */
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

function measure(
  flux: Float64Array,
  { noise = 1e-3, window = WINDOW, frame = REST, usable = new Uint8Array(flux.length).fill(1) } = {},
) {
  return measureBands(asSpectrum(GRID, flux, usable), flat(GRID.length, noise), frame, { windows: [window] })[0]
}

describe('measureBands', () => {
  it('counts of each pixel only the part inside the band', () => {
    // a step from 1 to 0.4 at a pixel's edge; the band [4990, 5010] holds 5010 − edge of the lower level: exact arithmetic
    const edge = 5000.375 - 0.75 * 4
    const flux = GRID.map((w) => (w > edge && w < 5015 ? 0.4 : 1))
    expect(measure(flux).ew).toBeCloseTo(0.6 * (5010 - edge), 10)
  })

  it('gives a Gaussian line its closed form, and the same in magnitudes', () => {
    // √(2π)·d·σ for d = 0.5, σ = 2 is 2.506628; ±10 Å is ±5 σ
    const flux = GRID.map((w) => 1 - 0.5 * Math.exp(-0.5 * ((w - 5000) / 2) ** 2))
    expect(measure(flux).ew).toBeCloseTo(2.506628, 4)
    const inMagnitudes = measure(flux, { window: { ...WINDOW, unit: 'mag' } }).ew
    expect(inMagnitudes).toBeCloseTo(-2.5 * Math.log10(1 - 2.506628 / 20), 5)
  })

  it('follows the star’s velocity and gives the width at rest', () => {
    const stretch = 1 + 600 / 299792.458
    const flux = GRID.map((w) => 1 - 0.5 * Math.exp(-0.5 * ((w / stretch - 5000) / 2) ** 2))
    expect(measure(flux, { frame: { ...REST, velocity: 600 } }).ew).toBeCloseTo(2.506628, 3)
  })

  it('states an error that repeats over noise', () => {
    const noise = 0.02
    const normal = seededNormal(5)
    const draws = 1000
    let within = 0
    let stated = 0
    for (let k = 0; k < draws; k++) {
      const flux = GRID.map((w) => 1 - 0.5 * Math.exp(-0.5 * ((w - 5000) / 2) ** 2) + noise * normal())
      const { ew = NaN, ewErr = NaN } = measure(flux, { noise })
      if (Math.abs(ew - 2.506628) < ewErr) within++
      stated = ewErr
    }
    // a normal error: 68.3 % ± 1.5 % of 1,000 draws
    expect(within / draws).toBeGreaterThan(0.63)
    expect(within / draws).toBeLessThan(0.73)
    // band 0.02·√(20·0.75) = 0.077 and side bands 17.5·0.02/√(2·26.7) = 0.048 Å in quadrature
    expect(stated).toBeCloseTo(Math.hypot(0.0775, 0.048), 2)
  })

  it('says why a feature could not be measured', () => {
    const flux = new Float64Array(GRID.length).fill(1)
    const outside = { ...WINDOW, blue: [4600, 4650] as const }
    expect(measure(flux, { window: outside })).toMatchObject({
      status: 'uncovered',
      reason: 'blue side band 4600–4650 Å lies outside the data by 100 %',
    })
    const usable = Uint8Array.from(GRID, (w) => (w > 4988 && w < 5000 ? 0 : 1))
    expect(measure(flux, { usable }).status).toBe('masked')
    expect(measure(flux, { usable }).ew).toBeUndefined()
    const absent = measure(flux, { noise: 0.01 })
    expect(absent.status).toBe('absent')
    expect(absent.limit3sigma).toBeCloseTo(3 * (absent.ewErr ?? NaN), 12)
  })

  it('measures a band against one side, where both windows are the same', () => {
    const flux = GRID.map((w) => (w > 4985 && w < 5015 ? 0.8 : 1))
    const side = { ...WINDOW, red: WINDOW.blue }
    expect(measure(flux, { window: side }).ew).toBeCloseTo(4, 8)
  })

  it('is not moved by a cosmic ray', () => {
    const flux = new Float64Array(GRID.length).fill(1)
    flux[GRID.findIndex((w) => w > 5001)] = 40
    expect(Math.abs(measure(flux, { noise: 0.01 }).ew ?? NaN)).toBeLessThan(0.01)
  })

  it('changes little under a response of a factor 10 or A(V) = 3, and by no more than its error allows', () => {
    const windows = LICK_BANDS
    for (const kind of ['A0', 'G2', 'K5'] as const) {
      const values = [
        () => 1,
        (w: number) => 10 ** ((w - 3600) / 5600),
        (w: number) => 10 ** (-0.4 * 3 * extinctionCcm89(w)),
      ].map((response) => {
        const { spectrum } = madeSpectrum({ kind, snr: 100, response })
        return measureBands(spectrum, fitContinuum(spectrum), REST, { windows })
      })
      windows.forEach(({ unit }, k) => {
        const [plain, ...others] = values.map((list) => list[k])
        const scale = unit === 'mag' ? 0.02 : 1
        for (const other of others) {
          const change = Math.abs((other.ew ?? NaN) - (plain.ew ?? NaN))
          const allowed = Math.max(0.01 * Math.abs(plain.ew ?? NaN), 0.05 * scale, plain.ewErr ?? NaN)
          expect(change).toBeLessThan(allowed)
        }
      })
    }
  })
})

/** Path of a file with the input of the outside program. */
function writeInput(value: unknown): string {
  const path = join(mkdtempSync(join(tmpdir(), 'darkline-')), 'input.json')
  writeFileSync(path, JSON.stringify(value))
  return path
}

describe.skipIf(!requirePython('numpy'))('measureBands against an independent computation', () => {
  it('agrees with the Lick definition computed by numpy on a fine grid', () => {
    const { spectrum } = madeSpectrum({ kind: 'G2', snr: Infinity, step: 0.5 })
    const n = spectrum.flux.length
    const scale = spectrum.flux[Math.floor(n / 2)]
    const relative = spectrum.flux.map((value) => value / scale)
    const measured = measureBands(asSpectrum(spectrum.wavelength, relative), flat(n, 1e-3), REST, {
      windows: LICK_BANDS,
    })
    const reference = JSON.parse(
      runPython(
        `import json, sys, numpy as np
d = json.load(open(sys.argv[1]))
w = np.array(d['w']); f = np.array(d['f']); out = []
def mean(lo, hi):
    x = np.linspace(lo, hi, 4001); return np.trapz(np.interp(x, w, f), x) / (hi - lo)
for b in d['bands']:
    fb, fr = mean(*b['blue']), mean(*b['red']); xb, xr = sum(b['blue']) / 2, sum(b['red']) / 2
    x = np.linspace(*b['band'], 4001); y = np.interp(x, w, f) / (fb + (fr - fb) * (x - xb) / (xr - xb))
    i = np.trapz(y, x); span = b['band'][1] - b['band'][0]
    out.append(span - i if b['unit'] == 'Å' else -2.5 * np.log10(i / span))
print(json.dumps(out))`,
        [writeInput({ w: [...spectrum.wavelength], f: [...relative], bands: LICK_BANDS })],
      ),
    ) as number[]
    // pixels as steps against linear interpolation at 0.5 Å: measured 0.01 Å and 0.0003 mag at worst
    measured.forEach(({ ew, unit }, k) =>
      expect(Math.abs((ew ?? NaN) - reference[k])).toBeLessThan(unit === 'mag' ? 5e-4 : 0.02),
    )
  })
})
