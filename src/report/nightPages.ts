import type { Finding } from '../findings/types.ts'
import type { Drift, NightSummary, TargetSummary } from '../night/types.ts'
import type { Outcome, Quality } from '../quality/types.ts'
import type { Doubt } from './doubts.ts'
import { countsText, doubtsOf, doubtText, nightFindings } from './doubts.ts'
import type { Drawing, Item, LinkTarget } from './drawing.ts'
import { box } from './drawing.ts'
import { errorFinding } from './errorFinding.ts'
import type { Flow } from './flow.ts'
import type { TableCell, TableColumn } from './tableCell.ts'
import { makeFlow } from './flow.ts'
import { cell } from './tableCell.ts'
import { mark } from './marks.ts'
import type { TypePair } from './nightFigures.ts'
import { driftFigure, foundAgainstExpected, smallSpectrum } from './nightFigures.ts'
import { PALETTE } from './palette.ts'
import { provenanceLine } from './provenance.ts'
import { shownExposures } from './shownSpectrum.ts'
import { shortSetups } from './setupWords.ts'
import type { Area } from './spectrumFigure.ts'
import type { PageOptions } from './targetPages.ts'
import type { TargetView } from './targetView.ts'
import { targetViews } from './targetView.ts'
import { clockTime, dateAndTime, nightDates } from './timeWords.ts'
import type { Standing } from './verdict.ts'
import { expectedChance, fileName, qualityOf, verdictOf } from './verdict.ts'
import { duration, percent, shortNumber, typeFound, typeNumberOf, typeRange } from './words.ts'

/** How the night's pages are laid out, and where their links lead. */
export interface NightPageOptions extends PageOptions {
  /** Name of the night, of its folder for instance. */
  readonly name: string
  /** Address of a target's PDF relative to the night's, where there is one. */
  readonly pagesOf?: (target: string) => string | undefined
  /** Address of a data file relative to the night's PDF, where there is one. */
  readonly fileOf?: (file: string) => string | undefined
}

const STANDINGS: Readonly<Record<Quality, Standing>> = { usable: 'good', doubtful: 'doubt', unusable: 'bad' }

/** The night's pages: what to observe again, every target, found against expected, inventory, drifts, log. */
export function layoutNightPages(
  outcomes: readonly Outcome[],
  night: NightSummary,
  options: NightPageOptions,
): Drawing {
  const { face, paper, provenance, name } = options
  const dates = night.mjdFirst === undefined ? undefined : nightDates(night.mjdFirst, night.mjdLast ?? night.mjdFirst)
  const flow = makeFlow(face, {
    paper,
    head: dates === undefined ? name : `${name}, ${dates}`,
    foot: provenanceLine(provenance),
  })
  const views = targetViews(outcomes, night)
  flow.heading(dates === undefined ? `Night ${name}` : `Night of ${dates}`, { level: 1 })
  opening(flow, night, options)
  observeAgain(flow, night, views, options)
  doubtTable(flow, doubtsOf(outcomes, night, views), options)
  findingList(flow, 'What holds for the whole night', nightFindings(night))
  targetTable(flow, views, options)
  expectedFigure(flow, views, options)
  inventory(flow, outcomes, options)
  cover(flow, night)
  drifts(flow, night, options)
  log(flow, night, options)
  return flow.finish(
    dates === undefined ? `Night ${name}` : `Night of ${dates}`,
    'What to observe again, what every star is, and what the night was like',
  )
}

function opening(flow: Flow, night: NightSummary, { face, name }: NightPageOptions): void {
  const { mjdFirst, mjdLast } = night
  const lines = face.wrap(face.clean(countsText(night)), flow.width - 10, { size: 11, weight: 'bold' })
  flow.area(lines.length * 14 + 8, (area) => [
    {
      role: 'P',
      items: [
        box(area.x, area.y + 2, 3, lines.length * 14, PALETTE.ink),
        ...lines.map((line, i) => face.text(area.x + 10, area.y + 12.5 + i * 14, line, { size: 11, weight: 'bold' })),
      ],
    },
  ])
  const when = mjdFirst === undefined ? '' : `, ${dateAndTime(mjdFirst)} to ${dateAndTime(mjdLast ?? mjdFirst)} UTC`
  flow.paragraph(`${name}${when}`, { size: 7.5, colour: PALETTE.quiet })
}

function targetLink(options: NightPageOptions, target: string): { readonly link?: LinkTarget } {
  const address = options.pagesOf?.(target)
  return address === undefined ? {} : { link: { to: 'pages', address } }
}

