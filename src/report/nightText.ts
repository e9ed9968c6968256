import type { NightSummary } from '../night/types.ts'
import type { Outcome } from '../quality/types.ts'
import type { Doubt } from './doubts.ts'
import { countsText, doubtsOf, doubtText, nightFindings } from './doubts.ts'
import { columnWidth, cutToWidth, padToWidth, wrapToWidth } from './columnWidth.ts'
import { errorFinding } from './errorFinding.ts'
import { plainText } from './plainText.ts'
import type { TerminalStyle } from './terminalTable.ts'
import { strong, tinted } from './terminalTable.ts'
import { dateAndTime, nightDates } from './timeWords.ts'
import type { TargetView } from './targetView.ts'
import { targetViews } from './targetView.ts'
import { expectedChance, qualityOf } from './verdict.ts'
import { duration, percent, typeFound } from './words.ts'

/** Lines of a list on the terminal before it says how many more there are. */
const MOST = 40

/**
 * The night as an observer reads it at dawn, for a terminal of the given width: what to observe again, what is doubtful
 * and why, what could not be read, what holds for the whole night, every target in a line, what calibrations lack.
 */
export function nightSummaryText(night: NightSummary, outcomes: readonly Outcome[], style: TerminalStyle): string {
  const views = targetViews(outcomes, night)
  const sections = [
    opening(night, style),
    again(night, style),
    doubts(doubtsOf(outcomes, night, views), style),
    list(
      'Files that could not be read',
      outcomes.flatMap((o) => (o.error ? [`${o.file}: ${errorFinding(o.error).text}`] : [])),
      style,
    ),
    findings(night, style),
    targets(views, style),
    cover(night, style),
  ]
  return sections
    .filter((section) => section.length > 0)
    .map((section) => section.join('\n') + '\n')
    .join('\n')
}

function opening(night: NightSummary, { width, colour }: TerminalStyle): string[] {
  const { mjdFirst, mjdLast } = night
  const last = mjdLast ?? mjdFirst
  const title =
    mjdFirst === undefined || last === undefined
      ? 'Night without times'
      : `Night of ${nightDates(mjdFirst, last)} (${dateAndTime(mjdFirst)} to ${dateAndTime(last)} UTC)`
  return [strong(cutToWidth(title, width), colour), ...wrapToWidth(countsText(night), width)]
}

function again({ observeAgain }: NightSummary, { width, colour }: TerminalStyle): string[] {
  if (observeAgain.length === 0) return [strong('Nothing has to be observed again', colour)]
  const lines = observeAgain.slice(0, MOST).flatMap((t) => {
    const needs = t.exposureNeeded === undefined ? '' : ` (needs ${duration(t.exposureNeeded)})`
    const text = `${plainText(t.target)}: ${plainText(t.reason)}${needs}`
    const urgency = padToWidth(t.urgency.toFixed(2), 4)
    return wrapToWidth(text, Math.max(10, width - 8)).map((line, i) => `  ${i === 0 ? urgency : '    '}  ${line}`)
  })
  return [
    strong(cutToWidth('Observe again first (urgency 1 is the highest)', width), colour),
    ...lines,
    ...rest(observeAgain.length),
  ]
}

function doubts(all: readonly Doubt[], { width, colour }: TerminalStyle): string[] {
  if (all.length === 0) return []
  const lines = all.slice(0, MOST).flatMap((doubt) => {
    const { name, level } = doubt
    const said = `${plainText(name)}: ${plainText(doubtText(doubt))}`
    return wrapToWidth(said, Math.max(10, width - 9)).map(
      (line, i) => `  ${i === 0 ? tinted(padToWidth(level, 5), colour) : '     '}  ${line}`,
    )
  })
  return [strong(cutToWidth('Not to be observed again, but look at', width), colour), ...lines, ...rest(all.length)]
}

const rest = (n: number): string[] => (n > MOST ? [`  … and ${n - MOST} more`] : [])

function list(heading: string, lines: readonly string[], { width, colour }: TerminalStyle): string[] {
  if (lines.length === 0) return []
  const wrapped = lines
    .slice(0, MOST)
    .flatMap((line) =>
      wrapToWidth(plainText(line), Math.max(10, width - 4)).map((part, i) => (i === 0 ? '  ' : '    ') + part),
    )
  return [strong(cutToWidth(heading, width), colour), ...wrapped, ...rest(lines.length)]
}

function findings(night: NightSummary, { width, colour }: TerminalStyle): string[] {
  const all = nightFindings(night)
  if (all.length === 0) return []
  const lines = all.flatMap((f) =>
    wrapToWidth(plainText(f.text), Math.max(10, width - 9)).map(
      (line, i) => `  ${i === 0 ? tinted(padToWidth(f.level, 5), colour) : '     '}  ${line}`,
    ),
  )
  return [strong(cutToWidth('What holds for the whole night', width), colour), ...lines]
}

function targets(views: readonly TargetView[], { width, colour }: TerminalStyle): string[] {
  if (views.length === 0) return []
  const rows = views.map((view) => {
    const { type, summary, name } = view
    const isTyped = type.state === 'typed' || type.state === 'wide'
    const error = type.typeNumberErr === undefined || !isTyped ? '' : `± ${type.typeNumberErr.toFixed(1)}`
    const expected = summary?.listed?.expectedType
    const against = expected === undefined ? '' : `expected ${plainText(expected)}`
    const odds = expectedChance(view) === undefined ? '' : percent(expectedChance(view) ?? 0)
    const snr = summary?.snrReached === undefined ? '' : `S/N ${summary.snrReached.toFixed(0)}`
    return [plainText(name), `${typeFound(type)} ${error}`.trim(), qualityOf(view), snr, `${against} ${odds}`.trim()]
  })
  const limits = [Math.max(12, Math.floor(width * 0.3)), 22, 9, 9, 24]
  const widths = limits.map((limit, k) =>
    Math.min(limit, Math.max(...rows.map((row) => columnWidth(cutToWidth(row[k], limit))))),
  )
  const lines = rows.slice(0, MOST).map((row) => {
    let used = 2
    let line = '  '
    row.forEach((text, k) => {
      if (used + widths[k] > width) return
      line += tinted(padToWidth(cutToWidth(text, widths[k]), widths[k]), colour) + '  '
      used += widths[k] + 2
    })
    return line.trimEnd()
  })
  return [strong(cutToWidth('Targets', width), colour), ...lines, ...rest(rows.length)]
}

function cover(night: NightSummary, style: TerminalStyle): string[] {
  const lines = night.cover.map((c) => {
    const missing = (['bias', 'flat', 'arc'] as const).filter((kind) => c[kind] === 0)
    const found = `${c.bias} bias, ${c.dark} dark, ${c.flat} flat, ${c.arc} arc, ${c.standard} standard`
    return `${c.setup}: ${c.science} science; ${found}${missing.length ? `; no ${missing.join(', no ')}` : ''}`
  })
  return list('Calibration cover', lines, style)
}
