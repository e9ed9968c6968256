import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import { setupDifferences } from '../quality/setupName.ts'
import type { Thresholds } from '../tables/types.ts'
import { addFinding, baseName } from './exposures.ts'
import type { Exposure, FileFindings } from './exposures.ts'

const DAY = 86400
/** Files of one pattern of names needed to take their numbers for the order in which they were taken. */
const FEWEST_NUMBERED = 8
/** Share of them that must be in order. */
const IN_ORDER = 0.85
/** Names whose numbers are those of a star catalogue. */
const CATALOGUE = /^(?:hd|hr|hip|sao|bd|cd|cpd|gj|gl|lhs|feige|hz|lp|tyc|gaia|ngc)[^a-z]/i
/** Seconds within which two starts are one exposure in two files (raw and extracted). */
const SAME_START = 1.5

/** Adds findings on times: files out of their numbered order, exposures that overlap, files of another night. */
export function checkClock(exposures: readonly Exposure[], thresholds: Thresholds, findings: FileFindings): void {
  const timed = exposures.filter(({ start }) => start !== undefined)
  checkOrder(timed, thresholds.clockSlip.value, findings)
  checkOverlap(timed, thresholds.clockOverlap.value, findings)
  checkSpan(timed, thresholds.nightSpan.value, findings)
}

function startOf(exposure: Exposure): number {
  return exposure.start ?? NaN
}

function checkOrder(timed: readonly Exposure[], tolerance: number, findings: FileFindings): void {
  const groups = new Map<string, Exposure[]>()
  for (const exposure of timed) {
    const name = baseName(exposure.file)
    if (CATALOGUE.test(name) || !/\d/.test(name)) continue
    const pattern = name.replace(/\d+/g, '#')
    const group = groups.get(pattern)
    if (group) group.push(exposure)
    else groups.set(pattern, [exposure])
  }
  for (const group of groups.values()) {
    if (group.length < FEWEST_NUMBERED) continue
    const sorted = [...group].sort((a, b) => compareNumbers(baseName(a.file), baseName(b.file)))
    const kept = longestRising(sorted.map(startOf))
    if (kept.size === sorted.length || kept.size < IN_ORDER * sorted.length) continue
    for (const [i, exposure] of sorted.entries()) {
      if (kept.has(i)) continue
      const before = [...kept].filter((k) => k < i).pop()
      const after = [...kept].find((k) => k > i)
      const reference = before !== undefined && startOf(sorted[before]) > startOf(exposure) ? before : after
      if (reference === undefined) continue
      const off = (startOf(exposure) - startOf(sorted[reference])) * DAY
      if (Math.abs(off) < tolerance) continue
      const hours = Math.abs(off) / 3600
      const said = hours >= 1 ? `${hours.toFixed(2)} h` : `${(Math.abs(off) / 60).toFixed(0)} min`
      const text = `By its number the file comes ${reference < i ? 'after' : 'before'} ${baseName(sorted[reference].file)}, by its time ${said} ${off < 0 ? 'before' : 'after'} it`
      addFinding(
        findings,
        exposure.outcome,
        finding(NIGHT_RULES, 'clock-out-of-order', text, { value: off, limit: tolerance }),
      )
    }
  }
}

function compareNumbers(a: string, b: string): number {
  const [x, y] = [a, b].map((name) => (name.match(/\d+/g) ?? []).map(Number))
  for (let i = 0; i < x.length; i++) if (x[i] !== y[i]) return x[i] - y[i]
  return 0
}

/** Indices of a longest subsequence that never falls (patience sorting; Fredman 1975). */
function longestRising(values: readonly number[]): ReadonlySet<number> {
  const tails: number[] = []
  const before = new Int32Array(values.length).fill(-1)
  for (let i = 0; i < values.length; i++) {
    let low = 0
    let high = tails.length
    while (low < high) {
      const middle = (low + high) >> 1
      if (values[tails[middle]] <= values[i]) low = middle + 1
      else high = middle
    }
    if (low > 0) before[i] = tails[low - 1]
    tails[low] = i
  }
  const kept: number[] = []
  for (let i = tails[tails.length - 1] ?? -1; i >= 0; i = before[i]) kept.push(i)
  return new Set(kept.reverse())
}

function checkOverlap(timed: readonly Exposure[], tolerance: number, findings: FileFindings): void {
  const sorted = timed
    .filter(({ facts }) => facts.exposure !== undefined && facts.exposure > 0 && facts.instrument !== undefined)
    .sort((a, b) => startOf(a) - startOf(b))
  // of each set-up the exposure that ends last so far: one that begins before that end overlaps it
  const latest: { exposure: Exposure; end: number }[] = []
  for (const exposure of sorted) {
    const end = startOf(exposure) + (exposure.facts.exposure ?? 0) / DAY
    const before = latest.find(
      (one) =>
        one.exposure.isFrame === exposure.isFrame &&
        setupDifferences(one.exposure.facts, exposure.facts, 'all').length === 0,
    )
    if (!before) {
      latest.push({ exposure, end })
      continue
    }
    const gap = (startOf(exposure) - before.end) * DAY
    const isSame = (startOf(exposure) - startOf(before.exposure)) * DAY < SAME_START
    if (gap <= -tolerance && !isSame) {
      const text = `Begins ${Math.abs(gap).toFixed(0)} s before the exposure of ${baseName(before.exposure.file)} with the same detector ended`
      const found = finding(NIGHT_RULES, 'exposures-overlap', text, { value: -gap, limit: tolerance })
      addFinding(findings, exposure.outcome, found)
    }
    if (end > before.end) {
      before.exposure = exposure
      before.end = end
    }
  }
}

/** Files apart from the main body of files in time. */
function checkSpan(timed: readonly Exposure[], span: number, findings: FileFindings): void {
  if (timed.length < 3) return
  const sorted = timed.map(startOf).sort((a, b) => a - b)
  let first = 0
  let most = 0
  for (let i = 0, j = 0; i < sorted.length; i++) {
    while (j < sorted.length && (sorted[j] - sorted[i]) * 24 <= span) j++
    if (j - i > most) [most, first] = [j - i, i]
  }
  const [from, to] = [sorted[first], sorted[first + most - 1]]
  for (const exposure of timed) {
    const start = startOf(exposure)
    if (start >= from && start <= to) continue
    const away = start < from ? (from - start) * 24 : (start - to) * 24
    const said = away > 48 ? `${(away / 24).toFixed(0)} days` : `${away.toFixed(0)} h`
    const text = `Taken ${said} ${start < from ? 'before' : 'after'} the other files of the folder`
    addFinding(findings, exposure.outcome, finding(NIGHT_RULES, 'another-night', text, { value: away, limit: span }))
  }
}
