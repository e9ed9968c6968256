import type { Finding } from '../../src/findings/types.ts'
import type { Measurement } from '../../src/features/types.ts'
import type {
  Drift,
  LogEntry,
  NightSummary,
  ObserveAgain,
  SpectrumNight,
  Target,
  TargetSummary,
} from '../../src/night/types.ts'
import { seededNormal } from '../../src/numeric/random.ts'
import type { Curves, FrameKind, Outcome, SpectrumOutcome } from '../../src/quality/types.ts'
import type { Evidence, TypeGrid, TypePosterior } from '../../src/typing/types.ts'

/** What a made spectrum is to look like; everything in it is invented. */
export interface MadeSpec {
  readonly object?: string
  /** Type number and luminosity number of the truth. */
  readonly type?: number
  readonly luminosity?: number
  readonly width?: number
  readonly snr?: number
  readonly state?: TypePosterior['state']
  readonly seed?: number
  readonly curves?: boolean
  readonly findings?: readonly Finding[]
  readonly file?: string
  readonly exposures?: number
  readonly samples?: number
}

const LETTERS = 'OBAFGKM'
const CLASSES = ['', 'I', 'II', 'III', 'IV', 'V']

/** 'G2' of 42. */
export const typeName = (number: number): string => `${LETTERS[Math.floor(number / 10)]}${Math.round(number % 10)}`

/** Feature, species, rest wavelength, and the type at which an invented star shows it best. */
const FEATURES: readonly (readonly [string, string, number, number, number])[] = [
  ['CaK', 'Ca II', 3933.66, 45, 9],
  ['CaH', 'Ca II', 3968.47, 44, 8],
  ['Hdelta', 'H I', 4101.74, 21, 13],
  ['CaI4227', 'Ca I', 4226.73, 56, 3],
  ['Gband', 'CH', 4305, 45, 7],
  ['Hgamma', 'H I', 4340.47, 21, 12],
  ['HeI4471', 'He I', 4471.5, 12, 1.4],
  ['MgII4481', 'Mg II', 4481.2, 20, 0.6],
  ['HeII4542', 'He II', 4541.6, 3, 0.9],
  ['FeI4383', 'Fe I', 4383.55, 50, 5],
  ['Hbeta', 'H I', 4861.33, 21, 12],
  ['Mgb', 'Mg I', 5175, 54, 6],
  ['FeI5270', 'Fe I', 5270, 52, 3.5],
  ['HeI5876', 'He I', 5875.6, 12, 0.9],
  ['NaD', 'Na I', 5892.5, 56, 5],
  ['TiO6159', 'TiO', 6159, 64, 14],
  ['Halpha', 'H I', 6562.8, 21, 9],
  ['TiO7050', 'TiO', 7050, 65, 20],
]

const strength = (best: number, most: number, type: number): number =>
  most * Math.exp(-0.5 * ((type - best) / 11) ** 2) + 0.05

function madeCurves(type: number, snr: number, samples: number, seed: number): Curves {
  const normal = seededNormal(seed)
  const wavelength = new Float64Array(samples)
  const flux = new Float32Array(samples)
  const continuum = new Float32Array(samples)
  const restWavelength = new Float64Array(samples)
  const normalised = new Float32Array(samples)
  const expected = new Float32Array(samples)
  const temperature = 40000 * Math.exp(-type / 28)
  for (let i = 0; i < samples; i++) {
    const x = 3750 + (i * 3550) / Math.max(1, samples - 1)
    const planck = 1e17 / x ** 5 / (Math.exp(1.4388e8 / (x * temperature)) - 1)
    let depth = 0
    for (const [, , centre, best, most] of FEATURES) {
      const width = most > 10 ? 12 : 5
      depth += (strength(best, most, type) / (width * 2.5)) * Math.exp(-0.5 * ((x - centre) / width) ** 2)
    }
    const level = planck * (1 + 0.05 * Math.sin(x / 300))
    wavelength[i] = x * 1.0001
    restWavelength[i] = x
    continuum[i] = level
    normalised[i] = Math.exp(-depth) * (1 + normal() / snr)
    expected[i] = Math.exp(-depth * 1.06)
    flux[i] = level * normalised[i]
  }
  return { wavelength, flux, continuum, restWavelength, normalised, expected }
}

