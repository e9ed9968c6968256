import type { NightSummary, SpectrumNight } from '../night/types.ts'

/** What the night says of one spectrum of a file, by the spectrum's index in its Outcome. */
export type NightOf = (spectrum: number) => SpectrumNight | undefined

/** The look-up of a file on its own. */
export const NO_NIGHT: NightOf = () => undefined

/** For each Outcome (by index) a look-up of what the night says of its spectra; without a night, of nothing. */
export function nightLookup(night: NightSummary | undefined): (outcome: number) => NightOf {
  const known = new Map<number, Map<number, SpectrumNight>>()
  for (const entry of night?.spectra ?? []) {
    const ofFile = known.get(entry.ref.outcome) ?? new Map<number, SpectrumNight>()
    ofFile.set(entry.ref.spectrum, entry)
    known.set(entry.ref.outcome, ofFile)
  }
  return (outcome) => {
    const ofFile = known.get(outcome)
    return ofFile ? (spectrum) => ofFile.get(spectrum) : NO_NIGHT
  }
}
