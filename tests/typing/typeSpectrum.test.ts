import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { seededNormal } from '../../src/numeric/random.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { BANDS } from '../../src/tables/bands.ts'
import { CALIBRATION } from '../../src/tables/calibration.ts'
import { PATTERNS } from '../../src/tables/patterns.ts'
import { combineTypes, disagreement } from '../../src/typing/combineTypes.ts'
import { expectedFeatures, expectedSpectrum } from '../../src/typing/expected.ts'
import { expectedProbability } from '../../src/typing/expectedProbability.ts'
import { typeSpectrum } from '../../src/typing/typeSpectrum.ts'
import { type TypingInput, typingInput } from '../../src/typing/typingInput.ts'
import type { TypePosterior } from '../../src/typing/types.ts'
import { findRestFrame } from '../../src/velocity/findRestFrame.ts'
import { madeSpectrum } from '../support/madeSpectrum.ts'

const START = 3800
const STEP = 1.5

/** A spectrum of a made flux on an even grid. */
function made(flux: (wavelength: number) => number, samples = 2000, step = STEP): Spectrum {
  const { spectrum } = madeSpectrum({ kind: 'bare', from: START, to: START + 3000, step: STEP })
  const wavelength = Float64Array.from({ length: samples }, (_, i) => START + step * i)
  return {
    ...spectrum,
    sigma: undefined,
    wavelength,
    flux: wavelength.map(flux),
    usable: new Uint8Array(samples).fill(1),
  }
}

function inputOf(spectrum: Spectrum): TypingInput {
  const continuum = fitContinuum(spectrum)
  const frame = findRestFrame(spectrum, continuum, { patterns: PATTERNS })
  return typingInput(spectrum, continuum, frame, { windows: BANDS, commonFwhm: CALIBRATION.commonFwhm })
}

/** Input whose features are the calibration's own for a type, with the error given as part of their scatter. */
function idealInput(typeNumber: number, luminosity: number, errors = 0.1): TypingInput {
  const measurements = expectedFeatures(CALIBRATION, typeNumber, luminosity).map(({ feature, value, scatter }, k) => ({
    feature,
    species: BANDS[k].species,
    wavelengthRest: BANDS[k].wavelength,
    unit: BANDS[k].unit,
    method: 'side bands',
    status: 'measured' as const,
    ew: value,
    ewErr: errors * scatter,
  }))
  return { measurements, isRestTrusted: true, samples: 2000 }
}

const gauss = (w: number, at: number, sigma: number): number => Math.exp(-0.5 * ((w - at) / sigma) ** 2)

describe('typeSpectrum', () => {
  it.each([
    [7, 5],
    [13, 5],
    [20, 1],
    [25, 5],
    [35, 5],
    [42, 5],
    [50, 3],
    [62, 5],
    [64, 3],
  ])('gives back the type %f and class %f whose expected features it is shown', (type, luminosity) => {
    const found = typeSpectrum(idealInput(type, luminosity), CALIBRATION)
    // The expected features are smooth in type, so only the coarseness of the grid is left (measured 0.6 at most).
    expect(Math.abs((found.typeNumber ?? NaN) - type)).toBeLessThan(1)
    expect(found.low68 ?? NaN).toBeLessThanOrEqual(type)
    expect(found.high68 ?? NaN).toBeGreaterThanOrEqual(type)
    const group = { 1: found.probSupergiant, 3: found.probGiant, 5: found.probDwarf }[luminosity] ?? NaN
    expect(group).toBeGreaterThan(0.5)
  })

  it('is a probability: it sums to one, and its ranges are nested', () => {
    const found = typeSpectrum(idealInput(42, 5), CALIBRATION)
    expect(found.grid?.probability.reduce((sum, p) => sum + p, 0)).toBeCloseTo(1, 12)
    const { low95, low68, typeNumber, high68, high95 } = found
    const order = [low95, low68, typeNumber, high68, high95].map((x) => x ?? NaN)
    expect([...order].sort((a, b) => a - b)).toEqual(order)
    expect((found.probDwarf ?? 0) + (found.probGiant ?? 0) + (found.probSupergiant ?? 0)).toBeCloseTo(1, 12)
    expect(found.evidence.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 12)
  })

  it('widens as the errors of the features grow', () => {
    const widths = [0.1, 1, 3, 6].map(
      (errors) => typeSpectrum(idealInput(42, 5, errors), CALIBRATION).typeNumberErr ?? NaN,
    )
    expect([...widths].sort((a, b) => a - b)).toEqual(widths)
  })

  it('does not depend on the order of the measurements', () => {
    const input = idealInput(33, 3)
    const other = { ...input, measurements: [...input.measurements].reverse() }
    expect(typeSpectrum(other, CALIBRATION)).toEqual(typeSpectrum(input, CALIBRATION))
  })

  it('leaves the class open where the features tell it no better than even', () => {
    const wide = typeSpectrum(idealInput(33, 4, 8), CALIBRATION)
    if (Math.max(wide.probDwarf ?? 0, wide.probGiant ?? 0, wide.probSupergiant ?? 0) < 0.5)
      expect(wide.luminosityClass).toBeUndefined()
    expect(wide.probDwarf ?? NaN).toBeLessThan(0.9)
  })

  const normal = seededNormal(5)
  it.each([
    ['a constant', made(() => 1000)],
    ['a slope', made((w) => w)],
    ['noise about nothing', made(() => normal())],
    ['a flat field at S/N 80', made(() => 1000 + 12 * normal())],
    ['a flat field at S/N 10', made(() => 1000 + 100 * normal())],
    ['a curved flat field', made((w) => 1000 * gauss(w, 5200, 700) + 20 + 10 * normal())],
    ['a single line', made((w) => 1000 + 10 * normal() - 500 * gauss(w, 4861, 4))],
    [
      'a lamp',
      made(
        (w) =>
          10 + normal() + [4046.6, 4358.3, 5460.7, 5769.6, 5790.7, 6402].reduce((s, l) => s + 5000 * gauss(w, l, 2), 0),
      ),
    ],
    ['20 samples', made(() => 1000 + 10 * normal(), 20, 150)],
  ])('gives no confident type to %s', (_name, spectrum) => {
    const found = typeSpectrum(inputOf(spectrum), CALIBRATION)
    expect(['none', 'outside']).toContain(found.state)
    expect(found.reason).toMatch(/\d/)
  })
})

