import { describe, expect, it } from 'vitest'
import { fitContinuum } from '../../src/continuum/fitContinuum.ts'
import { madeSpectrum } from '../../src/demo/madeSpectrum.ts'
import { starLight } from '../../src/demo/starLight.ts'
import type { Measurement } from '../../src/features/types.ts'
import { seededNormal } from '../../src/numeric/random.ts'
import { checkSpectrum } from '../../src/quality/checkSpectrum.ts'
import type { SpectrumCheck } from '../../src/quality/checkSpectrum.ts'
import type { SpectrumInput } from '../../src/quality/samples.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { THRESHOLDS } from '../../src/tables/thresholds.ts'
import type { TypePosterior } from '../../src/typing/types.ts'

const FACTS: Spectrum['facts'] = {
  object: 'Made 1',
  ra: 10,
  dec: 20,
  mjdMid: 60000,
  exposure: 300,
  airmass: 1.2,
  site: { longitude: -70, latitude: -29, height: 2400 },
}
const TYPED: TypePosterior = { state: 'typed', peculiar: [], evidence: [], ratios: [], featuresUsed: 30 }
const HBETA: Measurement = {
  feature: 'Hbeta',
  species: 'H I',
  wavelengthRest: 4861.33,
  unit: 'Å',
  method: 'side bands',
  status: 'measured',
  ew: 5,
  ewErr: 0.2,
}

/** A made star (types are numbers, A0 = 20) as it comes out of a good night. */
function healthy(type = 20, options: Parameters<typeof madeSpectrum>[1] = {}): Spectrum {
  return { ...madeSpectrum(starLight(type, 5), { snr: 100, step: 1.5, fwhm: 5, last: 8000, ...options }), facts: FACTS }
}

function check(spectrum: Spectrum, more: Partial<SpectrumInput> = {}): SpectrumCheck {
  return checkSpectrum(
    {
      spectrum,
      continuum: fitContinuum(spectrum),
      restFrame: { velocity: 0, error: 2, trusted: true, how: 'cross-correlation' },
      measurements: [],
      type: TYPED,
      ...more,
    },
    THRESHOLDS,
  )
}

const said = ({ findings }: SpectrumCheck): readonly string[] => findings.map(({ level, code }) => `${level} ${code}`)

/** The spectrum with its flux changed sample by sample. */
function changed(spectrum: Spectrum, change: (flux: number, wavelength: number, i: number) => number): Spectrum {
  return { ...spectrum, flux: spectrum.flux.map((value, i) => change(value, spectrum.wavelength[i], i)) }
}

