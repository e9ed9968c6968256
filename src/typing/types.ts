export type TypeState = 'typed' | 'wide' | 'outside' | 'none'

export type PeculiarWord =
  | 'emission'
  | 'metal-weak'
  | 'metallic-line'
  | 'carbon'
  | 'white dwarf'
  | 'hot subdwarf'
  | 'brown dwarf'
  | 'composite'
  | 'nebular'
  | 'galaxy'

/** A word of the trade, and why it is said. */
export interface Peculiarity {
  readonly word: PeculiarWord
  /** The criterion with its figures, one sentence without full stop. */
  readonly text: string
  readonly source: string
}

/** What one feature said of the type. */
export interface Evidence {
  readonly feature: string
  readonly measured: number
  readonly error: number
  /** Expected at the best type, and its scatter between stars of that type. */
  readonly expected: number
  readonly expectedScatter: number
  /** Expected one class step (5 subclasses) earlier and later, same luminosity; undefined off the grid. */
  readonly expectedEarlier?: number
  readonly expectedLater?: number
  /** (measured − expected) / total error. */
  readonly pull: number
  /** Part in the decision, 0 to 1; sums to 1 over the features used. */
  readonly share: number
}

/** A classical ratio a classifier would quote. */
export interface ClassicalRatio {
  readonly name: string
  readonly value?: number
  readonly error?: number
  readonly reason?: string
  /** What it says, in words: 'equal at O7'. */
  readonly reading: string
  readonly source: string
}

/** Probability over type number (O0 = 0 … M9 = 69) and luminosity class (I = 1 … V = 5). */
export interface TypeGrid {
  /** shape (t) type numbers, increasing. */
  readonly types: Float64Array
  /** shape (c) luminosity numbers. */
  readonly classes: Float64Array
  /** shape (t × c), type outermost; sums to 1. */
  readonly probability: Float64Array
}

/** A type as a posterior, never a bare label. Undefined where the spectrum cannot tell. */
export interface TypePosterior {
  readonly state: TypeState
  /** Why `none` or `outside`. */
  readonly reason?: string
  readonly spectralType?: string
  readonly luminosityClass?: string
  readonly typeNumber?: number
  readonly typeNumberErr?: number
  readonly low68?: number
  readonly high68?: number
  readonly low95?: number
  readonly high95?: number
  readonly luminosityNumber?: number
  /** IV–V, II–III, I. */
  readonly probDwarf?: number
  readonly probGiant?: number
  readonly probSupergiant?: number
  readonly peculiar: readonly Peculiarity[]
  readonly grid?: TypeGrid
  /** Root mean square pull at the best type, and how unusual that is (0 to 1, small is bad). */
  readonly fitPull?: number
  readonly fitProbability?: number
  /** Ranked, largest share first. */
  readonly evidence: readonly Evidence[]
  readonly ratios: readonly ClassicalRatio[]
  readonly featuresUsed: number
}
