import type { Finding } from '../findings/types.ts'
import { NO_TYPE } from '../night/nightTyping.ts'
import { summariseNight } from '../night/summariseNight.ts'
import type { NightSummary, Target } from '../night/types.ts'
import type { Outcome } from '../quality/types.ts'
import { CALIBRATION } from '../tables/calibration.ts'
import { combineTypes } from '../typing/combineTypes.ts'
import { expectedProbability } from '../typing/expectedProbability.ts'
import type { InForce } from './settingsInForce.ts'

/** Name of the calibration that types rest on. */
export const CALIBRATION_NAME: string = CALIBRATION.digest

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
        return spectra.length === 1 ? spectra[0].type : combineTypes(inputs, CALIBRATION)
      },
      probability: expectedProbability,
    },
  })
  return { ...night, findings: [...findings, ...night.findings] }
}
