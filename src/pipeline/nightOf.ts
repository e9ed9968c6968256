import type { Finding } from '../findings/types.ts'
import { NO_TYPE } from '../night/nightTyping.ts'
import { summariseNight } from '../night/summariseNight.ts'
import type { NightSummary, Target, TargetSummary } from '../night/types.ts'
import type { Outcome, SpectrumOutcome } from '../quality/types.ts'
import { CALIBRATION } from '../tables/calibration.ts'
import { combineKinds } from '../typing/combineKinds.ts'
import { combineTypes } from '../typing/combineTypes.ts'
import { expectedSpectrum } from '../typing/expected.ts'
import { expectedProbability } from '../typing/expectedProbability.ts'
import { expectedCurve } from './curves.ts'
import type { InForce } from './settingsInForce.ts'

/** Name of the calibration that types rest on: what it was fitted on, and its digest in brackets. */
export const CALIBRATION_NAME: string = calibrationName()

function calibrationName(): string {
  const { inputs, digest } = CALIBRATION
  const spectra = inputs.reduce((sum, { stars }) => sum + stars, 0)
  const works = inputs.map(({ reference }) => /^.*?\b\d{4}\b/.exec(reference)?.[0] ?? reference)
  return `${spectra} spectra of ${works.join('; ')} (${digest})`
}

/** What the night's pass is given beside the outcomes. */
export interface NightInput {
  readonly inForce: InForce
  readonly targets?: readonly Target[]
  /** Of the target list itself. */
  readonly findings?: readonly Finding[]
}

/** The night's pass with the program's own tables: what only all files together can say. */
export function nightOf(outcomes: readonly Outcome[], { inForce, targets, findings = [] }: NightInput): NightSummary {
  const night = summariseNight(outcomes, {
    ...(targets ? { targets } : {}),
    coverRules: inForce.coverRules,
    thresholds: inForce.thresholds,
    typing: {
      combine(spectra) {
        const inputs = spectra.flatMap(({ typing }) => typing ?? [])
        if (inputs.length === 0) return NO_TYPE
        if (spectra.length === 1) return spectra[0].type
        const signal = ({ snr }: SpectrumOutcome): number => Math.max(snr.blue ?? 0, snr.visual ?? 0, snr.red ?? 0)
        const bestFirst = [...spectra].sort((a, b) => signal(b) - signal(a)).map(({ type }) => type)
        return combineKinds(combineTypes(inputs, CALIBRATION), bestFirst)
      },
      probability: expectedProbability,
    },
  })
  const withCurves = night.targets.map((one) => withExpected(one, outcomes))
  return { ...night, targets: withCurves, findings: [...findings, ...night.findings] }
}

/** A target of several spectra with the spectrum expected of their common type at the samples of each one's curves. */
function withExpected(target: TargetSummary, outcomes: readonly Outcome[]): TargetSummary {
  const { typeNumber, luminosityNumber } = target.type
  if (target.spectra.length < 2 || typeNumber === undefined) return target
  const expected = expectedSpectrum(CALIBRATION, typeNumber, luminosityNumber ?? 5)
  if (!expected) return target
  const curves = target.spectra.map(({ outcome, spectrum }) => outcomes[outcome]?.spectra[spectrum]?.curves)
  if (curves.every((one) => one === undefined)) return target
  return {
    ...target,
    expected: curves.map((one) => (one ? expectedCurve(one.restWavelength, one.normalised, expected) : undefined)),
  }
}
