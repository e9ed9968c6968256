import type { Finding } from '../findings/types.ts'
import type { FrameKind, Outcome, SpectrumOutcome } from '../quality/types.ts'
import { setupName } from '../quality/setupName.ts'
import type { HeaderFacts } from '../spectrum/types.ts'
import type { SpectrumRef } from './types.ts'

/** One file of the night that could be understood: a 2-D frame, or one or more spectra. */
export interface Exposure {
  /** Index of the Outcome. */
  readonly outcome: number
  readonly file: string
  readonly facts: HeaderFacts
  readonly kind: FrameKind
  readonly setup: string
  /** True of a raw 2-D frame, false of a file of spectra. */
  readonly isFrame: boolean
  /** MJD of the middle, else of the start. */
  readonly mjd?: number
  /** MJD of the start. */
  readonly start?: number
}

/** One spectrum with the place it stands in. */
export interface NightSpectrum {
  readonly ref: SpectrumRef
  readonly file: string
  readonly spectrum: SpectrumOutcome
}

const DAY = 86400

/** The files that could be understood, in the order given. */
export function exposuresOf(outcomes: readonly Outcome[]): readonly Exposure[] {
  return outcomes.flatMap(({ file, frame, spectra }, outcome) => {
    const facts = frame?.facts ?? spectra[0]?.facts
    if (!facts) return []
    const half = facts.exposure === undefined ? 0 : facts.exposure / 2 / DAY
    const start = facts.mjdStart ?? (facts.mjdMid === undefined ? undefined : facts.mjdMid - half)
    const mjd = facts.mjdMid ?? (facts.mjdStart === undefined ? undefined : facts.mjdStart + half)
    return [
      {
        outcome,
        file,
        facts,
        kind: frame === undefined || (frame.kind === 'unknown' && spectra.length > 0) ? 'science' : frame.kind,
        setup: frame?.setup ?? spectra[0]?.setup ?? setupName(facts),
        isFrame: spectra.length === 0,
        ...(mjd === undefined ? {} : { mjd }),
        ...(start === undefined ? {} : { start }),
      },
    ]
  })
}

/** Every spectrum of the night, in the order of the files. */
export function spectraOf(outcomes: readonly Outcome[]): readonly NightSpectrum[] {
  return outcomes.flatMap(({ file, spectra }, outcome) =>
    spectra.map((spectrum, i) => ({ ref: { outcome, spectrum: i }, file, spectrum })),
  )
}

/** Findings of the night by the file (index of its Outcome) they belong to. */
export type FileFindings = Map<number, Finding[]>

/** Adds a finding to a file's. */
export function addFinding(findings: FileFindings, outcome: number, found: Finding): void {
  const list = findings.get(outcome)
  if (list) list.push(found)
  else findings.set(outcome, [found])
}

/** True for frames of the sky's objects, whose pointing and time matter. */
export function isOnSky(kind: FrameKind): boolean {
  return kind === 'science' || kind === 'standard'
}

/** The last part of a path. */
export function baseName(file: string): string {
  return file.slice(file.lastIndexOf('/') + 1)
}
