/**
 * Times continuum, features and velocity of one spectrum of 4,000 samples against a script that fits a clipped spline
 * continuum and integrates 60 equivalent widths with numpy and scipy. Start-up counts for neither.
 *   npx tsx tests/tools/benchMeasure.ts
 */
import { mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { measureBands } from '../../src/features/measureBands.ts'
import { measureLines } from '../../src/features/measureLines.ts'
import { BANDS } from '../../src/tables/bands.ts'
import { MEASURED_LINES } from '../../src/tables/lines.ts'
import { PATTERNS } from '../../src/tables/patterns.ts'
import { findRestFrame } from '../../src/velocity/findRestFrame.ts'
import { madeSpectrum } from '../support/madeSpectrum.ts'
import { runPython } from '../support/tools.ts'

/** The same work in a script: continuum, smoothing, all side-band and line widths, and the velocity patterns. */
const SCRIPT = `
import json, sys, time
import numpy as np
from scipy.interpolate import LSQUnivariateSpline
from scipy.ndimage import gaussian_filter1d
d = json.load(open(sys.argv[1]))
w = np.array(d['w']); f = np.array(d['f'])
step = np.log(w[-1] / w[0]) / (len(w) - 1)
grid = w[0] * np.exp(step * np.arange(len(w)))
patterns = [np.interp(grid, w, np.random.default_rng(k).normal(size=len(w))) for k in range(d['patterns'])]
def continuum():
    keep = np.ones(len(w), bool)
    knots = np.arange(w[0] + 150, w[-1] - 150, 300.0)
    for _ in range(10):
        spline = LSQUnivariateSpline(w[keep], f[keep], knots, k=3)
        r = f - spline(w)
        s = np.std(r[keep])
        now = (r > -1.5 * s) & (r < 3 * s)
        for lo, hi in zip(np.r_[w[0], knots], np.r_[knots, w[-1]]):
            part = (w >= lo) & (w <= hi)
            if now[part].sum() < 8: now |= part
        keep = now
    level = spline(w)
    return level, np.std((f / level)[keep])
def widths(level, noise):
    n = f / level
    out = []
    for lo, hi in d['windows']:
        m = (w >= lo) & (w <= hi); x = w[m]
        out.append((np.trapz(1 - n[m], x), noise * np.sqrt((hi - lo) * (x[1] - x[0]))))
    return out
def bands(level, noise):
    n = gaussian_filter1d(f / level, 2.1)
    out = []
    for (b0, b1), (l0, l1), (r0, r1) in d['bands']:
        mb = (w >= b0) & (w <= b1); ml = (w >= l0) & (w <= l1); mr = (w >= r0) & (w <= r1)
        if mb.sum() < 2 or ml.sum() < 2 or mr.sum() < 2: continue
        fb, fr = n[mb].mean(), n[mr].mean(); xb, xr = (b0 + b1) / 2, (r0 + r1) / 2
        x = w[ml]; out.append((np.trapz(1 - n[ml] / (fb + (fr - fb) * (x - xb) / (xr - xb)), x), noise * np.sqrt(len(x))))
    return out
def velocity(level):
    n = np.interp(grid, w, 1 - f / level); n -= n.mean()
    size = 2 * len(n); spectrum = np.fft.rfft(n, size)
    return [np.argmax(np.fft.irfft(spectrum * np.conj(np.fft.rfft(p, size)))) for p in patterns]
def plain():
    level, noise = continuum(); return widths(level, noise)
def same():
    level, noise = continuum(); return widths(level, noise), bands(level, noise), velocity(level)
out = []
for run in (plain, same):
    run(); times = []
    for _ in range(60):
        t = time.perf_counter(); run(); times.append(time.perf_counter() - t)
    times.sort(); out.append([1e3 * times[0], 1e3 * times[30]])
print(json.dumps(out))
`

function best(run: () => unknown): [number, number] {
  for (let k = 0; k < 150; k++) run()
  const times: number[] = []
  for (let k = 0; k < 200; k++) {
    const start = performance.now()
    run()
    times.push(performance.now() - start)
  }
  times.sort((a, b) => a - b)
  return [times[0], times[100]]
}

const folder = mkdtempSync(join(tmpdir(), 'darkline-'))
let product = 1
const kinds = ['A0', 'F5', 'G2', 'M4'] as const
for (const kind of kinds) {
  const { spectrum } = madeSpectrum({ kind, from: 3600, to: 3600 + 1.4 * 3999.5, step: 1.4 })
  const windows = Array.from({ length: 60 }, (_, k) => [3800 + 85 * k, 3820 + 85 * k])
  const bands = BANDS.map(({ blue, band, red }) => [blue, band, red])
  const path = join(folder, 'input.json')
  const input = { w: [...spectrum.wavelength], f: [...spectrum.flux], windows, bands, patterns: PATTERNS.length }
  writeFileSync(path, JSON.stringify(input))
  const [[plainBest], [sameBest]] = JSON.parse(runPython(SCRIPT, [path])) as [number, number][]
  const continuum = fitContinuum(spectrum)
  const frame = findRestFrame(spectrum, continuum, { patterns: PATTERNS })
  const parts = {
    continuum: best(() => fitContinuum(spectrum)),
    bands: best(() =>
      measureBands(spectrum, continuum, frame, { windows: BANDS, resolution: { current: 4, common: 8 } }),
    ),
    integration: best(() =>
      measureLines(spectrum, continuum, frame, { lines: MEASURED_LINES, resolution: 4, methods: ['integration'] }),
    ),
    lines: best(() => measureLines(spectrum, continuum, frame, { lines: MEASURED_LINES, resolution: 4 })),
    velocity: best(() => findRestFrame(spectrum, continuum, { patterns: PATTERNS })),
  }
  const ours = parts.continuum[0] + parts.bands[0] + parts.lines[0] + parts.velocity[0]
  const withoutFits = ours - parts.lines[0] + parts.integration[0]
  const detail = Object.entries(parts).map(([name, [least]]) => `${name} ${least.toFixed(2)}`)
  console.log(
    `${kind}, ${spectrum.flux.length} samples, best times in ms: script with continuum and 60 widths ${plainBest.toFixed(2)}, ` +
      `with bands and velocity too ${sameBest.toFixed(2)}; here ${withoutFits.toFixed(2)}, with fitted profiles ${ours.toFixed(2)} ` +
      `(${detail.join(', ')}); ratio for the same work ${(sameBest / withoutFits).toFixed(1)}`,
  )
  product *= sameBest / withoutFits
}
console.log(`ratio, geometric mean: ${(product ** (1 / kinds.length)).toFixed(1)}`)
