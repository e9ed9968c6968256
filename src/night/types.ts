import type { Finding } from '../findings/types.ts'
import type { Quality } from '../quality/types.ts'
import type { TypePosterior } from '../typing/types.ts'

/** One row of the observer's target list. */
export interface Target {
  readonly object: string
  /** Degrees, ICRS, at `epoch`. */
  readonly ra?: number
  readonly dec?: number
  readonly mag?: number
  /** mas/yr; pmRa includes cos δ. */
  readonly pmRa?: number
  readonly pmDec?: number
  /** Julian year, default 2000. */
  readonly epoch?: number
  readonly expectedType?: string
  readonly wantedSnr?: number
  /** 1 is the most urgent. */
  readonly priority?: number
  readonly note?: string
}

/** Points at one spectrum: index of the Outcome and of its spectrum. */
export interface SpectrumRef {
  readonly outcome: number
  readonly spectrum: number
}

/** What only the whole night can say of one spectrum. Findings here are added to those of its Outcome. */
export interface SpectrumNight {
  readonly ref: SpectrumRef
  readonly target?: string
  readonly expectedType?: string
  /** Posterior probability of the expected type (within its stated width). */
  readonly expectedProbability?: number
  readonly separationArcsec?: number
  readonly findings: readonly Finding[]
  /** Of the spectrum with the night's findings counted in. */
  readonly quality: Quality
}

/** All spectra of one target together: a row of `targets`. */
export interface TargetSummary {
  readonly target: string
  /** The list's row, when there is a list and it has one. */
  readonly listed?: Target
  readonly spectra: readonly SpectrumRef[]
  readonly type: TypePosterior
  readonly expectedProbability?: number
  readonly snrWanted?: number
  readonly snrReached?: number
  /** Of the type of all spectra together, at the samples of each one's curves (as `spectra`); for pages. */
  readonly expected?: readonly (Float32Array | undefined)[]
  readonly observeAgain: boolean
  readonly reason?: string
  readonly exposureNeeded?: number
  /** 0 (can wait) to 1 (first thing next night); undefined when not to be observed again. */
  readonly urgency?: number
  readonly findings: readonly Finding[]
}

/** How well one science set-up is covered by calibrations. */
export interface SetupCover {
  readonly setup: string
  readonly science: number
  readonly bias: number
  readonly dark: number
  readonly flat: number
  readonly arc: number
  readonly standard: number
  /** Largest time from a science frame to its nearest arc, hours. */
  readonly arcGapHours?: number
  readonly findings: readonly Finding[]
}

/** One quantity followed through the night. */
export interface Drift {
  readonly quantity:
    'wavelength zero point' | 'resolution' | 'throughput' | 'bias level' | 'signal-to-noise' | 'airmass' | 'seeing'
  readonly unit: string
  readonly setup: string
  readonly points: readonly {
    readonly mjd: number
    readonly value: number
    readonly error?: number
    readonly label: string
  }[]
  readonly findings: readonly Finding[]
}

/** One line of the observing log, in order of time. */
export interface LogEntry {
  readonly file: string
  readonly mjd?: number
  /** True where the time does not follow the order of the files. */
  readonly isTimeDoubtful?: true
  readonly kind: string
  readonly object: string
  readonly exposure?: number
  readonly airmass?: number
  readonly setup: string
}

/** One row of what to observe again, the most urgent first. */
export interface ObserveAgain {
  readonly target: string
  readonly listed?: Target
  /** One sentence without full stop. */
  readonly reason: string
  /** Seconds still to be exposed. */
  readonly exposureNeeded?: number
  /** 0 to 1. */
  readonly urgency: number
}

/** What only all files of a night together can say. */
export interface NightSummary {
  readonly spectra: readonly SpectrumNight[]
  readonly targets: readonly TargetSummary[]
  /** Listed but without any spectrum. */
  readonly notObserved: readonly Target[]
  /** Targets of the list never observed and targets to be observed again, the most urgent first. */
  readonly observeAgain: readonly ObserveAgain[]
  readonly cover: readonly SetupCover[]
  readonly drifts: readonly Drift[]
  readonly log: readonly LogEntry[]
  /** Of the whole night (common offset, clock, missing calibrations), not of one file. */
  readonly findings: readonly Finding[]
  /** Findings of the night's pass that belong to one file's frame row, by index of the Outcome. */
  readonly frameFindings: ReadonlyMap<number, readonly Finding[]>
  readonly mjdFirst?: number
  readonly mjdLast?: number
  readonly counts: Readonly<Record<'usable' | 'doubtful' | 'unusable' | 'unreadable', number>>
}
