import type { FindingRule } from './types.ts'

/** What typing can find; what a single spectrum lacks for a type is said by the quality checks. */
export const TYPING_RULES: Readonly<Record<string, FindingRule>> = {
  'types-disagree': {
    level: 'doubt',
    meaning: 'Spectra of one target are typed differently by more than their errors',
    remedy: 'Look whether one of them is another star, or is spoilt',
    unit: 'σ',
    source: 'common practice, no source',
  },
}
