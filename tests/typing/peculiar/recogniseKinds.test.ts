import { describe, expect, it } from 'vitest'
import { FINE_SAMPLES } from '../../../src/demo/grid.ts'
import { madeSpectrum, type MadeOptions } from '../../../src/demo/madeSpectrum.ts'
import { withFeatures } from '../../../src/demo/profiles.ts'
import { SPECIAL_KINDS, specialLight } from '../../../src/demo/specialSpectra.ts'
import { blackBody, starLight } from '../../../src/demo/starLight.ts'
import { seededNormal } from '../../../src/numeric/random.ts'
import { measureStar } from '../../../src/pipeline/analyseSpectrum.ts'
import type { Spectrum } from '../../../src/spectrum/types.ts'
import { CALIBRATION } from '../../../src/tables/calibration.ts'
import { KIND_CRITERIA } from '../../../src/tables/criteria.ts'
import { recogniseKinds, withKinds } from '../../../src/typing/peculiar/recogniseKinds.ts'
import type { TypePosterior } from '../../../src/typing/types.ts'
import { typeSpectrum } from '../../../src/typing/typeSpectrum.ts'

function typeOf(spectrum: Spectrum): TypePosterior {
  const star = measureStar(spectrum, { maximumVelocity: 1500 })
  return withKinds(typeSpectrum(star.typing, CALIBRATION), recogniseKinds(star, KIND_CRITERIA, CALIBRATION))
}

const wordsOf = ({ peculiar }: TypePosterior): string[] => peculiar.map(({ word }) => word)
const made = (light: Float64Array, options: MadeOptions = {}): Spectrum => madeSpectrum(light, { snr: 60, ...options })

const BALMER = [6562.79, 4861.33, 4340.47, 4101.74, 3970.07, 3889.05, 3835.38, 3797.9, 3770.63, 3750.15, 3734.37]

/** Black-body light with wide Balmer lines of given strengths from Hα on [Å] and other lines. */
function hydrogenStar(
  temperature: number,
  strengths: readonly number[],
  width: number,
  others: readonly (readonly [number, number, number])[] = [],
): Float64Array {
  const lines = [...strengths.map((strength, i) => [BALMER[i], strength, width] as const), ...others].map(
    ([wavelength, strength, fwhm]) => ({
      shape: { form: 'winged', width: fwhm } as const,
      wavelength,
      strength,
    }),
  )
  const clear = withFeatures(new Float64Array(FINE_SAMPLES).fill(1), lines)
  return blackBody(temperature).map((value, i) => value * clear[i])
}

describe('recogniseKinds on made light', () => {
  it.each(SPECIAL_KINDS.map((kind) => [kind]))('says %s of one', (kind) => {
    const options = kind === 'galaxy' ? { velocity: 6000 } : kind === 'metallic-line' ? { snr: 120 } : { velocity: 20 }
    expect(wordsOf(typeOf(made(specialLight(kind), options)))).toContain(kind)
  })

  // Strengths from Hα on [Å] and width of the size that models of log g = 8 have; from memory.
  it.each([
    [7000, [9, 8, 5, 2.5, 1, 0.3], 22],
    [10000, [30, 38, 36, 24, 12, 5, 1.5], 45],
    [13000, [38, 52, 50, 36, 20, 8, 2.5], 50],
    [20000, [24, 34, 34, 26, 15, 6, 1.5], 40],
    [40000, [10, 15, 15, 11, 6, 2, 0.4], 35],
    [70000, [6, 9, 9, 6, 3, 1, 0.1], 30],
  ])('recognises a white dwarf of %d K by its hydrogen', (temperature, strengths, width) => {
    const type = typeOf(made(hydrogenStar(temperature, strengths, width)))
    expect(wordsOf(type)).toContain('white dwarf')
    expect(type).toMatchObject({ state: 'outside' })
    expect(type.typeNumber).toBeUndefined()
  })

  it('recognises a white dwarf of wide helium lines without hydrogen (DB) and of ionised helium (DO)', () => {
    const neutral = [
      [3888.65, 8, 25],
      [4026.19, 9, 30],
      [4471.48, 14, 32],
      [4921.93, 8, 30],
      [5015.68, 4, 20],
      [5875.62, 13, 28],
      [6678.15, 7, 28],
    ] as const
    const ionised = [
      [4199.83, 1.6, 22],
      [4541.59, 3, 25],
      [4685.7, 8, 28],
      [4859.32, 3, 25],
      [5411.52, 4, 28],
      [6560.1, 4, 30],
    ] as const
    expect(wordsOf(typeOf(made(hydrogenStar(18000, [], 1, neutral))))).toContain('white dwarf')
    expect(wordsOf(typeOf(made(hydrogenStar(60000, [], 1, ionised))))).toContain('white dwarf')
  })

  it('tells a B subdwarf from a B dwarf of like hydrogen by the end of its series', () => {
    // Inglis & Teller 1939: log Ne = 23.26 - 7.5 log n; the series of a star of log g = 5.5 ends near n = 11
    const helium = [
      [4026.19, 0.5, 5],
      [4471.48, 0.5, 5],
      [5875.62, 0.4, 5],
    ] as const
    const subdwarf = [3.4, 5.4, 5.6, 5.4, 4.8, 4.1, 3.1, 1.7, 0.6, 0.2]
    const dwarf = [4, 5.6, 5.8, 5.8, 5.6, 5.4, 5.2, 4.9, 4.4, 3.8, 3.2]
    const fine = { fwhm: 4, step: 1.2 }
    expect(wordsOf(typeOf(made(hydrogenStar(29000, subdwarf, 9, helium), fine)))).toContain('hot subdwarf')
    expect(wordsOf(typeOf(made(hydrogenStar(19000, dwarf, 9, helium), fine)))).not.toContain('hot subdwarf')
  })

  it.each([0.02, 0.1])('finds old stars without gas at a redshift of %d', (redshift) => {
    const giant = starLight(52, 3)
    const dwarf = starLight(38, 5)
    const light = giant.map((value, i) => 0.8 * value + 0.2 * dwarf[i])
    const type = typeOf(made(light, { velocity: 299792.458 * redshift, fwhm: 7 }))
    expect(wordsOf(type)).toEqual(['galaxy'])
    expect(type.state).toBe('outside')
  })

  it('calls light bluer than stars with lines, and without any line, a white dwarf only where it has a colour', () => {
    const counts = made(blackBody(12000), { snr: 150 })
    const flux = counts.flux.map((value, i) => value / counts.wavelength[i])
    const density: Spectrum = { ...counts, flux, sigma: undefined, fluxKind: 'flux density' }
    expect(wordsOf(typeOf(density))).toEqual(['white dwarf'])
    expect(wordsOf(typeOf(counts))).toEqual([])
  })
})

