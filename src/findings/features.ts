import type { FindingRule } from './types.ts'

/** What continuum and line measurement may find. */
export const FEATURE_RULES = {
  'pseudo-continuum': {
    level: 'note',
    meaning: 'The continuum is a pseudo-continuum: lines or bands crowd so that no stretch reaches the true level.',
    remedy: 'Compare equivalent widths only with others measured in the same way.',
    source: 'common practice, no source',
  },
  'continuum-unsupported': {
    level: 'doubt',
    meaning: 'Few stretches of the spectrum carry the continuum.',
    remedy: 'Look at the page: strong emission, bands or a broken spectrum leave the level to guesswork.',
    unit: '1',
    source: 'common practice, no source',
  },
  'no-continuum': {
    level: 'fault',
    meaning: 'No continuum could be set: there is too little light or too little of the spectrum.',
    source: 'common practice, no source',
  },
  'noise-not-in-file': {
    level: 'note',
    meaning: 'The file states no uncertainty; the noise was measured from the scatter of neighbouring samples.',
    source: 'common practice, no source',
  },
} as const satisfies Record<string, FindingRule>
