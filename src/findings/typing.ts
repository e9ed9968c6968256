import type { FindingRule } from './types.ts'

/** What the typing of spectra can find. */
export const TYPING_RULES: Readonly<Record<string, FindingRule>> = {
  'no-type': {
    level: 'doubt',
    meaning: 'The spectrum holds nothing that a type could be told from',
    remedy: 'Look at the spectrum; observe again where a star was expected',
    source: 'common practice, no source',
  },
  'wide-type': {
    level: 'note',
    meaning: 'The type is known to no better than half a letter',
    remedy: 'A longer exposure or a bluer range narrows it',
    unit: 'subclasses',
    source: 'common practice, no source',
  },
  'outside-types': {
    level: 'note',
    meaning: 'No ordinary star of types O to M fits the features',
    remedy: 'Look at the pulls: a peculiar star, a blend of two, or a fault of the reduction',
    source: 'share of published stars that fit as badly, by cross-validation',
  },
  'types-disagree': {
    level: 'doubt',
    meaning: 'Spectra of one target are typed differently by more than their errors',
    remedy: 'Look whether one of them is another star, or is spoilt',
    unit: 'σ',
    source: 'common practice, no source',
  },
}
