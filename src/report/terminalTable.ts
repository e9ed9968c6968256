import { COLUMNS } from './columns.ts'
import { columnWidth, cutToWidth, padToWidth, wrapToWidth } from './columnWidth.ts'
import { plainText } from './plainText.ts'
import type { ColumnSpec, Row, TableName } from './row.ts'

/** How text for a terminal is set: columns at hand, and whether escape sequences for colour may be used. */
export interface TerminalStyle {
  readonly width: number
  readonly colour: boolean
}

/** Columns by importance; those that do not fit are left out from the end. */
const IMPORTANCE: Readonly<Record<TableName, readonly string[]>> = {
  spectra: (
    'object spectral_type quality luminosity_class file type_number_err snr_visual type_state velocity_kms peculiar ' +
    'expected_type expected_probability findings velocity_err_kms target hdu row prob_dwarf prob_giant ' +
    'prob_supergiant setup exptime_s airmass date_obs resolution_fwhm type_low68 type_high68'
  ).split(' '),
  features:
    'feature ew ew_err unit status object file share pull expected limit_3sigma species reason depth fwhm centre hdu row'.split(
      ' ',
    ),
  lines: 'centre centre_err kind ew ew_err candidates origin object file significance fwhm hdu row'.split(' '),
  findings: 'level code text file object hdu row'.split(' '),
  frames:
    'file kind object quality exptime_s level_median setup findings date_obs airmass kind_how spectra arc_lines'.split(
      ' ',
    ),
  targets:
    'target spectral_type luminosity_class observe_again reason snr_reached snr_wanted expected_type expected_probability exposure_needed_s spectra urgency'.split(
      ' ',
    ),
}

/** Least width of a text column that is cut, and most width of one that is not the last. */
const LEAST = 12
/** Least width of a column of sentences, which is wrapped. */
const SENTENCE = 30
const MOST = 32
const GAP = 2

const STRONG = '\x1b[1m'
const TINTS: Readonly<Record<string, string>> = {
  unusable: '\x1b[31m',
  fault: '\x1b[31m',
  doubtful: '\x1b[33m',
  doubt: '\x1b[33m',
}
const OFF = '\x1b[0m'

/** The text in bold, where colour is allowed. */
export const strong = (text: string, colour: boolean): string => (colour ? STRONG + text + OFF : text)

/** The text tinted by the word it says ('doubtful', 'fault' ...), where colour is allowed; the word stays. */
export function tinted(text: string, colour: boolean): string {
  const tint = TINTS[text.trim()]
  return colour && tint ? tint + text + OFF : text
}

interface Chosen {
  readonly spec: ColumnSpec
  readonly cells: readonly string[]
  readonly width: number
}

/**
 * A table for the terminal that fits the width: the most important columns that hold anything, in the table's order,
 * long names cut with '…', the last column of sentences wrapped. Control characters never reach the terminal.
 */
export function terminalTable(name: TableName, rows: readonly Row[], style: TerminalStyle): string {
  if (rows.length === 0) return `no ${name}\n`
  const columns = chooseColumns(name, rows, style.width)
  const head = columns
    .map((c) => padToWidth(cutToWidth(c.spec.name, c.width), c.width, sideOf(c.spec)))
    .join(' '.repeat(GAP))
  const lines = [strong(head.trimEnd(), style.colour)]
  for (let i = 0; i < rows.length; i++) lines.push(...rowLines(columns, i, style.colour))
  return lines.join('\n') + '\n'
}

const sideOf = (spec: ColumnSpec): 'left' | 'right' => (spec.kind === 'text' ? 'left' : 'right')

/** A cell cut to its column: a path keeps its end, all else its beginning. */
function cutCell({ spec, cells, width }: Chosen, i: number): string {
  if (spec.name !== 'file' || columnWidth(cells[i]) <= width) return cutToWidth(cells[i], width)
  return [...cutToWidth([...cells[i]].reverse().join(''), width)].reverse().join('')
}

function rowLines(columns: readonly Chosen[], i: number, colour: boolean): string[] {
  const wrapped = columns.map((c) =>
    c.spec.name === 'text' || c.spec.name === 'reason' ? wrapToWidth(c.cells[i], c.width) : [cutCell(c, i)],
  )
  const height = Math.max(...wrapped.map((w) => w.length))
  return Array.from({ length: height }, (_, k) =>
    columns
      .map((c, j) => tinted(padToWidth(wrapped[j][k] ?? '', c.width, sideOf(c.spec)), colour))
      .join(' '.repeat(GAP))
      .trimEnd(),
  )
}

function chooseColumns(name: TableName, rows: readonly Row[], width: number): Chosen[] {
  const specs = COLUMNS[name]
  const wanted = IMPORTANCE[name].flatMap((key) => {
    const spec = specs.find((s) => s.name === key)
    if (!spec) return []
    const cells = rows.map((row) => plainText(String(row[key] ?? '')))
    const isPlace = (key === 'hdu' || key === 'row') && cells.every((cell) => cell === cells[0])
    return isPlace || cells.every((cell) => cell === '') ? [] : [{ spec, cells, full: widest([spec.name, ...cells]) }]
  })
  let used = -GAP
  const kept: (Chosen & { readonly full: number })[] = []
  for (const { spec, cells, full } of wanted) {
    const least =
      spec.name === 'text' || spec.name === 'reason'
        ? Math.min(full, SENTENCE)
        : spec.kind === 'text'
          ? Math.min(full, Math.max(LEAST, Math.min(columnWidth(spec.name), full)))
          : full
    if (used + GAP + least > width && kept.length > 0) continue
    kept.push({ spec, cells, full, width: Math.min(least, Math.max(1, width)) })
    used += GAP + least
  }
  let spare = width - used
  const isSentence = ({ spec }: Chosen): boolean => spec.name === 'text' || spec.name === 'reason'
  const inTurn = [...kept.filter((column) => !isSentence(column)), ...kept.filter(isSentence)]
  const widened = inTurn.map((column) => {
    const most = isSentence(column) ? Infinity : MOST
    const more = Math.max(0, Math.min(spare, Math.min(column.full, most) - column.width))
    spare -= more
    return { spec: column.spec, cells: column.cells, width: column.width + more }
  })
  return widened.sort((a, b) => specs.indexOf(a.spec) - specs.indexOf(b.spec))
}

function widest(texts: readonly string[]): number {
  let most = 0
  for (const text of texts) most = Math.max(most, columnWidth(text))
  return most
}
