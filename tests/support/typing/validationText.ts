import type { Degradation } from './degrade.ts'
import { type Score, type Scored, scoreOf } from './score.ts'

export interface ValidationRow {
  readonly degradation: Degradation
  readonly scored: readonly Scored[]
  readonly score: Score
}

const LETTERS = 'OBAFGKM'
/** Worst cases listed. */
const WORST = 15

/** The validation as Markdown: a line a condition, the letters of the spectra as they are, classes, the worst cases. */
export function validationText(rows: readonly ValidationRow[]): string {
  const plain = rows[0].scored
  const letters = [...LETTERS].map((letter) => plain.filter(({ star }) => star.spectralType.startsWith(letter)))
  return [
    '# Types against published ones',
    '',
    'Atlas stars, each typed by a calibration from which it and its relatives were left out. Differences in subclasses;',
    'an untyped star counts as 20 off. `width` is the median half width of the 68 % range, `open` the share without a class.',
    '',
    ...table(
      'condition',
      rows.map(({ degradation, score }) => [`${degradation.group} ${degradation.name}`, score] as const),
    ),
    '',
    '## By letter, as they are',
    '',
    ...table(
      'letter',
      letters.filter((list) => list.length).map((list) => [list[0].star.spectralType[0], scoreOf(list)] as const),
    ),
    '',
    '## Luminosity class, as they are (rows published, columns found)',
    '',
    ...confusion(plain),
    '',
    '## Worst cases',
    '',
    '| star | published | found | 68 % range |',
    '|---|---|---|---|',
    ...worst(plain),
    '',
  ].join('\n')
}

const HEADS = [
  'n',
  'none',
  'outside',
  '50 %',
  '68 %',
  '95 %',
  'bias',
  'in 68 %',
  'in 95 %',
  'width',
  'class ±1',
  'open',
  'Brier',
]

function table(head: string, rows: readonly (readonly [string, Score])[]): string[] {
  return [
    `| ${head} | ${HEADS.join(' | ')} |`,
    `|---|${HEADS.map(() => '--:').join('|')}|`,
    ...rows.map(([name, s]) => {
      const cells = [
        s.median,
        s.within68,
        s.within95,
        s.bias,
        s.covered68,
        s.covered95,
        s.width,
        s.classWithinOne,
        s.classOpen,
        s.brier,
      ]
      return `| ${name} | ${s.stars} | ${s.untyped} | ${s.outside} | ${cells.map((x) => x.toFixed(2)).join(' | ')} |`
    }),
  ]
}

function confusion(scored: readonly Scored[]): string[] {
  const names = ['I', 'II', 'III', 'IV', 'V']
  return [
    `| | ${names.join(' | ')} | open |`,
    `|---|${[...names, ''].map(() => '--:').join('|')}|`,
    ...names.map((name, i) => {
      const list = scored.filter(({ star }) => star.luminosity === i + 1)
      const counts = [...names, undefined].map(
        (found) => list.filter(({ posterior }) => posterior.luminosityClass === found).length,
      )
      return `| ${name} | ${counts.join(' | ')} |`
    }),
  ]
}

function worst(scored: readonly Scored[]): string[] {
  const off = ({ star, posterior }: Scored): number => Math.abs((posterior.typeNumber ?? Infinity) - star.typeNumber)
  return [...scored]
    .sort((a, b) => off(b) - off(a))
    .slice(0, WORST)
    .map(
      ({ star, posterior }) =>
        `| ${star.name} | ${star.spectralType} | ${posterior.spectralType ?? posterior.state} ${posterior.luminosityClass ?? ''} | ${posterior.low68?.toFixed(1) ?? ''}–${posterior.high68?.toFixed(1) ?? ''} |`,
    )
}
