import type { Outcome } from '../quality/types.ts'
import { COLUMNS } from './columns.ts'
import { placeOf } from './place.ts'
import type { Row } from './row.ts'
import { tidyRow } from './row.ts'

/** Rows of `features` of one file: what was measured, beside what the best type lets one expect. */
export function featureRows(outcome: Outcome): Row[] {
  return outcome.spectra.flatMap((spectrum) => {
    const evidence = new Map(spectrum.type.evidence.map((e) => [e.feature, e]))
    return spectrum.measurements.map((m) => {
      // Lines measured otherwise share names with side-band features; the type was told from the side bands only.
      const e = m.method === 'side bands' ? evidence.get(m.feature) : undefined
      return tidyRow(COLUMNS.features, {
        ...placeOf(outcome, spectrum),
        feature: m.feature,
        species: m.species,
        wavelength_rest: m.wavelengthRest,
        unit: m.unit,
        method: m.method,
        status: m.status,
        reason: m.reason,
        ew: m.ew,
        ew_err_noise: m.ewErrNoise,
        ew_err_continuum: m.ewErrContinuum,
        ew_err: m.ewErr,
        limit_3sigma: m.limit3sigma,
        centre: m.centre,
        centre_err: m.centreErr,
        fwhm: m.fwhm,
        depth: m.depth,
        expected: e?.expected,
        expected_scatter: e?.expectedScatter,
        pull: e?.pull,
        share: e?.share,
      })
    })
  })
}
