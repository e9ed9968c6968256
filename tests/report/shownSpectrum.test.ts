import { describe, expect, it } from 'vitest'
import type { Curves } from '../../src/quality/types.ts'
import { shownExposures, shownSpectrum } from '../../src/report/shownSpectrum.ts'
import type { Exposure, TargetView } from '../../src/report/targetView.ts'
import { madeSpectrum } from '../support/madeNight.ts'

/** A flat spectrum of a level from one wavelength to another. */
function flatCurves(from: number, to: number, level: number): Curves {
  const n = 200
  const wavelength = Float64Array.from({ length: n }, (_, i) => from + (i * (to - from)) / (n - 1))
  const values = (value: number): Float32Array => new Float32Array(n).fill(value)
  return {
    wavelength,
    restWavelength: wavelength,
    flux: values(level),
    continuum: values(level),
    normalised: values(1),
    expected: values(1),
  }
}

const arm = (file: string, from: number, to: number, level: number): Exposure => ({
  file,
  spectrum: { ...madeSpectrum({ curves: false }), curves: flatCurves(from, to, level) },
})

const view = (...exposures: Exposure[]): TargetView => ({
  name: 'Made star',
  exposures,
  best: 0,
  type: exposures[0].spectrum.type,
})

describe('shownSpectrum', () => {
  const [blue, red] = [arm('blue.fits', 3700, 5700, 100), arm('red.fits', 5000, 8000, 25)]

  it('joins arms in order of wavelength, the overlap from the best one, the other at its level', () => {
    const { spectrum, parts } = shownSpectrum(view(blue, red))
    expect(parts).toEqual([
      { exposure: blue, factor: 1 },
      { exposure: red, factor: 4 },
    ])
    const curves = spectrum.curves as Curves
    expect([curves.wavelength[0], curves.wavelength.at(-1)]).toEqual([3700, 8000])
    for (let i = 1; i < curves.wavelength.length; i++)
      expect(curves.wavelength[i]).toBeGreaterThanOrEqual(curves.wavelength[i - 1])
    const finite = [...curves.flux].filter((value) => Number.isFinite(value))
    expect(new Set(finite)).toEqual(new Set([100]))
    expect([...curves.wavelength].filter((x) => x > 5000 && x < 5700).length).toBeLessThan(80)
  })

  it('shows one exposure as it is, and no second one of the same range', () => {
    expect(shownSpectrum(view(blue)).spectrum).toBe(blue.spectrum)
    expect(shownExposures(view(blue, arm('again.fits', 3710, 5650, 90)))).toEqual([blue])
  })

  it('joins arms with a gap between them', () => {
    const far = arm('far.fits', 6000, 8000, 50)
    expect(shownSpectrum(view(blue, far)).parts.map(({ factor }) => factor)).toEqual([1, 2])
  })

  it('shows no arm that cannot be used beside one that can', () => {
    const bad = { ...red, spectrum: { ...red.spectrum, quality: 'unusable' as const } }
    expect(shownExposures(view(blue, bad))).toEqual([blue])
  })
})
