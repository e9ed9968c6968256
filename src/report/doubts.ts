import type { Finding } from '../findings/types.ts'
import type { NightSummary } from '../night/types.ts'
import type { Outcome } from '../quality/types.ts'
import type { TargetView } from './targetView.ts'
import { findingsOf } from './verdict.ts'

/** A target or a file that is not in order, with the gravest thing found. */
export interface Doubt {
  /** Name of the target, or the file. */
  readonly name: string
  /** Set where `name` is a target. */
  readonly isTarget: boolean
  /** Further targets or files with the same gravest finding. */
  readonly alike: readonly string[]
  readonly level: Finding['level']
  readonly code: string
  readonly text: string
  /** Findings as grave beside this one. */
  readonly more: number
}

const RANK = { fault: 0, doubt: 1, note: 2 } as const
const isGrave = (finding: Finding): boolean => finding.level !== 'note'

/**
 * What is doubtful or unusable and why, faults first: targets that are not to be observed again anyway, then raw frames,
 * each with its gravest finding, those with the same one together. A raw frame of a target already told of is left out: it has the same trouble.
 */
export function doubtsOf(
  outcomes: readonly Outcome[],
  night: NightSummary,
  views: readonly TargetView[],
): readonly Doubt[] {
  const told = new Set(night.observeAgain.map(({ target }) => target))
  const doubts: Doubt[] = []
  const add = (name: string, isTarget: boolean, grave: readonly Finding[]): void => {
    const [first] = [...grave].sort((a, b) => RANK[a.level] - RANK[b.level])
    if (!first) return
    const k = doubts.findIndex((d) => d.code === first.code && d.isTarget === isTarget && d.level === first.level)
    if (k >= 0) doubts[k] = { ...doubts[k], alike: [...doubts[k].alike, name] }
    else
      doubts.push({
        name,
        isTarget,
        alike: [],
        level: first.level,
        code: first.code,
        text: first.text,
        more: grave.length - 1,
      })
  }
  for (const view of views) {
    if (told.has(view.name)) continue
    const grave = findingsOf(view).filter(isGrave)
    add(view.name, true, grave)
    if (grave.length) told.add(view.name)
  }
  for (const summary of night.targets)
    if (summary.spectra.length === 0 && !told.has(summary.target)) {
      const [first] = summary.findings
      if (first) add(summary.target, true, [{ ...first, text: afterName(first.text) }])
      told.add(summary.target)
    }
  outcomes.forEach(({ file, frame, spectra, error }, i) => {
    if (!frame || spectra.length > 0 || error || told.has(frame.facts.object ?? '')) return
    const grave = [...frame.findings, ...(night.frameFindings.get(i) ?? [])].filter(isGrave)
    add(file, false, grave)
  })
  return doubts
    .map((doubt, i) => ({ doubt, i }))
    .sort((a, b) => RANK[a.doubt.level] - RANK[b.doubt.level] || a.i - b.i)
    .map(({ doubt }) => doubt)
}

/** The text of a doubt with what comes beside it. */
export function doubtText({ text, more, alike }: Doubt, nameOf = (name: string): string => name): string {
  const others = alike.length === 0 ? '' : `; alike: ${alike.map(nameOf).join(', ')}`
  return `${text}${more > 0 ? ` (and ${more} more)` : ''}${others}`
}

/** The text without the name it begins with, for where the name stands beside it. */
function afterName(text: string): string {
  return text.replace(/^[^:]{1,60}: /, '')
}

/** What holds for more than one file: findings of the whole night, of calibration cover and of drifts, gravest first. */
export function nightFindings(night: NightSummary): readonly Finding[] {
  return [
    ...night.findings.filter(({ code }) => code !== 'never-observed'),
    ...night.cover.flatMap(({ findings }) => findings),
    ...night.drifts.flatMap(({ findings }) => findings),
  ].sort((a, b) => RANK[a.level] - RANK[b.level])
}

const plural = (n: number, one: string, many = `${one}s`): string => `${n} ${n === 1 ? one : many}`

/** The night counted in one line: '4 of 32 targets to observe again, 1 of them never reached; 46 spectra: 36 usable, ...'. */
export function countsText({ counts, targets, notObserved, observeAgain }: NightSummary): string {
  const all = targets.length + notObserved.length
  const missed = notObserved.length ? `, ${notObserved.length} of them never reached` : ''
  const again = observeAgain.length
    ? `${observeAgain.length} of ${plural(all, 'target')} to observe again${missed}`
    : `${plural(all, 'target')}, none to observe again`
  const total = counts.usable + counts.doubtful + counts.unusable
  const parts = [
    again,
    `${plural(total, 'spectrum', 'spectra')}: ${counts.usable} usable, ${counts.doubtful} doubtful, ${counts.unusable} unusable`,
    ...(counts.unreadable ? [`${plural(counts.unreadable, 'file')} could not be read`] : []),
  ]
  return parts.join('; ')
}
