import { featureName } from '../features/featureName.ts'
import type { Measurement } from '../features/types.ts'
import type { ClassicalRatio } from './types.ts'

interface RatioRule {
  readonly name: string
  /** Type numbers between which classifiers use it. */
  readonly types: readonly [number, number]
  readonly upper: string
  readonly lower: string
  /** Reading for increasing limits of the ratio: the first whose limit is not passed. */
  readonly readings: readonly (readonly [number, string])[]
  readonly source: string
}

const MKK = 'Morgan, Keenan & Kellman 1943'
const GRAY = 'Gray 2000'
const JASCHEK = 'Jaschek & Jaschek 1987'
const MEMORY = 'Morgan & Keenan 1973, from memory'

/** What a classifier compares, by band strengths at low resolution; the words follow the published criteria. */
const RULES: readonly RatioRule[] = [
  {
    name: 'He I 4471 / He II 4542',
    types: [0, 10.5],
    upper: 'HeI4471',
    lower: 'HeII4542',
    readings: [
      [0.7, 'He II the stronger: earlier than O7'],
      [1.4, 'about equal: near O7'],
      [Infinity, 'He I the stronger: later than O7'],
    ],
    source: `${MKK}; ${GRAY}`,
  },
  {
    name: 'He II 4686 / He I 4713',
    types: [4, 10.5],
    upper: 'HeII4686',
    lower: 'HeI4713',
    readings: [
      [0.8, 'He II 4686 weak: a late O supergiant, or later than B0'],
      [Infinity, 'He II 4686 strong: an O dwarf or giant'],
    ],
    source: 'Martins 2018, A&A 616, A135',
  },
  {
    name: 'Si IV 4089 / He I 4144',
    types: [7, 12],
    upper: 'SiIV4089',
    lower: 'HeI4144',
    readings: [
      [0.8, 'Si IV weak: a dwarf, or later than B1'],
      [1.6, 'about equal: a giant near B0'],
      [Infinity, 'Si IV strong: a supergiant near B0'],
    ],
    source: `${MKK}; ${JASCHEK}`,
  },
  {
    name: 'Si III 4553 / Si II 4130',
    types: [10, 15],
    upper: 'SiIII4553',
    lower: 'SiII4130',
    readings: [
      [0.7, 'Si II the stronger: later than B3'],
      [1.4, 'about equal: near B2 to B3'],
      [Infinity, 'Si III the stronger: B0 to B2'],
    ],
    source: `${MEMORY}`,
  },
  {
    name: 'Si II 4130 / He I 4144',
    types: [13, 20],
    upper: 'SiII4130',
    lower: 'HeI4144',
    readings: [
      [0.7, 'He I the stronger: earlier than B8'],
      [1.4, 'about equal: near B8'],
      [Infinity, 'Si II the stronger: B9 or later'],
    ],
    source: `${MKK}; ${JASCHEK}`,
  },
  {
    name: 'He I 4471 / Mg II 4481',
    types: [13, 21],
    upper: 'HeI4471',
    lower: 'MgII4481',
    readings: [
      [0.7, 'Mg II the stronger: B9 or later'],
      [1.4, 'about equal: B8 to B9'],
      [Infinity, 'He I the stronger: earlier than B8'],
    ],
    source: `${MKK}; ${JASCHEK}`,
  },
  {
    name: 'Ca II K / (Ca II H + Hε)',
    types: [18, 36],
    upper: 'CaK',
    lower: 'CaHHepsilon',
    readings: [
      [0.25, 'K very weak: A0 or earlier'],
      [0.75, 'K about half: near A5'],
      [1.25, 'about equal: F0 or later'],
      [Infinity, 'K the stronger: later than F0'],
    ],
    source: JASCHEK,
  },
  {
    name: 'G band / Hγ',
    types: [30, 52],
    upper: 'CH4312',
    lower: 'HgammaF',
    readings: [
      [0.1, 'G band absent: earlier than F3'],
      [1, 'G band weaker than Hγ: F3 to G0'],
      [Infinity, 'G band stronger than Hγ: later than G0'],
    ],
    source: `${MEMORY}`,
  },
  {
    name: 'Fe I 4046 / Hδ',
    types: [34, 52],
    upper: 'FeI4046',
    lower: 'HdeltaF',
    readings: [
      [0.3, 'Hδ far stronger: F or earlier'],
      [1, 'Hδ the stronger: G0 to G5'],
      [Infinity, 'Fe I the stronger: G8 or later'],
    ],
    source: `${MEMORY}`,
  },
  {
    name: 'Ca I 4227 / Hγ',
    types: [36, 60],
    upper: 'Ca4227',
    lower: 'HgammaF',
    readings: [
      [0.3, 'Ca I weak: G0 or earlier'],
      [1, 'Ca I growing: G'],
      [Infinity, 'Ca I the stronger: K or later'],
    ],
    source: `${MEMORY}`,
  },
  {
    name: 'Sr II 4077 / Fe I 4046',
    types: [32, 58],
    upper: 'SrII4077',
    lower: 'FeI4046',
    readings: [
      [1.2, 'Sr II no stronger: a dwarf, if the type is F to K'],
      [Infinity, 'Sr II the stronger: a giant or supergiant, if the type is F to K'],
    ],
    source: `${MEMORY}`,
  },
]

/** A ratio is quoted where its denominator is detected at this many σ. */
const DETECTED = 3

/**
 * The ratios that a classifier would quote, from side-band strengths; where a type is given, only those used near it. The value is absent, with the reason, where a line
 * was not measured or the denominator is not detected; a negative numerator counts as the undetected line it is.
 */
export function classicalRatios(measurements: readonly Measurement[], typeNumber?: number): ClassicalRatio[] {
  const byName = new Map(measurements.map((one) => [one.feature, one]))
  const used = RULES.filter(
    ({ types }) => typeNumber === undefined || (typeNumber >= types[0] && typeNumber <= types[1]),
  )
  return used.map(({ name, upper, lower, readings, source }) => {
    const top = byName.get(upper)
    const bottom = byName.get(lower)
    const absent = (reason: string): ClassicalRatio => ({ name, reason, reading: '', source })
    if (top?.ew === undefined || top.ewErr === undefined) return absent(`${featureName(upper)} was not measured`)
    if (bottom?.ew === undefined || bottom.ewErr === undefined) return absent(`${featureName(lower)} was not measured`)
    if (bottom.ew < DETECTED * bottom.ewErr) return absent(`${featureName(lower)} is not detected`)
    const value = top.ew / bottom.ew
    const error = Math.hypot(top.ewErr, value * bottom.ewErr) / bottom.ew
    const reading = readings.find(([limit]) => value < limit)?.[1] ?? ''
    return { name, value, error, reading, source }
  })
}
