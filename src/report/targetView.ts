import type { NightSummary, SpectrumNight, TargetSummary } from '../night/types.ts'
import type { Outcome, SpectrumOutcome } from '../quality/types.ts'
import type { TypePosterior } from '../typing/types.ts'
import { plainText } from './plainText.ts'

/** One spectrum of a target with its file and what the night says of it. */
export interface Exposure {
  readonly file: string
  readonly sha256?: string
  readonly spectrum: SpectrumOutcome
  readonly night?: SpectrumNight
}

/** All that a target's pages draw from. */
export interface TargetView {
  readonly name: string
  /** In order of time as far as it is known, else in order of input. */
  readonly exposures: readonly Exposure[]
  /** Index of the exposure that page 1 shows: the best by quality, then by signal to noise. */
  readonly best: number
  /** The type from all spectra together, or of the single one. */
  readonly type: TypePosterior
  readonly summary?: TargetSummary
}

const RANK = { usable: 0, doubtful: 1, unusable: 2 } as const

function bestOf(exposures: readonly Exposure[]): number {
  let best = 0
  const rank = (e: Exposure): number => RANK[e.night?.quality ?? e.spectrum.quality] + (e.spectrum.curves ? 0 : 10)
  const snr = (e: Exposure): number => e.spectrum.snr.visual ?? e.spectrum.snr.blue ?? e.spectrum.snr.red ?? 0
  exposures.forEach((exposure, i) => {
    const [a, b] = [rank(exposure), rank(exposures[best])]
    if (a < b || (a === b && snr(exposure) > snr(exposures[best]))) best = i
  })
  return best
}

/** One view a target of the night, and one for every spectrum that belongs to no target, in order of first input. */
export function targetViews(outcomes: readonly Outcome[], night?: NightSummary): TargetView[] {
  const nightOf = new Map((night?.spectra ?? []).map((s) => [`${s.ref.outcome} ${s.ref.spectrum}`, s]))
  const exposureOf = (outcome: number, spectrum: number): Exposure | undefined => {
    const file = outcomes[outcome]
    const found = file?.spectra[spectrum]
    const known = nightOf.get(`${outcome} ${spectrum}`)
    if (!found) return undefined
    return {
      file: file.file,
      spectrum: found,
      ...(file.sha256 === undefined ? {} : { sha256: file.sha256 }),
      ...(known ? { night: known } : {}),
    }
  }
  const taken = new Set<string>()
  const views = (night?.targets ?? []).flatMap((summary): TargetView[] => {
    const exposures = summary.spectra.flatMap((ref) => {
      taken.add(`${ref.outcome} ${ref.spectrum}`)
      return exposureOf(ref.outcome, ref.spectrum) ?? []
    })
    if (exposures.length === 0) return []
    const inTime = [...exposures].sort((a, b) => (a.spectrum.facts.mjdMid ?? 0) - (b.spectrum.facts.mjdMid ?? 0))
    return [{ name: summary.target, exposures: inTime, best: bestOf(inTime), type: summary.type, summary }]
  })
  outcomes.forEach((outcome, i) =>
    outcome.spectra.forEach((spectrum, j) => {
      const exposure = taken.has(`${i} ${j}`) ? undefined : exposureOf(i, j)
      if (!exposure) return
      const name = plainText(spectrum.facts.object ?? '') || outcome.file
      views.push({ name, exposures: [exposure], best: 0, type: spectrum.type })
    }),
  )
  return views
}
