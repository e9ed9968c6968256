import type { Measurement } from '../features/types.ts'
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
  /** Index of the exposure that page 1 shows: of the usable ones that with the largest part in the type. */
  readonly best: number
  /** The type from all spectra together, or of the single one. */
  readonly type: TypePosterior
  readonly summary?: TargetSummary
}

const RANK = { usable: 0, doubtful: 1, unusable: 2 } as const

/** Index of the exposure to show: not an unusable one, then that which decided the type most, then by quality and S/N. */
function bestOf(exposures: readonly Exposure[], type: TypePosterior): number {
  const shares = new Map(type.evidence.map((e) => [e.feature, e.share]))
  const merits = exposures.map(({ spectrum, night }): readonly number[] => {
    const quality = night?.quality ?? spectrum.quality
    const decided = spectrum.measurements.reduce(
      (sum, m) => sum + (m.ew === undefined ? 0 : (shares.get(m.feature) ?? 0)),
      0,
    )
    const snr = spectrum.snr.visual ?? spectrum.snr.blue ?? spectrum.snr.red ?? 0
    return [spectrum.curves ? 1 : 0, quality === 'unusable' ? 0 : 1, Math.round(decided * 20), -RANK[quality], snr]
  })
  let best = 0
  merits.forEach((merit, i) => {
    const k = merit.findIndex((value, n) => value !== merits[best][n])
    if (k >= 0 && merit[k] > merits[best][k]) best = i
  })
  return best
}

/**
 * The measurements of a target, one a feature: that of the shown exposure, or of the first other exposure that could
 * measure it where the shown one could not.
 */
export function measurementsOf({ exposures, best }: TargetView): readonly Measurement[] {
  const found = new Map<string, Measurement>()
  for (const { spectrum } of [exposures[best], ...exposures])
    for (const m of spectrum.measurements)
      if (found.get(m.feature)?.ew === undefined && (m.ew !== undefined || !found.has(m.feature)))
        found.set(m.feature, m)
  return [...found.values()].sort((a, b) => a.wavelengthRest - b.wavelengthRest)
}

/** The exposure with the spectrum expected of the target's type in place of that of its own. */
function withExpected(exposure: Exposure, expected: Float32Array | undefined): Exposure {
  const { curves } = exposure.spectrum
  if (!curves || !expected) return exposure
  return { ...exposure, spectrum: { ...exposure.spectrum, curves: { ...curves, expected } } }
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
    const exposures = summary.spectra.flatMap((ref, i) => {
      taken.add(`${ref.outcome} ${ref.spectrum}`)
      const exposure = exposureOf(ref.outcome, ref.spectrum)
      return exposure ? withExpected(exposure, summary.expected?.[i]) : []
    })
    if (exposures.length === 0) return []
    const inTime = [...exposures].sort((a, b) => (a.spectrum.facts.mjdMid ?? 0) - (b.spectrum.facts.mjdMid ?? 0))
    return [
      { name: summary.target, exposures: inTime, best: bestOf(inTime, summary.type), type: summary.type, summary },
    ]
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