function madeGrid(type: number, luminosity: number, width: number): TypeGrid {
  const types = Float64Array.from({ length: 69 }, (_, i) => i + 1)
  const classes = Float64Array.of(1, 2, 3, 4, 5)
  const probability = new Float64Array(types.length * classes.length)
  let sum = 0
  for (let t = 0; t < types.length; t++)
    for (let c = 0; c < classes.length; c++) {
      const p = Math.exp(-0.5 * ((types[t] - type) / width) ** 2 - 0.5 * ((classes[c] - luminosity) / 0.6) ** 2)
      probability[t * classes.length + c] = p
      sum += p
    }
  return { types, classes, probability: probability.map((p) => p / sum) }
}

function madeMeasurements(type: number, snr: number, seed: number): Measurement[] {
  const normal = seededNormal(seed + 1)
  return FEATURES.map(([feature, species, wavelengthRest, best, most], i): Measurement => {
    const common = { feature, species, wavelengthRest, unit: 'Å', method: 'side bands' } as const
    if (i === 1) return { ...common, status: 'masked', reason: 'a cosmic ray lies in the band' }
    if (i === 13 && seed % 2 === 0)
      return { ...common, status: 'uncovered', reason: 'the band lies beyond the spectrum' }
    const ewErrNoise = 6 / snr
    const ewErrContinuum = 0.05 + 0.02 * most
    const ew = strength(best, most, type) + normal() * ewErrNoise
    const ewErr = Math.hypot(ewErrNoise, ewErrContinuum)
    return {
      ...common,
      status: ew < 3 * ewErr ? 'absent' : 'measured',
      ew,
      ewErrNoise,
      ewErrContinuum,
      ewErr,
      ...(ew < 3 * ewErr ? { limit3sigma: 3 * ewErr } : {}),
      centre: wavelengthRest + normal() * 0.2,
      centreErr: 0.2,
      fwhm: 8 + most / 3,
      depth: Math.min(0.9, ew / 25),
    }
  })
}

function madeEvidence(measurements: readonly Measurement[], type: number): Evidence[] {
  const raw = measurements.flatMap((m, i): Evidence[] => {
    if (m.ew === undefined || m.ewErr === undefined) return []
    const [, , , best, most] = FEATURES[i]
    const expected = strength(best, most, type)
    const scatter = 0.1 + 0.06 * most
    const earlier = strength(best, most, type - 5)
    const later = strength(best, most, type + 5)
    const pull = (m.ew - expected) / Math.hypot(m.ewErr, scatter)
    const share = ((later - earlier) / Math.hypot(m.ewErr, scatter)) ** 2
    return [
      {
        feature: m.feature,
        measured: m.ew,
        error: m.ewErr,
        expected,
        expectedScatter: scatter,
        expectedEarlier: earlier,
        expectedLater: later,
        pull,
        share,
      },
    ]
  })
  const sum = raw.reduce((total, e) => total + e.share, 0)
  return raw.map((e) => ({ ...e, share: e.share / sum })).sort((a, b) => b.share - a.share)
}

/** A believable posterior about a type; `none` and `outside` hold what those states hold. */
export function madeType(spec: MadeSpec, measurements: readonly Measurement[]): TypePosterior {
  const { type = 42, luminosity = 5, width = 1.2, state = 'typed' } = spec
  if (state === 'none')
    return {
      state,
      reason: 'the signal-to-noise of 3 per Å is below 5',
      peculiar: [],
      evidence: [],
      ratios: [],
      featuresUsed: 0,
    }
  const dwarf = Math.max(0.01, Math.min(0.98, (luminosity - 2) / 3))
  const base = {
    peculiar: [],
    evidence: madeEvidence(measurements, type),
    ratios: [
      { name: 'He I 4471 / Mg II 4481', value: 0.8, error: 0.1, reading: 'equal at B8', source: 'made up' },
      { name: 'Ca I 4227 / Hδ', reason: 'Hδ is masked', reading: 'equal at K2', source: 'made up' },
    ],
    featuresUsed: 16,
  }
  if (state === 'outside')
    return {
      ...base,
      state,
      reason: 'no ordinary type fits: the root mean square pull at the best type is 6.1',
      peculiar: [{ word: 'white dwarf', text: 'Hβ is 58 Å wide at half depth, above 40 Å', source: 'made up' }],
      fitPull: 6.1,
      fitProbability: 1e-5,
    }
  return {
    ...base,
    state,
    spectralType: typeName(type),
    luminosityClass: CLASSES[Math.round(luminosity)],
    typeNumber: type,
    typeNumberErr: width,
    low68: type - width,
    high68: type + width,
    low95: type - 2 * width,
    high95: type + 2 * width,
    luminosityNumber: luminosity,
    probDwarf: dwarf,
    probGiant: (1 - dwarf) * 0.9,
    probSupergiant: (1 - dwarf) * 0.1,
    grid: madeGrid(type, luminosity, width),
    fitPull: 0.94,
    fitProbability: 0.61,
  }
}

