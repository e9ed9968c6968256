import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Outcome } from '../quality/types.ts'
import { addFinding } from './exposures.ts'
import type { Exposure, FileFindings } from './exposures.ts'

const DAY = 86400

/**
 * Indices of Outcomes that repeat an earlier one and must not be counted again: the same bytes, or the same exposure
 * (start, length, object, range, one spectrum each) in another file. Adds a finding to each.
 */
export function findDuplicates(
  outcomes: readonly Outcome[],
  exposures: readonly Exposure[],
  findings: FileFindings,
): ReadonlySet<number> {
  const repeats = new Set<number>()
  const bySum = new Map<string, number>()
  for (const [i, { sha256, file }] of outcomes.entries()) {
    if (sha256 === undefined) continue
    const first = bySum.get(sha256)
    if (first === undefined) {
      bySum.set(sha256, i)
      continue
    }
    repeats.add(i)
    const text = `${file} is the same, byte by byte, as ${outcomes[first].file}`
    addFinding(findings, i, finding(NIGHT_RULES, 'duplicate-file', text))
  }
  const seen = new Map<string, Exposure>()
  for (const exposure of exposures) {
    const { facts, start, isFrame, outcome } = exposure
    if (isFrame || start === undefined || facts.object === undefined || repeats.has(outcome)) continue
    if (outcomes[outcome].spectra.length !== 1) continue
    const { wavelengthMin, wavelengthMax } = outcomes[outcome].spectra[0]
    const key = [
      Math.round(start * DAY),
      facts.exposure,
      facts.object,
      exposure.setup,
      Math.round(wavelengthMin),
      Math.round(wavelengthMax),
    ].join('|')
    const first = seen.get(key)
    if (!first) {
      seen.set(key, exposure)
      continue
    }
    repeats.add(outcome)
    const text = `Holds the same exposure as ${first.file}: same start, length, object and range`
    addFinding(findings, outcome, finding(NIGHT_RULES, 'same-exposure-twice', text))
  }
  return repeats
}
