import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import type { Thresholds } from '../tables/types.ts'
import { baseName } from './exposures.ts'
import type { NightSpectrum } from './exposures.ts'
import type { NightTyping } from './nightTyping.ts'
import type { SpectrumNight } from './types.ts'

/** Findings, by index of the spectrum, of pairs whose types are improbable each for itself and fit when exchanged. */
export function swappedTypes(
  spectra: readonly NightSpectrum[],
  nights: readonly SpectrumNight[],
  { thresholds, typing }: { readonly thresholds: Thresholds; readonly typing: NightTyping },
): ReadonlyMap<number, readonly Finding[]> {
  const fits = thresholds.typeProbabilityNote.value
  const odd = nights.flatMap(({ expectedProbability, expectedType }, i) =>
    expectedType !== undefined &&
    expectedProbability !== undefined &&
    expectedProbability < thresholds.typeProbability.value
      ? [{ i, expectedType }]
      : [],
  )
  const found = new Map<number, readonly Finding[]>()
  for (const one of odd) {
    const others = odd.filter(({ i, expectedType }) => i !== one.i && expectedType !== one.expectedType)
    const matching = others.filter(
      (other) =>
        (typing.probability(spectra[one.i].spectrum.type, other.expectedType) ?? 0) > fits &&
        (typing.probability(spectra[other.i].spectrum.type, one.expectedType) ?? 0) > fits,
    )
    // several partners would say nothing
    if (matching.length !== 1) continue
    const [{ i: partner, expectedType }] = matching
    const text = `The type fits that expected of ${baseName(spectra[partner].file)} (${expectedType}), and the other way round: the two stars may be exchanged`
    const value = typing.probability(spectra[one.i].spectrum.type, expectedType)
    found.set(one.i, [finding(NIGHT_RULES, 'types-look-swapped', text, { value, limit: fits })])
  }
  return found
}
