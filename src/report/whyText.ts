import type { SpectrumOutcome } from '../quality/types.ts'
import type { ClassicalRatio, Evidence } from '../typing/types.ts'
import { cutToWidth, padToWidth } from './columnWidth.ts'
import { plainText } from './plainText.ts'
import { featureWord } from './words.ts'

/** Features listed; those below this share in the decision are summed up in one line. */
const LEAST_SHARE = 0.01
const MOST_FEATURES = 20

/**
 * What decided a type, as lines of text: the type and its range, each deciding feature with the value measured, the
 * value expected at the best type and five subclasses earlier and later, its pull and share, then the classical ratios
 * and what is peculiar.
 */
export function whyText(file: string, spectrum: SpectrumOutcome): string {
  const { type, facts, hdu, row } = spectrum
  const place = row === undefined ? `HDU ${hdu}` : `HDU ${hdu}, row ${row}`
  const lines = [`${file} [${place}] ${plainText(facts.object ?? '')}`.trimEnd(), `  ${typeLine(spectrum)}`]
  for (const p of type.peculiar) lines.push(`  ${p.word}: ${p.text} (${p.source})`)
  const shown = type.evidence.filter((e) => e.share >= LEAST_SHARE).slice(0, MOST_FEATURES)
  if (shown.length) {
    lines.push('', `  ${HEAD.map(([name, width]) => name.padStart(width)).join('  ')}`)
    for (const evidence of shown) lines.push(`  ${evidenceLine(evidence)}`)
    const rest = type.evidence.length - shown.length
    if (rest > 0)
      lines.push(
        `  and ${rest} more features with ${percent(type.evidence.slice(shown.length).reduce((sum, e) => sum + e.share, 0))} of the decision`,
      )
  }
  const ratios = type.ratios.filter((ratio) => ratio.value !== undefined)
  if (ratios.length) lines.push('', '  classical ratios', ...ratios.map((ratio) => `  ${ratioLine(ratio)}`))
  return `${lines.join('\n')}\n`
}

const HEAD = [
  ['feature', 12],
  ['measured', 9],
  ['error', 7],
  ['expected', 9],
  ['scatter', 7],
  ['5 earlier', 9],
  ['5 later', 9],
  ['pull', 6],
  ['share', 6],
] as const

function typeLine({ type }: SpectrumOutcome): string {
  if (type.typeNumber === undefined) return `no type: ${type.reason ?? type.state}`
  const chances = [
    ['dwarf', type.probDwarf],
    ['giant', type.probGiant],
    ['supergiant', type.probSupergiant],
  ].flatMap(([name, p]) => (typeof p === 'number' ? [`${String(name)} ${percent(p)}`] : []))
  const range =
    type.low68 === undefined || type.high68 === undefined
      ? ''
      : `, type number ${type.typeNumber.toFixed(1)}, 68 % within ${type.low68.toFixed(1)} to ${type.high68.toFixed(1)}`
  const state = type.state === 'typed' ? '' : ` (${type.state}${type.reason ? `: ${type.reason}` : ''})`
  return `${type.spectralType ?? '?'} ${type.luminosityClass ?? ''}${range}; ${chances.join(', ')}${state}`
}

function evidenceLine(e: Evidence): string {
  const cells = [
    featureWord(e.feature),
    number(e.measured),
    number(e.error),
    number(e.expected),
    number(e.expectedScatter),
    number(e.expectedEarlier),
    number(e.expectedLater),
    e.pull.toFixed(1),
    percent(e.share),
  ]
  return cells.map((cell, i) => padToWidth(cutToWidth(cell, HEAD[i][1]), HEAD[i][1], 'right')).join('  ')
}

function ratioLine({ name, value, error, reading, source }: ClassicalRatio): string {
  return `${name.padEnd(24)} ${number(value)}${error === undefined ? '' : ` ± ${number(error)}`}  ${reading} (${source})`
}

function number(value: number | undefined): string {
  if (value === undefined || !Number.isFinite(value)) return '–'
  return Math.abs(value) >= 10 ? value.toFixed(1) : Math.abs(value) >= 1 ? value.toFixed(2) : value.toFixed(3)
}

function percent(share: number): string {
  return `${(100 * share).toFixed(share < 0.1 ? 1 : 0)} %`
}
