import type { Measurement } from '../features/types.ts'
import type { Evidence } from '../typing/types.ts'
import type { Item } from './drawing.ts'
import { stroke } from './drawing.ts'
import type { Flow } from './flow.ts'
import type { TableCell, TableColumn } from './tableCell.ts'
import { cell } from './tableCell.ts'
import { PALETTE } from './palette.ts'
import type { Area } from './spectrumFigure.ts'
import type { TargetView } from './targetView.ts'
import { measurementsOf } from './targetView.ts'
import { featureWord, percent, signed, typeFound, withError } from './words.ts'

/** Features given a full row each, so that page 2 has room for the findings and the provenance. */
const MOST_IN_FULL = 24

/**
 * The features of a target: those with the largest part in the decision in full, the largest first, and the rest three
 * in a row. Of several exposures the value that decided the type is that of all together.
 */
export function featureTable(flow: Flow, view: TargetView): void {
  const measurements = measurementsOf(view)
  const type = typeFound(view.type)
  const isTyped = view.type.evidence.length > 0
  flow.heading('Features')
  if (measurements.length === 0) return flow.paragraph('No feature was measured.')
  flow.paragraph(
    isTyped
      ? `Strengths are positive in absorption. Expected: at the best type, ${type}, with the scatter between stars of that type. Pull: measured less expected in units of the total error. Part: share of the feature in the decision, the largest first.${view.exposures.length > 1 ? ` Of ${view.exposures.length} exposures, the value that decided is that of all together.` : ''}`
      : 'Strengths are positive in absorption. No type was found, so none is expected.',
    { size: 7.5, colour: PALETTE.quiet },
  )
  const evidence = new Map(view.type.evidence.map((e) => [e.feature, e]))
  const shareOf = (m: Measurement): number => evidence.get(m.feature)?.share ?? (m.ew === undefined ? -1 : 0)
  const ranked = measurements.filter((m) => m.ew !== undefined).sort((a, b) => shareOf(b) - shareOf(a))
  const chosen = new Set(ranked.slice(0, MOST_IN_FULL))
  // the deciding ones first
  const full = ranked.filter((m) => chosen.has(m))
  const rest = measurements.filter((m) => !chosen.has(m) && m.status !== 'uncovered')
  const uncovered = measurements.filter((m) => !chosen.has(m) && m.status === 'uncovered')
  flow.table(
    [
      { head: 'feature', width: 56 },
      { head: 'species', width: 34 },
      { head: 'at, Å', width: 32, align: 'end' },
      { head: 'measured', width: 74, align: 'end' },
      { head: 'unit', width: 21 },
      { head: 'expected', width: 64, align: 'end' },
      { head: 'pull', width: 24, align: 'end' },
      { head: '−3   0   +3', width: 40 },
      { head: 'part', width: 28, align: 'end' },
      { head: 'remark', width: 1, share: true, wrap: true },
    ],
    full.map((m) => {
      const e = evidence.get(m.feature)
      const decided = e !== undefined && e.share >= 0.05
      return [
        cell(featureWord(m.feature), { bold: decided }),
        cell(m.species),
        cell(m.wavelengthRest.toFixed(1)),
        cell(strengthOf(m, view, e), { bold: decided }),
        cell(m.unit === '1' ? '' : m.unit),
        cell(e ? withError(e.expected, e.expectedScatter) : ''),
        cell(e ? signed(e.pull, 1) : ''),
        cell('', { draw: (area) => (e ? pullBar(area, e.pull) : []) }),
        cell(e ? percent(e.share) : ''),
        cell(remark(m), { colour: PALETTE.quiet }),
      ]
    }),
    { rowHeight: 10.6 },
  )
  if (rest.length > 0) restTable(flow, rest, evidence)
  if (uncovered.length > 0)
    flow.paragraph(`Not covered: ${uncovered.map((m) => featureWord(m.feature)).join(', ')}.`, {
      size: 7,
      colour: PALETTE.quiet,
    })
}

/** The strength that decided, of all exposures together where there are several; else as the shown exposure has it. */
function strengthOf(m: Measurement, { exposures }: TargetView, e: Evidence | undefined): string {
  if (e && exposures.length > 1) return withError(e.measured, e.error)
  return m.ew === undefined ? '–' : withError(m.ew, m.ewErr)
}

/** Features with a small part: name, strength and pull, three in a row. */
function restTable(flow: Flow, rest: readonly Measurement[], evidence: ReadonlyMap<string, Evidence>): void {
  const three = [0, 1, 2]
  const columns = three.flatMap((k): TableColumn[] => [
    { head: k === 0 ? 'others' : '', width: 58 },
    { head: 'measured', width: 1, share: true },
    { head: 'pull', width: 24, align: 'end' },
  ])
  const cells = (m: Measurement | undefined): TableCell[] => {
    if (!m) return [cell(''), cell(''), cell('')]
    const e = evidence.get(m.feature)
    const strength = m.ew === undefined ? m.status : `${withError(m.ew, m.ewErr)} ${m.unit === '1' ? '' : m.unit}`
    return [cell(featureWord(m.feature)), cell(strength, { colour: PALETTE.quiet }), cell(e ? signed(e.pull, 1) : '')]
  }
  const height = Math.ceil(rest.length / 3)
  const rows = Array.from({ length: height }, (_, i) => three.flatMap((k) => cells(rest[i + k * height])))
  flow.table(columns, rows, { size: 6.5, rowHeight: 8.8 })
}

function remark(m: { status: string; reason?: string; limit3sigma?: number; unit: string }): string {
  if (m.status === 'absent' && m.limit3sigma !== undefined)
    return `below ${m.limit3sigma.toPrecision(2)} ${m.unit}, 3 σ`
  if (m.reason) return m.status === 'measured' ? m.reason : `${m.status}: ${m.reason}`
  return m.status === 'measured' ? '' : m.status
}

/** The pull as a dot on a line from −3 to +3; beyond, an arrow's head at the end. */
function pullBar(area: Area, pull: number): Item[] {
  const middle = area.y + area.height / 2 - 0.5
  const scale = area.width / 7
  const centre = area.x + area.width / 2
  const held = Math.max(-3.3, Math.min(3.3, pull))
  const at = centre + held * scale
  const colour = Math.abs(pull) > 3 ? PALETTE.vermillion : PALETTE.ink
  return [
    stroke([centre - 3 * scale, middle], [centre + 3 * scale, middle], PALETTE.rule, { width: 0.4 }),
    stroke([centre, middle - 2.5], [centre, middle + 2.5], PALETTE.rule, { width: 0.4 }),
    { draw: 'path', points: Float64Array.of(centre, middle, at, middle), stroke: colour, width: 1.6 },
    ...(Math.abs(pull) > 3
      ? [
          {
            draw: 'path' as const,
            points: Float64Array.of(
              at,
              middle - 2.4,
              at + Math.sign(pull) * 3.5,
              middle,
              at,
              middle + 2.4,
              at,
              middle - 2.4,
            ),
            fill: colour,
          },
        ]
      : []),
  ]
}