describe('combineTypes', () => {
  it('of the same spectrum twice is no further off and not much narrower: the star itself is the same', () => {
    const one = idealInput(42, 5, 1)
    const single = typeSpectrum(one, CALIBRATION)
    const both = combineTypes([one, one], CALIBRATION)
    expect(both.typeNumberErr ?? NaN).toBeLessThanOrEqual(single.typeNumberErr ?? NaN)
    // Errors equal to the scatter: the variance falls from 2 to 1.5, far from the half of independent posteriors.
    expect(both.typeNumberErr ?? NaN).toBeGreaterThan(0.75 * (single.typeNumberErr ?? NaN))
  })

  it('refuses an empty list', () => {
    expect(() => combineTypes([], CALIBRATION)).toThrow('combineTypes requires a spectrum, got none')
  })
})

describe('disagreement', () => {
  const at = (typeNumber: number): TypePosterior => typeSpectrum(idealInput(typeNumber, 5), CALIBRATION)

  it('is found between an A and a G star, not between like ones', () => {
    expect(disagreement([at(22), at(42)])?.code).toBe('types-disagree')
    expect(disagreement([at(42), at(42.5)])).toBeUndefined()
    expect(disagreement([at(42)])).toBeUndefined()
  })
})

describe('expectedProbability', () => {
  const found = typeSpectrum(idealInput(42, 5), CALIBRATION)

  it('is high for the right type, low for another, lower for the wrong class', () => {
    expect(expectedProbability(found, 'G2V')).toBeGreaterThan(0.4)
    expect(expectedProbability(found, 'A0V')).toBeLessThan(0.01)
    expect(expectedProbability(found, 'G2I') ?? NaN).toBeLessThan(expectedProbability(found, 'G2') ?? NaN)
  })

  it('is absent where the text is no type of the sequence', () => {
    expect(expectedProbability(found, 'DA3')).toBeUndefined()
    expect(expectedProbability(found, 'unknown')).toBeUndefined()
  })
})

describe('expectedSpectrum', () => {
  it('has deep Balmer lines at A0 V and none to speak of at K5 V', () => {
    const depth = (type: number): number => {
      const { wavelength, normalised } = expectedSpectrum(CALIBRATION, type, 5) ?? { wavelength: [], normalised: [] }
      const at = Array.from(wavelength).findIndex((w) => Math.abs(w - 4861) <= 5)
      return 1 - normalised[at]
    }
    // Hβ of A0 V is 8.1 Å, of K2 V 1.0 Å (table of Lick-type indices from Pickles 1998, PASP 110, 863).
    expect(depth(20)).toBeGreaterThan(0.25)
    expect(depth(52)).toBeLessThan(0.2)
  })

  it('is absent where no mean lies near', () => {
    expect(expectedSpectrum({ ...CALIBRATION, spectra: { first: 3805, step: 10, rows: [] } }, 42, 5)).toBeUndefined()
  })
})