/** One made spectrum. */
export function madeSpectrum(spec: MadeSpec = {}): SpectrumOutcome {
  const { type = 42, snr = 80, seed = 1, curves = true, findings = [], samples = 2400 } = spec
  const measurements = madeMeasurements(type, snr, seed)
  return {
    hdu: 0,
    facts: {
      object: spec.object ?? 'Made star',
      ra: 83.822083 + seed * 0.01,
      dec: -5.391111,
      dateObs: '2026-11-30T03:21:45.5',
      mjdMid: 61374.14 + seed * 0.011,
      exposure: 300,
      airmass: 1.21,
      telescope: 'Invented 1.2 m',
      instrument: 'Made-up spectrograph',
      binning: '2x2',
    },
    setup: '600 l/mm, slit 1.5, 2x2',
    wavelengthMin: 3750.4,
    wavelengthMax: 7300.7,
    samples: 2048,
    medium: 'air',
    mediumHow: 'declared',
    fluxKind: 'counts',
    fluxUnit: 'adu',
    uncertainty: 'sigma',
    convention: 'primary image, linear wavelength axis',
    snr: { blue: snr * 0.8, visual: snr, red: snr * 1.1 },
    resolution: { fwhm: 4.6, error: 0.2, how: 'sky lines', isUpperLimit: false },
    restFrame: { velocity: 30.2, error: 6.5, trusted: true, how: 'cross-correlation', pattern: 'metal', peakRatio: 12 },
    barycentricCorrection: 11.234,
    barycentricVelocity: 41.4,
    measurements,
    type: madeType(spec, measurements),
    quality: findings.some((f) => f.level === 'fault')
      ? 'unusable'
      : findings.some((f) => f.level === 'doubt')
        ? 'doubtful'
        : 'usable',
    findings,
    countsPerSecond: 42.5,
    ...(curves ? { curves: madeCurves(type, snr, samples, seed) } : {}),
  }
}

/** One made file with one spectrum. */
export function madeOutcome(spec: MadeSpec = {}): Outcome {
  const spectrum = madeSpectrum(spec)
  const { seed = 1 } = spec
  return {
    file: spec.file ?? `night/obj${String(seed).padStart(4, '0')}.fits`,
    size: 20160,
    sha256: (seed * 2654435761 + 12345).toString(16).padStart(16, '7').repeat(4).slice(0, 64),
    frame: {
      kind: 'science',
      kindHow: 'header',
      setup: spectrum.setup,
      facts: spectrum.facts,
      quality: 'usable',
      findings: [],
    },
    spectra: [spectrum],
    notes: [],
  }
}

/** One made 2-D frame. */
export function madeFrame(kind: FrameKind, seed: number): Outcome {
  const facts = {
    object: kind,
    dateObs: '2026-11-29T22:10:00',
    mjdMid: 61373.9 + seed * 0.003,
    exposure: kind === 'bias' ? 0 : 30,
    instrument: 'Made-up spectrograph',
    binning: '2x2',
  }
  const saturated: Finding[] =
    kind === 'flat' && seed % 3 === 0
      ? [
          {
            level: 'doubt',
            code: 'saturated',
            text: '1.2 % of the pixels are at the saturation level of 65535',
            value: 1.2,
            limit: 0.1,
            unit: '%',
          },
        ]
      : []
  return {
    file: `night/${kind}${String(seed).padStart(3, '0')}.fits`,
    size: 4_000_000,
    sha256: seed.toString(16).padStart(64, 'a'),
    frame: {
      kind,
      kindHow: 'header',
      setup: '600 l/mm, slit 1.5, 2x2',
      facts,
      statistics: {
        width: 2048,
        height: 512,
        median: kind === 'bias' ? 1003.25 : 21034.5,
        p99: 31234.5,
        max: 65535,
        noise: 3.91,
        saturatedFraction: saturated.length ? 0.012 : 0.0000123,
        nonfinite: 0,
        ...(kind === 'arc' ? { arcLines: 41 } : {}),
      },
      quality: saturated.length ? 'doubtful' : 'usable',
      findings: saturated,
    },
    spectra: [],
    notes: [],
  }
}

