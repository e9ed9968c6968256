/** `note` informs; `doubt` makes a spectrum doubtful; `fault` makes it unusable. */
export type Level = 'note' | 'doubt' | 'fault'

/** What is known of a finding's code before any file is read. One record per code, in the stage's own file here. */
export interface FindingRule {
  readonly level: Level
  /** One sentence, present tense: what the finding says. */
  readonly meaning: string
  /** What an observer does about it, if there is something to do. */
  readonly remedy?: string
  /** Unit of `value` and `limit`. */
  readonly unit?: string
  /** Where the threshold comes from, or "common practice, no source". */
  readonly source?: string
}

/** One thing found, with its figures. `text` is a full plain sentence without full stop that holds the figures. */
export interface Finding {
  readonly level: Level
  readonly code: string
  readonly text: string
  readonly value?: number
  readonly limit?: number
  readonly unit?: string
}

/** A remark of the reader on how something was understood (guessed medium, unit, joined orders). */
export interface Note {
  readonly code: string
  readonly text: string
}
