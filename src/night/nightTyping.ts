import type { SpectrumOutcome } from '../quality/types.ts'
import type { TypePosterior } from '../typing/types.ts'

/** What the night's pass asks of the typing stage; handed in, so that it can be tested without a calibration. */
export interface NightTyping {
  /** One type from several spectra of one star. */
  combine(spectra: readonly SpectrumOutcome[]): TypePosterior
  /** Probability of a type in words under a posterior; undefined when the words are no type or nothing is known. */
  probability(type: TypePosterior, expectedType: string): number | undefined
}

/** A type for stars that have no spectrum to tell from. */
export const NO_TYPE: TypePosterior = {
  state: 'none',
  reason: 'no usable spectrum',
  peculiar: [],
  evidence: [],
  ratios: [],
  featuresUsed: 0,
}