/** A file that could not be read. */
export const UNREADABLE: Outcome = {
  file: 'night/broken, "half".fits',
  size: 1000,
  sha256: 'f'.repeat(64),
  spectra: [],
  error: {
    code: 'header-truncated',
    message: 'header requires an END card, got the end of the file',
    hdu: 0,
    byte: 960,
  },
  notes: [],
}

const LOW_SNR: Finding = {
  level: 'doubt',
  code: 'low-snr',
  text: 'the signal-to-noise of 12 per Å at 5500 Å is below 20',
  value: 12,
  limit: 20,
  unit: '1/Å',
}
const COSMIC: Finding = {
  level: 'note',
  code: 'cosmic-rays',
  text: '4 samples look like cosmic rays and were masked',
  value: 4,
  limit: 0,
}

/** A made night of `count` targets with calibration frames; the same count gives the same night. */
export function madeNight(
  count: number,
  options: { readonly curves?: boolean } = {},
): { readonly outcomes: readonly Outcome[]; readonly night: NightSummary } {
  const { curves = true } = options
  const outcomes: Outcome[] = []
  const spectra: SpectrumNight[] = []
  const targets: TargetSummary[] = []
  for (let i = 0; i < count; i++) {
    const type = 5 + ((i * 23) % 60)
    const poor = i % 7 === 3
    const state = i % 11 === 5 ? 'outside' : i % 13 === 6 ? 'none' : poor ? 'wide' : 'typed'
    const spec: MadeSpec = {
      object: `Made ${i + 1}`,
      type,
      luminosity: i % 4 === 1 ? 3 : 5,
      width: poor ? 4.5 : 1.1,
      snr: poor ? 12 : 90,
      state,
      seed: i + 1,
      curves,
      samples: count > 50 ? 1200 : 2400,
      findings: poor ? [LOW_SNR, COSMIC] : i % 3 === 0 ? [COSMIC] : [],
    }
    const outcome = madeOutcome(spec)
    const spectrum = outcome.spectra[0]
    const unexpected = i % 9 === 4
    const expectedType = typeName(unexpected ? Math.max(1, type - 15) : type)
    const night: SpectrumNight = {
      ref: { outcome: i, spectrum: 0 },
      target: `Made ${i + 1}`,
      expectedType,
      expectedProbability: unexpected ? 0.0000021 : 0.62,
      separationArcsec: unexpected ? 48.3 : 0.8,
      findings: unexpected
        ? [
            {
              level: 'doubt',
              code: 'not-as-expected',
              text: `the list expects ${expectedType}, the probability of that is 0.000002`,
              value: 0.0000021,
              limit: 0.01,
            },
          ]
        : [],
      quality: unexpected ? 'doubtful' : spectrum.quality,
    }
    outcomes.push(outcome)
    spectra.push(night)
    const again = poor || unexpected
    targets.push({
      target: `Made ${i + 1}`,
      listed: { object: `Made ${i + 1}`, ra: 83, dec: -5, mag: 9.1, expectedType, wantedSnr: 50 },
      spectra: [night.ref],
      type: spectrum.type,
      expectedProbability: night.expectedProbability,
      snrWanted: 50,
      snrReached: spectrum.snr.visual,
      observeAgain: again,
      ...(again
        ? {
            reason: poor
              ? 'signal-to-noise 12 of 50 wanted'
              : 'the type is not the expected one: check that the right star was on the slit',
            urgency: poor ? 0.8 : 0.6,
            ...(poor ? { exposureNeeded: 5200 } : {}),
          }
        : {}),
      findings: [],
    })
  }
  const kinds: readonly FrameKind[] = ['bias', 'bias', 'bias', 'flat', 'flat', 'arc', 'arc', 'acquisition']
  kinds.forEach((kind, i) => outcomes.push(madeFrame(kind, i + 1)))
  outcomes.push(UNREADABLE)
  const summary = madeSummary(outcomes, spectra)
  return { outcomes, night: { ...summary, spectra, targets, observeAgain: againOf(targets, summary.notObserved) } }
}

