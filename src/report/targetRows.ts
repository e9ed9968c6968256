import type { NightSummary } from '../night/types.ts'
import { COLUMNS } from './columns.ts'
import type { Row } from './row.ts'
import { tidyRow } from './row.ts'

/** Rows of `targets`: those with spectra, then those listed but not observed, with what each needs. */
export function targetRows(night: NightSummary): Row[] {
  const again = new Map(night.observeAgain.map((one) => [one.target, one]))
  const observed = night.targets.map((t) =>
    tidyRow(COLUMNS.targets, {
      target: t.target,
      spectra: t.spectra.length,
      spectral_type: t.type.spectralType,
      luminosity_class: t.type.luminosityClass,
      type_low68: t.type.low68,
      type_high68: t.type.high68,
      expected_type: t.listed?.expectedType,
      expected_probability: t.expectedProbability,
      snr_wanted: t.snrWanted,
      snr_reached: t.snrReached,
      observe_again: t.observeAgain ? 'yes' : 'no',
      reason: t.reason,
      exposure_needed_s: t.exposureNeeded,
      urgency: t.urgency,
    }),
  )
  const missed = night.notObserved.map((t) =>
    tidyRow(COLUMNS.targets, {
      target: t.object,
      spectra: 0,
      expected_type: t.expectedType,
      snr_wanted: t.wantedSnr,
      observe_again: 'yes',
      reason: again.get(t.object)?.reason ?? 'listed but not observed',
      exposure_needed_s: again.get(t.object)?.exposureNeeded,
      urgency: again.get(t.object)?.urgency,
    }),
  )
  return [...observed, ...missed]
}
