import type { Finding } from '../findings/types.ts'
import type { NightSummary } from '../night/types.ts'
import type { Outcome } from '../quality/types.ts'
import { COLUMNS } from './columns.ts'
import { errorFinding } from './errorFinding.ts'
import type { NightOf } from './nightOf.ts'
import { NO_NIGHT } from './nightOf.ts'
import { placeOf } from './place.ts'
import type { Row } from './row.ts'
import { tidyRow } from './row.ts'

const findingRow = (where: Row, f: Finding): Row =>
  tidyRow(COLUMNS.findings, {
    ...where,
    level: f.level,
    code: f.code,
    value: f.value,
    limit: f.limit,
    unit: f.unit,
    text: f.text,
  })

/**
 * Rows of `findings` of one file: why it could not be read, what its frame and its spectra show, and what the night
 * adds to them (`frameFindings` are the night's for the file as a frame).
 */
export function findingRows(
  outcome: Outcome,
  nightOf: NightOf = NO_NIGHT,
  frameFindings: readonly Finding[] = [],
): Row[] {
  const ofFile: Row = { file: outcome.file, object: outcome.frame?.facts.object }
  const rows: Row[] = []
  if (outcome.error) rows.push(findingRow({ ...ofFile, ...pick(outcome.error) }, errorFinding(outcome.error)))
  for (const f of [...outcome.notes, ...(outcome.frame?.findings ?? []), ...frameFindings])
    rows.push(findingRow(ofFile, f))
  outcome.spectra.forEach((spectrum, i) => {
    for (const f of [...spectrum.findings, ...(nightOf(i)?.findings ?? [])])
      rows.push(findingRow(placeOf(outcome, spectrum), f))
  })
  return rows
}

const pick = ({ hdu, row }: { readonly hdu?: number; readonly row?: number }): Row => ({ hdu, row })

/** Rows of `findings` that belong to no single file: of the night, its set-ups, drifts and targets. */
export function nightFindingRows(night: NightSummary): Row[] {
  return [
    ...night.findings.map((f) => findingRow({}, f)),
    ...night.cover.flatMap((cover) => cover.findings.map((f) => findingRow({}, f))),
    ...night.drifts.flatMap((drift) => drift.findings.map((f) => findingRow({}, f))),
    ...night.targets.flatMap((target) => target.findings.map((f) => findingRow({ object: target.target }, f))),
  ]
}
