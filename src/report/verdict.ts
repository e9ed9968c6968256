import type { Finding } from '../findings/types.ts'
import type { Quality } from '../quality/types.ts'
import type { TargetView } from './targetView.ts'
import { percent, shortNumber, typeFound, typeRange } from './words.ts'

/** How an answer stands: in order, to be looked at, wrong, or not known. Pages show it by shape, word and colour. */
export type Standing = 'good' | 'doubt' | 'bad' | 'unknown'

/** One of the questions that page 1 answers. */
export interface Answer {
  readonly question: string
  readonly answer: string
  readonly standing: Standing
  /** Figures behind the answer, one line each. */
  readonly details: readonly string[]
}

/** What is said of a target first: one sentence, and the answers it is made of. */
export interface Verdict {
  /** The whole verdict in one sentence without full stop. */
  readonly sentence: string
  readonly answers: readonly Answer[]
}

/**
 * Below this probability of the expected type a page says "no", and between the two "perhaps": even odds against
 * 100 to 1 and 20 to 1, the convention for strong and for some evidence (common practice, no source).
 */
const SURELY_NOT = 0.01
const PERHAPS = 0.05

const WORST: readonly Quality[] = ['usable', 'doubtful', 'unusable']

/** What one arm lacks and another may have: told only where every exposure of the target lacks it. */
const LACKS = new Set(['classical-region-missing', 'short-coverage', 'no-type'])

/**
 * Findings of every exposure, of the night and of the target, each once, the gravest first. What holds for only some of
 * several exposures names their file.
 */
export function findingsOf(view: TargetView): readonly Finding[] {
  const each = view.exposures.map((e) => [...e.spectrum.findings, ...(e.night?.findings ?? [])])
  const isCommon = (f: Finding): boolean =>
    each.every((list) => list.some((g) => g.code === f.code && g.text === f.text))
  const isLacking = (code: string): boolean => each.every((list) => list.some((g) => g.code === code))
  const all = view.exposures.flatMap((e, i) =>
    each[i]
      .filter((f) => !LACKS.has(f.code) || isLacking(f.code))
      .map((f) => (isCommon(f) ? f : { ...f, text: `${f.text} (${fileName(e.file)})` })),
  )
  const rank = { fault: 0, doubt: 1, note: 2 } as const
  const seen = new Set<string>()
  return [...(view.summary?.findings ?? []), ...all]
    .filter((f) => !seen.has(f.code + f.text) && seen.add(f.code + f.text))
    .sort((a, b) => rank[a.level] - rank[b.level])
}

/** The last part of a path. */
export const fileName = (file: string): string => file.slice(file.lastIndexOf('/') + 1)

/** Quality of the best exposure of a target. */
export function qualityOf(view: TargetView): Quality {
  const ranks = view.exposures.map((e) => WORST.indexOf(e.night?.quality ?? e.spectrum.quality))
  return WORST[Math.min(...ranks)]
}

/** What page 1 says in its first lines. */
export function verdictOf(view: TargetView): Verdict {
  const what = whatIsIt(view)
  const expected = asExpected(view)
  const trusted = canBeTrusted(view)
  const next = view.summary?.observeAgain ? 'observe again' : ''
  const sentence = [what.said, expected.said, trusted.said, next].filter((part) => part !== '').join('; ')
  return { sentence, answers: [what.answer, expected.answer, trusted.answer] }
}

interface Said {
  readonly answer: Answer
  readonly said: string
}

function whatIsIt({ type }: TargetView): Said {
  const question = 'What is it, and how sure?'
  const found = typeFound(type)
  if (type.state === 'none' || type.state === 'outside') {
    const details = [type.reason ?? 'no reason given', ...type.peculiar.map((p) => `${p.word}: ${p.text}`)]
    const standing = type.state === 'none' ? 'unknown' : 'doubt'
    return { answer: { question, answer: found, standing, details }, said: type.state === 'none' ? 'not typed' : found }
  }
  const details: string[] = []
  if (type.low68 !== undefined && type.high68 !== undefined)
    details.push(`68 % within ${typeRange(type.low68, type.high68)}`)
  if (type.low95 !== undefined && type.high95 !== undefined)
    details.push(`95 % within ${typeRange(type.low95, type.high95)}`)
  const luminosity = [
    ['dwarf', type.probDwarf],
    ['giant', type.probGiant],
    ['supergiant', type.probSupergiant],
  ] as const
  const known = luminosity.flatMap(([word, p]) => (p === undefined ? [] : [`${word} ${percent(p)}`]))
  details.push(known.length ? known.join(', ') : 'luminosity class cannot be told')
  for (const p of type.peculiar) details.push(`${p.word}: ${p.text}`)
  const spread = type.typeNumberErr
  const sure = spread === undefined ? '' : ` ± ${spread.toFixed(1)} subclasses`
  const odd = type.peculiar.map((p) => `, ${p.word}`).join('')
  const standing = type.state === 'wide' ? 'doubt' : 'good'
  return { answer: { question, answer: found, standing, details }, said: `${found}${sure}${odd}` }
}

