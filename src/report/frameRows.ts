import type { Finding } from '../findings/types.ts'
import type { Outcome, Quality } from '../quality/types.ts'
import { COLUMNS } from './columns.ts'
import { errorFinding } from './errorFinding.ts'
import { joined } from './place.ts'
import type { Row } from './row.ts'
import { tidyRow } from './row.ts'

const RANK: readonly Quality[] = ['usable', 'doubtful', 'unusable']
const LEVEL_RANK = { note: 0, doubt: 1, fault: 2 } as const

function worsened(quality: Quality, findings: readonly Finding[]): Quality {
  return RANK[findings.reduce((worst, f) => Math.max(worst, LEVEL_RANK[f.level]), RANK.indexOf(quality))]
}

/** The row of `frames` of one file; every file has one, also one that could not be read. */
export function frameRows(outcome: Outcome, nightFindings: readonly Finding[] = []): Row[] {
  const frame = outcome.frame
  const facts = frame?.facts ?? outcome.spectra[0]?.facts ?? {}
  const statistics = frame?.statistics
  const own = outcome.error ? [errorFinding(outcome.error)] : []
  const findings = [...own, ...outcome.notes, ...(frame?.findings ?? []), ...nightFindings]
  return [
    tidyRow(COLUMNS.frames, {
      file: outcome.file,
      kind: frame?.kind ?? 'unknown',
      kind_how: frame?.kindHow,
      setup: frame?.setup ?? outcome.spectra[0]?.setup,
      object: facts.object,
      instrument: facts.instrument,
      date_obs: facts.dateObs,
      mjd_mid: facts.mjdMid,
      exptime_s: facts.exposure,
      ra_deg: facts.ra,
      dec_deg: facts.dec,
      airmass: facts.airmass,
      width: statistics?.width,
      height: statistics?.height,
      binning: facts.binning,
      level_median: statistics?.median,
      level_p99: statistics?.p99,
      level_max: statistics?.max,
      noise: statistics?.noise,
      saturated_fraction: statistics?.saturatedFraction,
      arc_lines: statistics?.arcLines,
      spectra: outcome.spectra.length,
      quality: worsened(frame?.quality ?? 'usable', [...own, ...nightFindings]),
      findings: joined(findings.map((f) => f.code)),
    }),
  ]
}
