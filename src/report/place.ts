import type { Outcome, SpectrumOutcome } from '../quality/types.ts'
import type { Row } from './row.ts'

/** The columns `file, hdu, row, object` that say which spectrum a row is about. */
export function placeOf(outcome: Outcome, spectrum: SpectrumOutcome): Row {
  return { file: outcome.file, hdu: spectrum.hdu, row: spectrum.row, object: spectrum.facts.object }
}

/** The parts joined by "; ", each once, in order of first appearance; '' when there is none. */
export function joined(parts: readonly string[]): string {
  return [...new Set(parts)].join('; ')
}