function observeAgain(flow: Flow, night: NightSummary, views: readonly TargetView[], options: NightPageOptions): void {
  flow.heading('Observe again first', { place: 'again' })
  if (night.observeAgain.length === 0) return flow.paragraph('Nothing has to be observed again.')
  const known = new Map(views.map((view) => [view.name, view]))
  flow.table(
    [
      { head: 'urgency', width: 34, align: 'end' },
      { head: 'target', width: 100 },
      { head: 'found', width: 62 },
      { head: 'expected', width: 42 },
      { head: 'S/N', width: 46, align: 'end' },
      { head: 'needs', width: 34, align: 'end' },
      { head: 'why', width: 1, share: true, wrap: true },
    ],
    night.observeAgain.map((t) => {
      const view = known.get(t.target)
      return [
        cell(t.urgency.toFixed(2), { bold: true }),
        cell(t.target, { bold: true, ...(view ? targetLink(options, t.target) : {}) }),
        cell(view ? typeFound(view.type) : 'not observed', view ? {} : { colour: PALETTE.quiet }),
        cell(t.listed?.expectedType ?? ''),
        cell(snrText({ snrReached: view?.summary?.snrReached, snrWanted: t.listed?.wantedSnr })),
        cell(t.exposureNeeded === undefined ? '' : duration(t.exposureNeeded), { bold: true }),
        cell(t.reason),
      ]
    }),
  )
  if (night.observeAgain.some((t) => t.exposureNeeded !== undefined))
    flow.paragraph(NEEDS, { size: 7, colour: PALETTE.quiet })
}

const NEEDS =
  'Needs: exposure still wanted, from the signal-to-noise reached (of a target never observed: from its magnitude and what the other stars of the night gave). Urgency: 1 is first, from the gravity of the reason and the priority of the list.'

function doubtTable(flow: Flow, doubts: readonly Doubt[], options: NightPageOptions): void {
  if (doubts.length === 0) return
  flow.heading('Not to be observed again, but look at')
  flow.table(
    [
      { head: 'level', width: 30 },
      { head: 'target or file', width: 100, middle: true },
      { head: 'gravest finding', width: 1, share: true, wrap: true },
    ],
    doubts.map((doubt) => {
      const { name, isTarget, level } = doubt
      return [
        cell(level, { bold: level !== 'note' }),
        cell(isTarget ? name : fileName(name), isTarget ? targetLink(options, name) : fileLink(options, name)),
        cell(doubtText(doubt, isTarget ? undefined : fileName)),
      ]
    }),
  )
}

function snrText(t: Pick<TargetSummary, 'snrReached' | 'snrWanted'>): string {
  if (t.snrReached === undefined) return t.snrWanted === undefined ? '' : `– of ${t.snrWanted.toFixed(0)}`
  return t.snrReached.toFixed(0) + (t.snrWanted === undefined ? '' : ` of ${t.snrWanted.toFixed(0)}`)
}

function findingList(flow: Flow, heading: string, findings: readonly Finding[]): void {
  if (findings.length === 0) return
  flow.heading(heading)
  flow.table(
    [
      { head: 'level', width: 30 },
      { head: 'finding', width: 1, share: true, wrap: true },
    ],
    findings.map((f) => [cell(f.level, { bold: f.level !== 'note' }), cell(f.text)]),
  )
}

