import { median } from '../../../src/numeric/median.ts'
import { box, type Block, type Drawing, stroke } from '../../../src/report/drawing.ts'
import { makeFlow } from '../../../src/report/flow.ts'
import { PALETTE } from '../../../src/report/palette.ts'
import { atX, atY, type Frame, xAxis, yAxis } from '../../../src/report/plot.ts'
import type { Area } from '../../../src/report/spectrumFigure.ts'
import type { Typeface } from '../../../src/report/typeface.ts'
import { type Score, type Scored, scoreOf } from './score.ts'
import type { ValidationRow } from './validationText.ts'

const LETTERS = 'OBAFGKM'
const CLASSES = ['I', 'II', 'III', 'IV', 'V']
const WORST = 20
/** Subclasses: residuals beyond are held at the edge of the figure. */
const EDGE = 8

/** The validation as pages: found against published, residuals, coverage by letter, degradations, the worst cases. */
export function validationPages(rows: readonly ValidationRow[], face: Typeface, calibration: string): Drawing {
  const plain = rows[0].scored
  const flow = makeFlow(face, { paper: 'A4', head: 'Types against published ones', foot: `calibration ${calibration}` })
  flow.heading('Types against published ones', { level: 1 })
  flow.paragraph(
    `${plain.length} atlas stars (Jacoby, Hunter & Christian 1984), each typed by a calibration from which it and its relatives were left out. Differences in subclasses, found less published; a star without a type counts as 20 off. Published types themselves scatter by half a subclass to one.`,
  )
  flow.heading('Found less published')
  flow.area(190, (area) => [residualFigure(face, area, plain)])
  flow.heading('By letter, spectra as they are')
  const letters = [...LETTERS].map((letter) => plain.filter(({ star }) => star.spectralType.startsWith(letter)))
  scoreTable([
    ['all', scoreOf(plain)],
    ...letters.filter((l) => l.length).map((l) => [l[0].star.spectralType[0], scoreOf(l)] as const),
  ])
  flow.heading('Letter: rows published, columns found')
  countTable(
    [...LETTERS],
    plain,
    ({ star }) => LETTERS.indexOf(star.spectralType[0]),
    ({ posterior }) => Math.floor((posterior.typeNumber ?? -10) / 10),
  )
  flow.heading('Luminosity class: rows published, columns found')
  countTable(
    CLASSES,
    plain,
    ({ star }) => (star.luminosity ?? 0) - 1,
    ({ posterior }) => CLASSES.indexOf(posterior.luminosityClass ?? ''),
  )
  if (rows.length > 1) {
    flow.heading('Degraded on purpose')
    scoreTable(rows.map(({ degradation, score }) => [`${degradation.group} ${degradation.name}`, score] as const))
  }
  flow.heading('Worst cases')
  const off = ({ star, posterior }: Scored): number => Math.abs((posterior.typeNumber ?? Infinity) - star.typeNumber)
  flow.table(
    ['star', 'published', 'found', '68 % range', 'off'].map((head, i) => ({
      head,
      width: i === 0 ? 120 : 80,
      ...(i === 4 ? { align: 'end' as const } : {}),
    })),
    [...plain]
      .sort((a, b) => off(b) - off(a))
      .slice(0, WORST)
      .map((one) =>
        [
          one.star.name,
          one.star.spectralType,
          `${one.posterior.spectralType ?? one.posterior.state} ${one.posterior.luminosityClass ?? ''}`.trim(),
          one.posterior.low68 === undefined
            ? ''
            : `${one.posterior.low68.toFixed(1)} to ${(one.posterior.high68 ?? NaN).toFixed(1)}`,
          Number.isFinite(off(one)) ? off(one).toFixed(1) : 'none',
        ].map((text) => ({ text })),
      ),
  )
  return flow.finish('Types against published ones', 'Accuracy and coverage of spectral types by cross-validation')

  function scoreTable(list: readonly (readonly [string, Score])[]): void {
    const heads = [
      '',
      'n',
      'none',
      'outside',
      '50 %',
      '68 %',
      '95 %',
      'bias',
      'in 68 %',
      'in 95 %',
      'class ±1',
      'Brier',
    ]
    flow.table(
      heads.map((head, i) => (i === 0 ? { head, width: 96 } : { head, width: 33, align: 'end' as const })),
      list.map(([name, s]) =>
        [
          name,
          ...[s.stars, s.untyped, s.outside].map(String),
          ...[s.median, s.within68, s.within95, s.bias, s.covered68, s.covered95, s.classWithinOne, s.brier].map((x) =>
            x.toFixed(2),
          ),
        ].map((text) => ({ text })),
      ),
    )
  }

  function countTable(
    names: readonly string[],
    list: readonly Scored[],
    truth: (one: Scored) => number,
    found: (one: Scored) => number,
  ): void {
    flow.table(
      [
        { head: 'published', width: 60 },
        ...[...names, 'none'].map((head) => ({ head, width: 40, align: 'end' as const })),
      ],
      names.flatMap((name, i) => {
        const members = list.filter((one) => truth(one) === i)
        if (members.length === 0) return []
        const counts = names.map((_, j) => members.filter((one) => found(one) === j).length)
        const rest = members.length - counts.reduce((sum, n) => sum + n, 0)
        return [[name, ...[...counts, rest].map((n) => (n ? String(n) : '·'))].map((text) => ({ text }))]
      }),
    )
  }
}

function residualFigure(face: Typeface, area: Area, scored: readonly Scored[]): Block {
  const frame: Frame = {
    x: area.x + 34,
    y: area.y + 6,
    width: area.width - 40,
    height: area.height - 34,
    xRange: [0, 70],
    yRange: [-EDGE, EDGE],
  }
  const items = [
    ...xAxis(face, frame, 'published type number (O0 = 0, B0 = 10 … M0 = 60)'),
    ...yAxis(face, frame, 'found − published, subclasses'),
    stroke([frame.x, atY(frame, 0)], [frame.x + frame.width, atY(frame, 0)], PALETTE.quiet, { dash: [2, 2] }),
  ]
  for (const { star, posterior } of scored) {
    if (posterior.typeNumber === undefined) continue
    const delta = Math.max(-EDGE, Math.min(EDGE, posterior.typeNumber - star.typeNumber))
    const x = atX(frame, star.typeNumber)
    const held = (value: number | undefined): number =>
      atY(frame, Math.max(-EDGE, Math.min(EDGE, (value ?? NaN) - star.typeNumber)))
    items.push(stroke([x, held(posterior.low68)], [x, held(posterior.high68)], PALETTE.quiet, { width: 0.4 }))
    items.push(box(x - 1.3, atY(frame, delta) - 1.3, 2.6, 2.6, PALETTE.ink))
  }
  const bias = median(scored.map(({ star, posterior }) => (posterior.typeNumber ?? NaN) - star.typeNumber))
  return {
    role: 'Figure',
    items,
    alt: `Found less published type of ${scored.length} stars with their 68 % ranges; the median is ${bias.toFixed(2)} subclasses`,
  }
}
