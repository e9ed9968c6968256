import type { Finding } from '../findings/types.ts'
import type { NightSummary } from '../night/types.ts'
import type { Outcome } from '../quality/types.ts'
import { featureRows } from './featureRows.ts'
import { findingRows, nightFindingRows } from './findingRows.ts'
import { frameRows } from './frameRows.ts'
import { lineRows } from './lineRows.ts'
import { nightLookup } from './nightOf.ts'
import type { Row, TableName } from './row.ts'
import { spectraRows } from './spectraRows.ts'
import { targetRows } from './targetRows.ts'

/** All rows of one table, for nights that fit in memory; `targets` has rows only where there is a night. */
export function tableRows(name: TableName, outcomes: readonly Outcome[], night?: NightSummary): Row[] {
  if (name === 'targets') return night ? targetRows(night) : []
  const lookup = nightLookup(night)
  const frameFindings = (i: number): readonly Finding[] => night?.frameFindings.get(i) ?? []
  const rows = outcomes.flatMap((outcome, i) => {
    if (name === 'spectra') return spectraRows(outcome, lookup(i))
    if (name === 'features') return featureRows(outcome)
    if (name === 'lines') return lineRows(outcome)
    if (name === 'findings') return findingRows(outcome, lookup(i), frameFindings(i))
    return frameRows(outcome, frameFindings(i))
  })
  return name === 'findings' && night ? [...rows, ...nightFindingRows(night)] : rows
}