function targetTable(flow: Flow, views: readonly TargetView[], options: NightPageOptions): void {
  flow.heading('Targets', { place: 'targets', keep: 60 })
  if (views.length === 0) return flow.paragraph('No spectrum of a star was found.')
  const bests = views.flatMap((v) => shownExposures(v).flatMap((e) => e.spectrum.curves ?? []))
  const firsts = bests.map((c) => c.restWavelength[0])
  const lasts = bests.map((c) => c.restWavelength[c.restWavelength.length - 1])
  const range = [Math.min(...firsts), Math.max(...lasts)] as const
  const columns: TableColumn[] = [
    { head: '', width: 8 },
    { head: 'target', width: 1.2, share: true },
    { head: 'type', width: 64 },
    { head: '68 % range', width: 48 },
    { head: 'expected', width: 40 },
    { head: 'probability', width: 40, align: 'end' },
    { head: 'S/N', width: 50, align: 'end' },
    {
      head: bests.length ? `normalised, ${range[0].toFixed(0)} to ${range[1].toFixed(0)} Å at rest` : '',
      width: 1.6,
      share: true,
    },
  ]
  flow.table(
    columns,
    views.map((view): TableCell[] => {
      const best = view.exposures[view.best]
      const expected = view.summary?.listed?.expectedType ?? best.night?.expectedType
      const probability = expectedChance(view)
      const surely = probability !== undefined && probability < 0.01
      const quality = qualityOf(view)
      const count = view.exposures.length
      return [
        cell(quality, { draw: (area) => [mark(area.x + 4, area.y + area.height / 2 - 0.5, 2.6, STANDINGS[quality])] }),
        cell(count > 1 ? `${view.name} (${count})` : view.name, targetLink(options, view.name)),
        cell(typeFound(view.type), { bold: view.type.state === 'typed' }),
        cell(rangeText(view)),
        cell(expected ?? ''),
        cell(probability === undefined ? '' : percent(probability), { bold: surely }),
        cell(view.summary ? snrText(view.summary) : (best.spectrum.snr.visual?.toFixed(0) ?? '')),
        cell('', { draw: (area) => smallSpectra(area, range, view) }),
      ]
    }),
    { rowHeight: 18 },
  )
  flow.paragraph(
    'Disc: usable. Triangle: doubtful. Square: unusable. A number in brackets counts the exposures of a target. Each small spectrum is scaled to its own deepest line.',
    {
      size: 7,
      colour: PALETTE.quiet,
    },
  )
}

/** The shown exposures of a target side by side, each scaled to its own deepest line. */
function smallSpectra(area: Area, range: readonly [number, number], view: TargetView): Item[] {
  return shownExposures(view).flatMap((e) => smallSpectrum(area, range, e.spectrum.curves))
}

/** The 68 % range of a star that was typed; nothing where no ordinary type fits. */
function rangeText({ type: { state, low68, high68 } }: TargetView): string {
  const isTyped = state === 'typed' || state === 'wide'
  return !isTyped || low68 === undefined || high68 === undefined ? '' : typeRange(low68, high68)
}

function expectedFigure(flow: Flow, views: readonly TargetView[], { face }: NightPageOptions): void {
  const pairs = views.flatMap((view): TypePair[] => {
    const { typeNumber, low68, high68 } = view.type
    const word = view.summary?.listed?.expectedType ?? view.exposures[view.best].night?.expectedType
    const expected = word === undefined ? undefined : typeNumberOf(word)
    if (expected === undefined || typeNumber === undefined || qualityOf(view) === 'unusable') return []
    const standing = verdictOf(view).answers[1].standing
    return [
      { name: view.name, expected, found: typeNumber, low: low68 ?? typeNumber, high: high68 ?? typeNumber, standing },
    ]
  })
  flow.heading('Found against expected', { keep: 80 })
  if (pairs.length === 0) return flow.paragraph('Not drawn: no typed star has an expected type.')
  flow.area(250, (area) => [foundAgainstExpected(face, area, pairs)])
}

function inventory(flow: Flow, outcomes: readonly Outcome[], options: NightPageOptions): void {
  flow.heading('Inventory', { place: 'inventory' })
  const kinds = new Map<string, Record<Quality, number>>()
  for (const { frame, error } of outcomes) {
    const kind = error && !frame ? 'not read' : (frame?.kind ?? 'unknown')
    const count = kinds.get(kind) ?? { usable: 0, doubtful: 0, unusable: 0 }
    count[error ? 'unusable' : (frame?.quality ?? 'usable')]++
    kinds.set(kind, count)
  }
  flow.table(
    [
      { head: 'kind', width: 90 },
      { head: 'files', width: 50, align: 'end' },
      { head: 'usable', width: 50, align: 'end' },
      { head: 'doubtful', width: 50, align: 'end' },
      { head: 'unusable', width: 50, align: 'end' },
      { head: '', width: 1, share: true },
    ],
    [...kinds].map(([kind, n]) => [
      cell(kind),
      cell(String(n.usable + n.doubtful + n.unusable)),
      cell(String(n.usable)),
      cell(String(n.doubtful), { bold: n.doubtful > 0 }),
      cell(String(n.unusable), { bold: n.unusable > 0 }),
      cell(''),
    ]),
  )
  const broken = outcomes.flatMap((o) => (o.error ? [{ file: o.file, error: o.error }] : []))
  if (broken.length === 0) return
  flow.heading('Files that could not be read')
  flow.table(
    [
      { head: 'file', width: 0.8, share: true, middle: true },
      { head: 'why', width: 1, share: true, wrap: true },
    ],
    broken.map(({ file, error }) => [cell(file, fileLink(options, file)), cell(errorFinding(error).text)]),
  )
}

