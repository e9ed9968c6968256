import type { Drawing, Item, Paper } from './drawing.ts'
import { drawFirstPage } from './firstPage.ts'
import { featureTable } from './featureTable.ts'
import type { Flow } from './flow.ts'
import { makeFlow } from './flow.ts'
import { cell } from './tableCell.ts'
import { PALETTE } from './palette.ts'
import { plate } from './plate.ts'
import type { Provenance } from './provenance.ts'
import { provenanceLine } from './provenance.ts'
import type { Area } from './spectrumFigure.ts'
import type { TargetView } from './targetView.ts'
import type { Typeface } from './typeface.ts'
import { fileName, findingsOf } from './verdict.ts'
import { minus, percent, typeFound, withError } from './words.ts'

/** How target pages are laid out. */
export interface PageOptions {
  readonly face: Typeface
  readonly paper: Paper
  readonly provenance: Provenance
}

/** The pages of one target: the verdict with its figures, then the exposures, features, findings and provenance. */
export function layoutTargetPages(view: TargetView, { face, paper, provenance }: PageOptions): Drawing {
  const flow = makeFlow(face, { paper, head: view.name, foot: provenanceLine(provenance) })
  drawFirstPage(face, flow, view)
  flow.newPage()
  if (view.exposures.length > 1) exposureTable(flow, view)
  featureTable(flow, view)
  ratioTable(flow, view)
  findingTable(flow, view)
  provenanceTable(flow, view, provenance)
  return flow.finish(
    `${view.name}: ${typeFound(view.type)}`,
    'What the star is, how sure that is, and whether the data can be trusted',
  )
}

function exposureTable(flow: Flow, view: TargetView): void {
  flow.heading('Exposures')
  const first = view.exposures.flatMap((e) => e.spectrum.curves?.restWavelength[0] ?? [])
  const last = view.exposures.flatMap((e) => e.spectrum.curves?.restWavelength.at(-1) ?? [])
  const range = [Math.min(...first), Math.max(...last)] as const
  flow.table(
    [
      { head: 'file', width: 2, share: true, middle: true },
      { head: 'start', width: 70 },
      { head: 'time, s', width: 36, align: 'end' },
      { head: 'S/N 5500', width: 36, align: 'end' },
      { head: 'velocity, km/s', width: 58, align: 'end' },
      { head: 'type', width: 48 },
      { head: 'quality', width: 40 },
      { head: 'at rest', width: 1.4, share: true },
    ],
    view.exposures.map(({ file, spectrum, night }, i) => [
      cell(place(fileName(file), spectrum.hdu, spectrum.row), { bold: i === view.best }),
      cell(spectrum.facts.dateObs?.slice(0, 16).replace('T', ' ') ?? ''),
      cell(spectrum.facts.exposure?.toFixed(0) ?? ''),
      cell(spectrum.snr.visual?.toFixed(0) ?? ''),
      cell(
        spectrum.restFrame.trusted ? withError(spectrum.restFrame.velocity, spectrum.restFrame.error) : 'not trusted',
      ),
      cell(typeFound(spectrum.type)),
      cell(night?.quality ?? spectrum.quality),
      cell('', { draw: (area) => smallPlate(area, range, spectrum.curves) }),
    ]),
  )
}

const place = (file: string, hdu: number, row: number | undefined): string =>
  `${file}${hdu > 0 ? ` HDU ${hdu}` : ''}${row === undefined ? '' : ` row ${row}`}`

/** A strip of grey of a spectrum inside a cell of a table. */
export function smallPlate(
  area: Area,
  xRange: readonly [number, number],
  curves: { readonly restWavelength: Float64Array; readonly normalised: Float32Array } | undefined,
): Item[] {
  if (!curves || !(xRange[1] > xRange[0])) return []
  const frame = {
    x: area.x,
    y: area.y + 1.5,
    width: area.width,
    height: area.height - 4,
    xRange,
    yRange: [0, 1] as const,
  }
  return [plate(frame, curves.restWavelength, curves.normalised, 1)]
}

