import type { HeaderFacts } from '../spectrum/types.ts'
import { FLAT_LAMPS, KIND_WORDS, LINE_LAMPS, NO_LAMP, OBJECT_NAMES, OPEN_WORDS, plainWords } from './frameWords.ts'
import type { FrameWord } from './frameWords.ts'
import type { FrameKind, FrameStatistics } from './types.ts'

/** What a frame is, how that was known, and a sentence that says by what. */
export interface SortedFrame {
  readonly kind: FrameKind
  readonly kindHow: 'header' | 'content'
  /** 'OBJECT holds the name of a lamp: ARC: Xe' or the like, without full stop. */
  readonly reason: string
  /** Set where header and pixels disagree: what the pixels look like. */
  readonly looksLike?: FrameKind
}

/**
 * The kind of a 2-D frame: by the words of its header on the kind, by the object's name, by the lamp that burns, by a
 * zero exposure; by its pixels where the header is silent. A header that only says the shutter was open ('object',
 * 'expose') is overruled by an object's name or a lamp.
 */
export function sortFrame(facts: HeaderFacts, statistics?: FrameStatistics): SortedFrame {
  const byContent = statistics ? kindOfPixels(facts, statistics) : undefined
  const byHeader = kindOfHeader(facts, byContent?.sure === true && byContent.kind === 'science')
  if (byHeader) {
    const disagrees = byContent !== undefined && byContent.sure && conflicts(byHeader.kind, byContent.kind)
    return { ...byHeader, kindHow: 'header', ...(disagrees ? { looksLike: byContent.kind } : {}) }
  }
  if (byContent) return { kind: byContent.kind, kindHow: 'content', reason: byContent.reason }
  return {
    kind: 'unknown',
    kindHow: 'header',
    reason: 'the header does not tell the kind and the pixels were not read',
  }
}

function firstMatch(words: readonly FrameWord[], text: string): FrameWord | undefined {
  return words.find((word) => word.pattern.test(text))
}

/** `hasStar`: the pixels hold a trace, so a lamp's name is that of a lamp at hand, not of one that burns. */
function kindOfHeader(
  facts: HeaderFacts,
  hasStar: boolean,
): { readonly kind: FrameKind; readonly reason: string } | undefined {
  const said = facts.frameWords ?? ''
  const words = plainWords(said)
  const named = firstMatch(KIND_WORDS, words)
  if (named && named.kind !== 'standard' && named.kind !== 'sky')
    return { kind: refineFlat(named.kind, words, facts), reason: `the header says '${said}'` }
  const object = plainWords(facts.object ?? '')
  const byName = object === '' ? undefined : firstMatch(OBJECT_NAMES, object)
  if (byName) return { kind: byName.kind, reason: `the object is named '${facts.object ?? ''}'` }
  const lamp = hasStar ? undefined : lampKind(facts.lamp)
  if (lamp) return { kind: lamp, reason: `the lamp '${facts.lamp ?? ''}' is on` }
  if (named) return { kind: named.kind, reason: `the header says '${said}'` }
  if (facts.exposure === 0) return { kind: 'bias', reason: 'the exposure lasted 0 s' }
  if (OPEN_WORDS.test(words)) return { kind: 'science', reason: `the header says '${said}' and no lamp is on` }
  return undefined
}

/** 'FLAT; SKY' and 'flat' of an object named 'twilight' are flats of the sky. */
function refineFlat(kind: FrameKind, words: string, facts: HeaderFacts): FrameKind {
  if (kind !== 'flat') return kind
  const object = plainWords(facts.object ?? '')
  return /\b(?:sky|twilight)\b/.test(words) || /^(?:twilight|sky ?flat)/.test(object) ? 'skyflat' : kind
}

function lampKind(lamp: string | undefined): FrameKind | undefined {
  if (lamp === undefined) return undefined
  const words = plainWords(lamp)
  if (NO_LAMP.test(words)) return undefined
  if (LINE_LAMPS.test(words)) return 'arc'
  return FLAT_LAMPS.test(words) ? 'flat' : undefined
}

/** Light of a trace over that beside it from which a frame is one of a star. */
const STAR_CONTRAST = 0.1
/** Brightest hundredth above the median in units of the noise: a frame of noise alone gives 2.3 (normal law). */
const FEATURELESS = 6
const ARC_LINES = 8

/** From pixels alone. The trade's looks of frames, common practice, no source. */
function kindOfPixels(
  facts: HeaderFacts,
  { median, p99, noise, arcLines = 0, trace, traceContrast = 0 }: FrameStatistics,
): { readonly kind: FrameKind; readonly reason: string; readonly sure: boolean } | undefined {
  const spread = noise > 0 ? (p99 - median) / noise : 0
  const hasStar = trace !== undefined && traceContrast >= STAR_CONTRAST && trace.peak > noise
  if (spread < FEATURELESS && arcLines < 3 && !hasStar) {
    const isExposed = facts.exposure !== undefined && facts.exposure > 0
    const reason = `it holds noise only: the brightest hundredth lies ${spread.toFixed(1)} times the noise above the median`
    return { kind: isExposed ? 'dark' : 'bias', reason, sure: isExposed }
  }
  if (hasStar)
    return { kind: 'science', reason: `a trace lies at ${trace.position.toFixed(0)} pixels along the slit`, sure: true }
  if (arcLines >= ARC_LINES) return { kind: 'arc', reason: `${arcLines} narrow lines cross the slit`, sure: true }
  if (arcLines < 3)
    return { kind: 'flat', reason: 'the slit is lit by a source without lines', sure: median > 10 * noise }
  return { kind: 'unknown', reason: 'the pixels look like no kind of frame known here', sure: false }
}

/** Only gross contradictions: light where there should be none, or none where there should be. */
function conflicts(said: FrameKind, seen: FrameKind): boolean {
  const isDark = (kind: FrameKind): boolean => kind === 'bias' || kind === 'dark'
  if (seen === 'unknown') return false
  if (isDark(said)) return seen === 'arc' || seen === 'flat'
  return (said === 'arc' && seen === 'flat') || (said === 'flat' && seen === 'arc')
}