function fileLink(options: NightPageOptions, file: string): { readonly link?: LinkTarget } {
  const address = options.fileOf?.(file)
  return address === undefined ? {} : { link: { to: 'address', address } }
}

function cover(flow: Flow, night: NightSummary): void {
  flow.heading('Calibration cover', { place: 'cover' })
  if (night.cover.length === 0) return flow.paragraph('No set-up with science frames was found.')
  const number = (n: number): TableCell => cell(n === 0 ? 'none' : String(n), { bold: n === 0 })
  flow.table(
    [
      { head: 'set-up', width: 1, share: true, wrap: true },
      ...['science', 'bias', 'dark', 'flat', 'arc', 'standard'].map((head): TableColumn => ({
        head,
        width: 42,
        align: 'end',
      })),
      { head: 'arc gap, h', width: 46, align: 'end' },
    ],
    night.cover.map((c) => [
      cell(c.setup),
      cell(String(c.science)),
      ...[c.bias, c.dark, c.flat, c.arc, c.standard].map(number),
      cell(c.arcGapHours === undefined ? '–' : c.arcGapHours.toFixed(1)),
    ]),
  )
  for (const f of night.cover.flatMap((c) => c.findings)) flow.paragraph(`${f.level}: ${f.text}`, { size: 7.5 })
}

function drifts(flow: Flow, night: NightSummary, { face }: NightPageOptions): void {
  flow.heading('Through the night', { place: 'drifts', keep: 110 })
  const short = shortSetups(night.drifts.map((d) => d.setup))
  const named = (d: Drift): Drift => ({ ...d, setup: short.get(d.setup) ?? d.setup })
  const drawn = night.drifts.filter((d) => d.points.length > 0)
  const times = drawn.flatMap((d) => d.points.map((p) => p.mjd))
  const range = [Math.min(...times), Math.max(...times)] as const
  for (const drift of drawn) {
    flow.area(92, (area) => [driftFigure(face, area, named(drift), range)])
    for (const f of drift.findings) flow.paragraph(`${f.level}: ${f.text}`, { size: 7.5 })
    flow.space(6)
  }
  const empty = night.drifts.filter((d) => d.points.length === 0).map((d) => `${d.quantity} (${d.setup})`)
  if (empty.length) flow.paragraph(`Not followed, for want of frames to measure: ${empty.join('; ')}.`, { size: 7.5 })
  if (night.drifts.length === 0)
    flow.paragraph('Nothing could be followed: no frame has both a time and a measured quantity.')
}

function log(flow: Flow, night: NightSummary, options: NightPageOptions): void {
  flow.heading('Log', { place: 'log' })
  if (night.log.length === 0) return flow.paragraph('No frame was read.')
  const short = shortSetups(night.log.map((e) => e.setup))
  const isOne = short.size < 2
  if (isOne) flow.paragraph(`All with one set-up: ${night.log[0].setup}.`, { size: 7.5 })
  if (night.log.some((e) => e.isTimeDoubtful))
    flow.paragraph('A time with a question mark does not follow the order of the files.', { size: 7.5 })
  flow.table(
    [
      { head: 'UTC', width: 30 },
      { head: 'kind', width: 46 },
      { head: 'object', width: 1, share: true },
      { head: 's', width: 34, align: 'end' },
      { head: 'airmass', width: 34, align: 'end' },
      ...(isOne ? [] : [{ head: 'set-up', width: 1, share: true as const }]),
      { head: 'file', width: 1.3, share: true, middle: true },
    ],
    night.log.map((e) => [
      cell(e.mjd === undefined ? '' : `${clockTime(e.mjd)}${e.isTimeDoubtful ? ' ?' : ''}`, {
        bold: e.isTimeDoubtful === true,
      }),
      cell(e.kind),
      cell(e.object),
      cell(e.exposure === undefined ? '' : shortNumber(e.exposure)),
      cell(e.airmass === undefined ? '' : e.airmass.toFixed(2)),
      ...(isOne ? [] : [cell(short.get(e.setup) ?? e.setup, { colour: PALETTE.quiet })]),
      cell(e.file, fileLink(options, e.file)),
    ]),
    { size: 7, rowHeight: 10 },
  )
}