function againOf(targets: readonly TargetSummary[], missed: readonly Target[]): ObserveAgain[] {
  return [
    ...targets.flatMap(({ target, listed, observeAgain, reason = '', exposureNeeded, urgency = 0 }) =>
      observeAgain ? [{ target, listed, reason, exposureNeeded, urgency }] : [],
    ),
    ...missed.map((listed) => ({
      target: listed.object,
      listed,
      reason: 'listed but not observed',
      exposureNeeded: 1500,
      urgency: 0.7,
    })),
  ].sort((a, b) => b.urgency - a.urgency)
}

function madeSummary(
  outcomes: readonly Outcome[],
  spectra: readonly SpectrumNight[],
): Omit<NightSummary, 'targets' | 'observeAgain'> {
  const normal = seededNormal(99)
  const setup = '600 l/mm, slit 1.5, 2x2'
  const point = (i: number, value: number, error?: number) => ({
    mjd: 61374.0 + i * 0.03,
    value,
    ...(error === undefined ? {} : { error }),
    label: `night/obj${String(i + 1).padStart(4, '0')}.fits`,
  })
  const twelve = Array.from({ length: 12 }, (_, i) => i)
  const drift: Finding = {
    level: 'note',
    code: 'zero-point-drift',
    text: 'the wavelength zero point moved by 31 km/s through the night',
    value: 31,
    limit: 20,
    unit: 'km/s',
  }
  const drifts: Drift[] = [
    {
      quantity: 'wavelength zero point',
      unit: 'km/s',
      setup,
      points: twelve.map((i) => point(i, -12 + 2.8 * i + 3 * normal(), 5)),
      findings: [drift],
    },
    {
      quantity: 'resolution',
      unit: 'Å',
      setup,
      points: twelve.map((i) => point(i, 4.6 + 0.1 * normal(), 0.15)),
      findings: [],
    },
    {
      quantity: 'throughput',
      unit: 'adu/s',
      setup,
      points: twelve.map((i) => point(i, 42 + 4 * normal())),
      findings: [],
    },
    { quantity: 'bias level', unit: 'adu', setup, points: [], findings: [] },
    {
      quantity: 'signal-to-noise',
      unit: '1/Å',
      setup,
      points: twelve.map((i) => point(i, 70 + 20 * normal())),
      findings: [],
    },
  ]
  const log: LogEntry[] = outcomes.map((outcome) => ({
    file: outcome.file,
    ...(outcome.frame?.facts.mjdMid === undefined ? {} : { mjd: outcome.frame.facts.mjdMid }),
    kind: outcome.frame?.kind ?? 'unknown',
    object: outcome.frame?.facts.object ?? '',
    ...(outcome.frame?.facts.exposure === undefined ? {} : { exposure: outcome.frame.facts.exposure }),
    ...(outcome.frame?.facts.airmass === undefined ? {} : { airmass: outcome.frame.facts.airmass }),
    setup: outcome.frame?.setup ?? '',
  }))
  const count = (quality: string) => spectra.filter((s) => s.quality === quality).length
  return {
    spectra,
    notObserved: [{ object: 'Made, never reached', expectedType: 'M4', wantedSnr: 30, priority: 2 }],
    cover: [
      {
        setup,
        science: spectra.length,
        bias: 3,
        dark: 0,
        flat: 2,
        arc: 2,
        standard: 0,
        arcGapHours: 2.4,
        findings: [],
      },
      {
        setup: '1200 l/mm, slit 1.0, 1x1',
        science: 2,
        bias: 0,
        dark: 0,
        flat: 0,
        arc: 0,
        standard: 0,
        findings: [
          {
            level: 'doubt',
            code: 'no-arc',
            text: 'no arc covers the set-up 1200 l/mm, slit 1.0, 1x1',
            value: 0,
            limit: 1,
          },
        ],
      },
    ],
    drifts,
    log: log.sort((a, b) => (a.mjd ?? Infinity) - (b.mjd ?? Infinity)),
    findings: [
      {
        level: 'note',
        code: 'common-offset',
        text: 'all stars share a wavelength offset of 4 km/s, within the error of 6 km/s',
        value: 4,
        limit: 20,
        unit: 'km/s',
      },
    ],
    frameFindings: new Map(),
    mjdFirst: 61373.903,
    mjdLast: 61374.42,
    counts: { usable: count('usable'), doubtful: count('doubtful'), unusable: count('unusable'), unreadable: 1 },
  }
}