/** Probability of the expected type from the spectra that can be used; that of the one spectrum where no night is known. */
export function expectedChance(view: TargetView): number | undefined {
  return view.summary ? view.summary.expectedProbability : view.exposures[view.best]?.night?.expectedProbability
}

function asExpected(view: TargetView): Said {
  const question = 'Is it what was expected?'
  const shown = view.exposures[view.best]?.night
  const type = view.summary?.listed?.expectedType ?? shown?.expectedType
  const probability = expectedChance(view)
  const separation = shown?.separationArcsec
  const place = separation === undefined ? [] : [`${shortNumber(separation)}″ from the position in the list`]
  if (type === undefined) {
    const details = ['the target list gives no type for it', ...place]
    return { answer: { question, answer: 'nothing expected', standing: 'unknown', details }, said: '' }
  }
  if (view.type.state === 'outside') {
    const details = [`the list expects ${type}`, 'no ordinary type fits, so none can be confirmed', ...place]
    return {
      answer: { question, answer: 'not confirmed', standing: 'doubt', details },
      said: `expected ${type} not confirmed`,
    }
  }
  if (probability === undefined) {
    const why =
      qualityOf(view) === 'unusable' ? 'the spectrum cannot be used' : 'the spectrum gives no probability for it'
    const details = [`the list expects ${type}`, why, ...place]
    return { answer: { question, answer: 'cannot be told', standing: 'unknown', details }, said: '' }
  }
  const details = [`the list expects ${type}`, `its probability is ${percent(probability)}`, ...place]
  if (probability < SURELY_NOT)
    return {
      answer: { question, answer: `no, expected ${type}`, standing: 'bad', details },
      said: `not the expected ${type}`,
    }
  if (probability < PERHAPS)
    return {
      answer: { question, answer: `perhaps ${type}`, standing: 'doubt', details },
      said: `perhaps the expected ${type}`,
    }
  return { answer: { question, answer: `yes, ${type}`, standing: 'good', details }, said: 'as expected' }
}

function canBeTrusted(view: TargetView): Said {
  const question = 'Can the data be trusted?'
  const quality = qualityOf(view)
  const findings = findingsOf(view)
  const count = (level: Finding['level'], one: string): string[] => {
    const n = findings.filter((f) => f.level === level).length
    return n === 0 ? [] : [`${n} ${one}${n === 1 ? '' : 's'}`]
  }
  const counts = [...count('fault', 'fault'), ...count('doubt', 'doubt'), ...count('note', 'note')]
  const { snr, restFrame } = view.exposures[view.best].spectrum
  const parts = [
    ['4500', snr.blue],
    ['5500', snr.visual],
    ['6500', snr.red],
  ] as const
  const measured = parts.flatMap(([at, value]) => (value === undefined ? [] : [{ at, value: shortNumber(value) }]))
  const ratios = `S/N ${measured.map((m) => m.value).join(', ')} at ${measured.map((m) => m.at).join(', ')} Å`
  const details = [
    counts.length ? counts.join(', ') : 'nothing found against it',
    measured.length ? ratios : 'S/N could not be measured',
    restFrame.trusted
      ? `velocity ${restFrame.velocity.toFixed(0).replace(/^-/, '−')} ± ${restFrame.error?.toFixed(0) ?? '?'} km/s`
      : `velocity not trusted: ${restFrame.reason ?? 'no reason given'}`,
  ]
  const standing = quality === 'usable' ? 'good' : quality === 'doubtful' ? 'doubt' : 'bad'
  return { answer: { question, answer: quality, standing, details }, said: `data ${quality}` }
}
