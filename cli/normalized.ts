import { createHash } from 'node:crypto'
import { basename, join } from 'node:path'
import { CALIBRATION_NAME } from '../src/pipeline/nightOf.ts'
import type { InForce } from '../src/pipeline/settingsInForce.ts'
import type { Outcome } from '../src/quality/types.ts'
import { normalisedFits, type NormalisedInput } from '../src/report/normalisedFits.ts'
import type { Options } from './args.ts'
import { settingsDigest } from './settingsFile.ts'
import { writeWhole } from './write.ts'

/** Where normalised spectra go, and what made them; plain data, it crosses into a worker thread. */
export interface NormalizedPlan {
  readonly folder: string
  readonly provenance: NormalisedInput['provenance']
}

/** The plan of --save-normalized, or undefined where it was not asked for. */
export function normalizedPlan(
  { saveNormalized }: Options,
  out: string | undefined,
  inForce: InForce,
  version: string,
): NormalizedPlan | undefined {
  if (!saveNormalized || out === undefined) return undefined
  return {
    folder: join(out, 'normalized'),
    provenance: { version, settingsDigest: settingsDigest(inForce), calibration: CALIBRATION_NAME },
  }
}

/** Writes the normalised spectra of an Outcome as FITS, one a file, and gives the Outcome back without them. */
export function writeNormalized(outcome: Outcome, { folder, provenance }: NormalizedPlan): Outcome {
  const { file, sha256 } = outcome
  const spectra = outcome.spectra.map(({ normalised, ...spectrum }, i) => {
    if (normalised) {
      const { restFrame } = spectrum
      writeWhole(
        join(folder, nameOf(file, outcome.spectra.length > 1 ? i : undefined)),
        normalisedFits({ file, ...normalised, restFrame, provenance, ...(sha256 === undefined ? {} : { sha256 }) }),
      )
    }
    return spectrum
  })
  return { ...outcome, spectra }
}

/** Two files of one name in two folders stay apart by a digest of the path. */
function nameOf(file: string, i: number | undefined): string {
  const stem = basename(file)
    .replace(/(\.(fits?|fts))?(\.(gz|z|fz))?$/i, '')
    .replace(/[^\p{L}\p{N}._-]+/gu, '_')
    .slice(0, 40)
  const digest = createHash('sha256').update(file).digest('hex').slice(0, 8)
  return [stem, ...(i === undefined ? [] : [String(i + 1)]), `${digest}.fits`].join('-')
}
