import type { Outcome, SpectrumOutcome } from '../../src/quality/types.ts'
import type { TargetView } from '../../src/report/targetView.ts'
import { targetViews } from '../../src/report/targetView.ts'
import { madeOutcome, madeSpectrum } from './madeNight.ts'

/** A name with everything that can go wrong in one. */
export const HOSTILE_NAME =
  '=HYPERLINK("x")\u0007\u001b[31m <tags> & "quotes", 星の名前 Ärger\u202e e\u0301 α Ori\r\n-- '.repeat(6)

const withSpectrum = (spectrum: SpectrumOutcome, more: Partial<Outcome> = {}): TargetView =>
  targetViews([{ ...madeOutcome(), ...more, spectra: [spectrum] }])[0]

const hostile = (): TargetView =>
  targetViews([
    madeOutcome({
      object: HOSTILE_NAME,
      file: `night/${'a-long-folder-name/'.repeat(16)}x.fits`,
      findings: Array.from({ length: 16 }, (_, i) => ({
        level: i < 2 ? 'fault' : 'doubt',
        code: `code-${i}`,
        text: `finding ${i} says quite a lot of what is wrong, with its figure of ${i * 1.5} above ${i}`,
      })),
    }),
  ])[0]

const bare = (): TargetView =>
  withSpectrum(
    {
      ...madeSpectrum({ state: 'none', curves: false }),
      facts: {},
      setup: '',
      snr: {},
      resolution: undefined,
      restFrame: { velocity: 0, trusted: false, reason: 'no pattern of lines matched', how: 'none' },
      barycentricVelocity: undefined,
      measurements: [],
    },
    { file: 'bare.fits', sha256: undefined },
  )

const noContinuum = (): TargetView => {
  const spectrum = madeSpectrum({ seed: 5 })
  const curves = spectrum.curves as NonNullable<typeof spectrum.curves>
  const none = new Float32Array(curves.flux.length).fill(NaN)
  return withSpectrum({ ...spectrum, curves: { ...curves, continuum: none, normalised: none, expected: undefined } })
}

const oneSample = (): TargetView => {
  const one = Float64Array.of(5000)
  const value = Float32Array.of(1)
  const curves = { wavelength: one, flux: value, continuum: value, restWavelength: one, normalised: value }
  return withSpectrum({ ...madeSpectrum({ seed: 6 }), curves })
}

/** 65 features, as many as a full calibration has, in three exposures of one star. */
const crowded = (): TargetView => {
  const spectra = [1, 2, 3].map((seed): SpectrumOutcome => {
    const made = madeSpectrum({ seed, type: 44, snr: 40 + 10 * seed, object: 'HD 12345' })
    const measurements = Array.from({ length: 65 }, (_, i) => ({
      ...made.measurements[i % made.measurements.length],
      feature: `FeI${4000 + i * 41}`,
      wavelengthRest: 4000 + i * 41,
    }))
    const measured = measurements.filter((m) => m.ew !== undefined)
    const evidence = measured.map((m, i) => ({
      feature: m.feature,
      measured: m.ew ?? 0,
      error: m.ewErr ?? 1,
      expected: (m.ew ?? 0) * 1.1,
      expectedScatter: 0.2,
      pull: 4 * Math.sin(i),
      share: 1 / measured.length,
    }))
    const ratios = Array.from({ length: 9 }, (_, i) => ({ ...made.type.ratios[0], name: `ratio ${i}` }))
    return { ...made, measurements, type: { ...made.type, evidence, ratios } }
  })
  const exposures = spectra.map((spectrum, i) => ({ file: `night/e${i}.fits`, sha256: String(i).repeat(64), spectrum }))
  return { name: 'HD 12345', exposures, best: 2, type: spectra[2].type }
}

/** Targets that are hard on a page, by what is hard about them. */
export const ODD_TARGETS: Readonly<Record<string, () => TargetView>> = {
  hostile,
  bare,
  noContinuum,
  oneSample,
  crowded,
}