describe('what is no star at all', () => {
  const normal = seededNormal(7)
  const one = made(new Float64Array(FINE_SAMPLES).fill(1), { snr: 100 })
  const like = (of: (wavelength: number) => number): Spectrum => ({
    ...one,
    flux: one.flux.map((value, i) => value * of(one.wavelength[i])),
  })
  const lamp = [4046.6, 4358.3, 5460.7, 5769.6, 5790.7, 5852.5, 6143.1, 6402.2, 6506.5, 6678.3, 7032.4, 8115.3]
  const peak = (x: number, at: number, width: number): number => Math.exp(-(((x - at) / width) ** 2))
  it.each([
    ['noise', like(() => normal())],
    ['a constant', made(new Float64Array(FINE_SAMPLES).fill(1), { snr: undefined })],
    ['a flat field', like((x) => peak(x, 6800, 1800))],
    ['a lamp', like((x) => 0.02 + lamp.reduce((sum, at, k) => sum + (1 + (k % 5)) * peak(x, at, 2.5), 0))],
    ['a single line', like((x) => 1 - 0.6 * peak(x, 5200, 4))],
    ['20 samples', made(starLight(42, 5), { last: 3728.5 })],
  ])('gives %s no type and no word, but a reason', (_, spectrum) => {
    const type = typeOf(spectrum)
    expect(['none', 'outside']).toContain(type.state)
    expect(wordsOf(type)).toEqual([])
    expect(type.reason).toBeTruthy()
  })
})

describe('withKinds', () => {
  const typed: TypePosterior = {
    state: 'typed',
    spectralType: 'B6',
    typeNumber: 16,
    peculiar: [{ word: 'metal-weak', text: 'weak', source: 'none' }],
    evidence: [],
    ratios: [],
    featuresUsed: 50,
  }
  const found = (word: 'white dwarf' | 'emission' | 'carbon', isOutside: boolean) => ({
    peculiarity: { word, text: 'so', source: 'none' },
    isOutside,
  })

  it('leaves no type to what is no ordinary star', () => {
    expect(withKinds(typed, [found('white dwarf', true)])).toEqual({
      state: 'outside',
      reason: 'recognised as white dwarf: so',
      peculiar: [{ word: 'white dwarf', text: 'so', source: 'none' }],
      evidence: [],
      ratios: [],
      featuresUsed: 50,
    })
  })

  it('leaves the type to a star with emission, and drops weak metals where another light hides them', () => {
    const shining = withKinds(typed, [found('emission', false)])
    expect(shining.spectralType).toBe('B6')
    expect(wordsOf(shining)).toEqual(['emission', 'metal-weak'])
    expect(wordsOf(withKinds(typed, [found('carbon', false)]))).toEqual(['carbon'])
    expect(withKinds(typed, [])).toBe(typed)
  })
})

describe('the criteria', () => {
  it('give every limit and every word a source', () => {
    for (const limit of Object.values(KIND_CRITERIA.limits)) expect(limit.source && limit.reason).toBeTruthy()
    const without = SPECIAL_KINDS.filter((word) => !KIND_CRITERIA.sources[word])
    expect(without).toEqual(['metal-weak']) // told with the type, not here
  })
})