describe('checkSpectrum', () => {
  for (const type of [5, 12, 20, 26, 32, 38, 44, 50, 55, 62])
    it(`finds nothing in a healthy star of type number ${type}`, () => {
      const found = check(healthy(type), { type: { ...TYPED, typeNumber: type } })
      expect(said(found)).toEqual([])
      expect(found.quality).toBe('usable')
    })

  it('gives the planted signal-to-noise per Å within 10 %', () => {
    const flat = madeSpectrum(new Float64Array(starLight(20, 5).length).fill(1), {
      snr: 80,
      step: 1.6,
      fwhm: 5,
      last: 7000,
    })
    const { snr } = check({ ...flat, facts: FACTS })
    // S/N per sample 80, 1.6 Å a sample: 80 / √1.6 per Å
    for (const value of [snr.blue, snr.visual, snr.red])
      expect(Math.abs((value ?? 0) / (80 / Math.sqrt(1.6)) - 1)).toBeLessThan(0.1)
  })

  it('leaves out the signal-to-noise of a band that is not covered', () => {
    const { snr } = check(healthy(20, { last: 5200 }))
    expect(snr.visual).toBeUndefined()
    expect(snr.red).toBeUndefined()
    expect(snr.blue).toBeGreaterThan(50)
  })

  it('finds spectra that are faint, and too faint', () => {
    expect(said(check(healthy(20, { snr: 6 })))).toContain('doubt low-signal-to-noise')
    const normal = seededNormal(4)
    // noise alone, its size measured and not taken from the file
    const nothing = check({ ...changed(healthy(), () => 2 * normal()), sigma: undefined, uncertainty: 'none' })
    expect(nothing.quality).toBe('unusable')
  })

  it('finds counts at the limit of the detector and a flat top', () => {
    const star = healthy()
    const limit = 0.8 * Math.max(...star.flux)
    const clipped = changed(star, (value) => Math.min(value, limit))
    expect(said(check(clipped))).toContain('fault flat-topped')
    const stated = { ...clipped, facts: { ...FACTS, saturation: limit } }
    expect(said(check(stated))).toContain('fault saturated-spectrum')
    expect(said(check({ ...star, facts: { ...FACTS, saturation: 2 * limit } }))).toEqual([])
  })

  it('finds dead samples and missing samples with their share', () => {
    const dead = changed(healthy(), (value, _, i) => (i >= 700 && i < 730 ? 0 : value))
    expect(said(check(dead))).toContain('note dead-samples')
    const star = healthy()
    const gap = {
      ...changed(star, (value, x) => (x > 5000 && x < 5600 ? NaN : value)),
      usable: star.usable.map((one, i) => (star.wavelength[i] > 5000 && star.wavelength[i] < 5600 ? 0 : one)),
    }
    const found = check(gap).findings.find(({ code }) => code === 'missing-samples')
    // 600 of 4300 Å
    expect(found?.value).toBeCloseTo(600 / 4300, 2)
    expect(found?.level).toBe('doubt')
  })

  it('finds a cosmic ray, and names the line it falls on', () => {
    const i = Math.round((4861.33 - 3700) / 1.5)
    const hit = changed(healthy(), (value, _, k) => (k === i ? 3 * value : value))
    const found = check(hit, { measurements: [HBETA] })
    expect(said(found)).toEqual(['doubt cosmic-ray-on-line', 'note cosmic-ray-hits'])
    expect(found.findings[0].text).toContain('Hβ')
    expect(
      said(
        check(
          changed(healthy(), (value, _, k) => (k === 1200 ? 2 * value : value)),
          { measurements: [HBETA] },
        ),
      ),
    ).toEqual(['note cosmic-ray-hits'])
  })

  it('does not take an emission line as wide as the instrument for a cosmic ray', () => {
    const line = changed(healthy(), (value, x) => value * (1 + 2 * Math.exp(-4 * Math.LN2 * ((x - 6562.8) / 5) ** 2)))
    expect(said(check(line)).filter((one) => one.includes('cosmic'))).toEqual([])
  })

  it('finds sky left and sky taken out too strongly', () => {
    const sky = (share: number): Spectrum =>
      changed(healthy(), (value, x) => value * (1 + share * Math.exp(-4 * Math.LN2 * ((x - 5577.339) / 5) ** 2)))
    expect(said(check(sky(0.4)))).toEqual(['doubt sky-left'])
    expect(said(check(sky(-0.3)))).toEqual(['doubt sky-over-subtracted'])
    expect(said(check(sky(-0.1)))).toEqual(['note sky-over-subtracted'])
  })

  it('finds oxygen bands, and bands divided out too strongly', () => {
    const band = (share: number): Spectrum =>
      changed(healthy(), (value, x) => (x > 6867 && x < 6890 ? value * (1 + share) : value))
    expect(said(check(band(-0.3)))).toContain('note telluric-bands')
    expect(said(check(band(0.3)))).toContain('doubt telluric-over-corrected')
  })

  it('finds a step where two orders were joined badly', () => {
    const step = check(changed(healthy(), (value, x) => (x > 5301 ? 1.25 * value : value)))
    const found = step.findings.find(({ code }) => code === 'order-step')
    expect(found?.text).toContain('at 5301')
    expect(found?.level).toBe('doubt')
  })

  it('finds samples that alternate', () => {
    expect(said(check(changed(healthy(), (value, _, i) => value * (1 + (i % 2 ? 0.08 : -0.08)))))).toContain(
      'doubt ringing',
    )
  })

  it('finds flux below zero', () => {
    const low = changed(healthy(20, { snr: 40 }), (value, x) => (x < 4100 ? value - 3 * Math.abs(value) : value))
    expect(said(check(low)).some((one) => one.includes('negative-flux'))).toBe(true)
  })

  it('finds a wavelength scale that is off, and knows the offset of air against vacuum', () => {
    const zero = (offset: number, error = 3): readonly string[] =>
      said(check(healthy(), { zeroPoint: { offset, error, from: 'sky lines' } }))
    expect(zero(8)).toEqual([])
    // 60 km/s at 5500 Å are 1.1 Å: 0.7 samples of 1.5 Å, less than half the width of 2.5 samples
    expect(zero(60)).toEqual(['note wavelength-zero-point'])
    expect(zero(300)).toEqual(['doubt wavelength-zero-point'])
    expect(zero(60, 40)).toEqual([])
    expect(zero(-83, 1.5)).toEqual(['doubt air-vacuum-mix-up'])
  })

  it('tells a spectrograph out of focus from lines that the star itself widens', () => {
    const facts = { ...FACTS, resolutionFwhm: 5 }
    const star = { ...healthy(), facts }
    expect(said(check(star, { resolution: { fwhm: 11, how: 'sky lines', isUpperLimit: false } }))).toEqual([
      'doubt out-of-focus',
    ])
    expect(
      said(check(star, { resolution: { fwhm: 11, how: 'stellar lines (upper limit)', isUpperLimit: true } })),
    ).toEqual(['note worse-resolution'])
    expect(said(check(star, { resolution: { fwhm: 6, how: 'sky lines', isUpperLimit: false } }))).toEqual([])
  })

  it('notes emission, a missing type and missing header facts', () => {
    expect(said(check(healthy(), { measurements: [{ ...HBETA, ew: -6 }] }))).toEqual(['note emission-lines'])
    expect(said(check(healthy(), { type: { ...TYPED, state: 'none', reason: 'no feature covered' } }))).toEqual([
      'note no-type',
    ])
    const bare = check({ ...healthy(), facts: { object: 'x' } })
    expect(bare.findings[0].text).toBe(
      'The header does not give its position, the time, the exposure, the airmass, the place',
    )
  })

  it('hands on the notes of the reader', () => {
    const noted = { ...healthy(), notes: [{ code: 'medium-guessed', text: 'taken for air' }] }
    expect(check(noted).findings).toEqual([{ level: 'note', code: 'medium-guessed', text: 'taken for air' }])
  })

  it('answers for spectra without a single usable sample', () => {
    const star = healthy()
    const none = check({ ...star, usable: new Uint8Array(star.flux.length) })
    expect(none.quality).toBe('unusable')
    expect(none.snr).toEqual({})
  })

  it('changes nothing it is given', () => {
    const star = healthy()
    const before = star.flux.slice()
    check(star)
    expect(star.flux).toEqual(before)
  })
})