function ratioTable(flow: Flow, view: TargetView): void {
  if (view.type.ratios.length === 0) return
  flow.heading('Ratios a classifier would quote')
  flow.table(
    [
      { head: 'ratio', width: 150 },
      { head: 'value', width: 70, align: 'end' },
      { head: 'reading', width: 1, share: true },
    ],
    view.type.ratios.map((r) => [
      cell(r.name),
      cell(r.value === undefined ? '–' : withError(r.value, r.error)),
      cell(r.value === undefined ? `absent: ${r.reason ?? 'no reason given'}` : r.reading),
    ]),
    { rowHeight: 10.6 },
  )
  const sources = [...new Set(view.type.ratios.map((r) => r.source))].join('; ')
  flow.paragraph(`After ${sources}.`, { size: 7, colour: PALETTE.quiet })
}

function findingTable(flow: Flow, view: TargetView): void {
  const findings = findingsOf(view)
  flow.heading('Findings')
  if (findings.length === 0) return flow.paragraph('Nothing was found against these data.')
  flow.table(
    [
      { head: 'level', width: 30 },
      { head: 'code', width: 100 },
      { head: 'finding', width: 1, share: true, wrap: true },
    ],
    findings.map((f) => [cell(f.level, { bold: f.level !== 'note' }), cell(f.code), cell(f.text)]),
  )
}

function provenanceTable(flow: Flow, view: TargetView, provenance: Provenance): void {
  const best = view.exposures[view.best].spectrum
  const rows: (readonly [string, string])[] = [
    ['object', view.name],
    ...view.exposures.flatMap((e): (readonly [string, string])[] => [
      ['file', place(e.file, e.spectrum.hdu, e.spectrum.row)],
      ['SHA-256', e.sha256 ?? 'not computed'],
    ]),
    ['read as', `${best.convention}; wavelengths in ${best.medium} (${best.mediumHow}), ${best.samples} samples`],
    ['velocity', velocityText(view)],
    [
      'resolution',
      best.resolution
        ? `FWHM ${withError(best.resolution.fwhm, best.resolution.error)} Å from ${best.resolution.how}`
        : 'not measured',
    ],
    ['fit', fitText(view)],
    ['program', `darkline ${provenance.version}`],
    ['calibration', provenance.calibration],
    ['settings', provenance.settingsDigest],
    [
      'data until',
      provenance.date.getTime() === 0
        ? 'no time known'
        : `${provenance.date.toISOString().slice(0, 19).replace('T', ' ')} UTC`,
    ],
  ]
  flow.heading('Provenance', { keep: 70 })
  flow.table(
    [
      { head: '', width: 60 },
      { head: '', width: 1, share: true, wrap: true },
    ],
    rows.map(([name, value]) => [cell(name, { colour: PALETTE.quiet }), cell(value)]),
    { size: 7, rowHeight: 10 },
  )
}

function velocityText(view: TargetView): string {
  const { restFrame, barycentricVelocity } = view.exposures[view.best].spectrum
  if (!restFrame.trusted) return `not trusted: ${restFrame.reason ?? 'no reason given'}; the spectrum was not shifted`
  const barycentric =
    barycentricVelocity === undefined ? '' : `; barycentric ${minus(barycentricVelocity.toFixed(1))} km/s`
  return `${withError(restFrame.velocity, restFrame.error)} km/s as measured, by ${restFrame.how}${barycentric}`
}

function fitText({ type }: TargetView): string {
  if (type.fitPull === undefined) return 'no type was fitted'
  const rare = type.fitProbability === undefined ? '' : `; ${percent(type.fitProbability)} of ordinary stars fit worse`
  return `root mean square pull ${type.fitPull.toFixed(2)} over ${type.featuresUsed} features at the best type${rare}`
}
