import type { NightTyping } from '../../src/night/nightTyping.ts'
import { NO_TYPE } from '../../src/night/nightTyping.ts'
import { summariseNight } from '../../src/night/summariseNight.ts'
import type { NightSummary, Target } from '../../src/night/types.ts'
import { setupName } from '../../src/quality/setupName.ts'
import type { FrameKind, FrameStatistics, Outcome, SpectrumOutcome } from '../../src/quality/types.ts'
import { airmass } from '../../src/ephemeris/airmass.ts'
import type { HeaderFacts } from '../../src/spectrum/types.ts'
import { COVER_RULES } from '../../src/tables/coverRules.ts'
import { THRESHOLDS } from '../../src/tables/thresholds.ts'
import type { TypePosterior } from '../../src/typing/types.ts'

/** An invented place in northern Chile. */
export const SITE = { longitude: -70.3, latitude: -27.5, height: 2200 } as const
/** 2026-05-17 at 03:00 UTC: the middle of the night there (solar midnight is near 04:40). */
export const NIGHT = 61177.125
export const MINUTE = 1 / 1440

/** Header facts of a set-up; invented. */
export const SETUP: HeaderFacts = {
  instrument: 'SPEC',
  detector: 'D1',
  grating: 'B600',
  slit: '1.5',
  binning: '1x1',
  gain: 1.4,
}

/** Invented stars that stand high at that place and time. */
export const STARS: readonly Target[] = [
  { object: 'Made A', ra: 220, dec: -30, expectedType: 'A0V', wantedSnr: 80, priority: 1, mag: 10 },
  { object: 'Made B', ra: 225, dec: -20, expectedType: 'G2V', wantedSnr: 80, priority: 2, mag: 10 },
  { object: 'Made C', ra: 230, dec: -40, expectedType: 'K0III', wantedSnr: 80, priority: 3, mag: 10 },
]

let serial = 0

/** A name that tells no order: the serial number in letters. */
function letters(number: number): string {
  return number < 26 ? String.fromCharCode(97 + number) : letters(Math.floor(number / 26)) + letters(number % 26)
}

interface MadeSpectrum {
  readonly object?: string
  readonly star?: Target
  readonly mjd?: number
  readonly snr?: number
  /** What the fake typing takes it for. */
  readonly type?: string
  readonly facts?: Partial<HeaderFacts>
  readonly spectrum?: Partial<SpectrumOutcome>
  readonly outcome?: Partial<Outcome>
  readonly kind?: FrameKind
}

/** Header facts of an exposure of a star, with the airmass the sky really had. */
export function starFacts(star: Target, mjd: number, more: Partial<HeaderFacts> = {}): HeaderFacts {
  const { ra = 0, dec = 0 } = star
  const exposure = 300
  const seen = airmass({ mjd, ra, dec, site: SITE })
  return {
    ...SETUP,
    object: star.object,
    ra,
    dec,
    exposure,
    mjdStart: mjd - exposure / 2 / 86400,
    mjdMid: mjd,
    ...(seen.airmass === undefined ? {} : { airmass: seen.airmass }),
    hourAngle: seen.hourAngle,
    site: SITE,
    ...more,
  }
}

/** An Outcome of one spectrum of a listed star, healthy unless told otherwise. */
export function madeSpectrum({
  star = STARS[0],
  mjd = NIGHT,
  snr = 90,
  type,
  facts,
  spectrum,
  outcome,
  kind,
  object,
}: MadeSpectrum = {}): Outcome {
  const known = starFacts(star, mjd, { ...(object === undefined ? {} : { object }), ...facts })
  serial++
  const posterior: TypePosterior = {
    ...NO_TYPE,
    state: 'typed',
    spectralType: type ?? star.expectedType ?? 'A0V',
    featuresUsed: 20,
  }
  return {
    file: `made/${letters(serial)}.fits`,
    size: 1000,
    sha256: `sum${serial}`,
    notes: [],
    frame: {
      kind: kind ?? 'science',
      kindHow: 'header',
      setup: setupName(known),
      facts: known,
      quality: 'usable',
      findings: [],
    },
    spectra: [
      {
        hdu: 0,
        facts: known,
        setup: setupName(known),
        wavelengthMin: 3700,
        wavelengthMax: 7000,
        samples: 2000,
        medium: 'air',
        mediumHow: 'declared',
        fluxKind: 'counts',
        fluxUnit: 'count',
        uncertainty: 'sigma',
        convention: 'made',
        snr: { blue: snr, visual: snr, red: snr },
        restFrame: { velocity: 10, error: 5, trusted: true, how: 'cross-correlation' },
        measurements: [],
        type: posterior,
        quality: 'usable',
        findings: [],
        ...spectrum,
      },
    ],
    ...outcome,
  }
}

/** An Outcome of a raw 2-D frame. */
export function madeFrame(
  kind: FrameKind,
  facts: HeaderFacts,
  more: {
    readonly statistics?: Partial<FrameStatistics>
    readonly quality?: 'usable' | 'unusable'
    readonly file?: string
  } = {},
): Outcome {
  serial++
  const { statistics, quality = 'usable', file = `made/raw-${letters(serial)}.fits` } = more
  return {
    file,
    size: 1000,
    sha256: `sum${serial}`,
    notes: [],
    spectra: [],
    frame: {
      kind,
      kindHow: 'header',
      setup: setupName(facts),
      facts,
      statistics: {
        width: 1000,
        height: 200,
        median: 500,
        p99: 20000,
        max: 30000,
        noise: 4,
        saturatedFraction: 0,
        nonfinite: 0,
        ...statistics,
      },
      quality,
      findings: [],
    },
  }
}

/** The calibrations that cover the set-up, taken in the afternoon, with an arc beside the star. */
export function madeCalibrations(setup: HeaderFacts = SETUP): readonly Outcome[] {
  const at = (minutes: number, exposure: number): HeaderFacts => ({
    ...setup,
    mjdStart: NIGHT + minutes * MINUTE,
    mjdMid: NIGHT + minutes * MINUTE,
    exposure,
  })
  return [
    ...[0, 1, 2, 3, 4].map((i) => madeFrame('bias', at(-300 + i, 0), { statistics: { p99: 510 } })),
    ...[0, 1, 2].map((i) => madeFrame('flat', at(-280 + i, 5))),
    madeFrame('arc', at(6, 10)),
  ]
}

/** Typing by words alone: a spectrum of another type than expected has a probability of 0.0001. */
export const WORDS: NightTyping = {
  combine: (spectra) => spectra[0].type,
  probability: (type, expected) =>
    type.spectralType === undefined ? undefined : type.spectralType === expected ? 0.8 : 0.0001,
}

export function madeNight(outcomes: readonly Outcome[], targets: readonly Target[] = STARS): NightSummary {
  return summariseNight(outcomes, { targets, thresholds: THRESHOLDS, coverRules: COVER_RULES, typing: WORDS })
}

/** 'level code' of findings. */
export function said(findings: readonly { readonly level: string; readonly code: string }[]): readonly string[] {
  return findings.map(({ level, code }) => `${level} ${code}`)
}
