import type { Outcome } from '../quality/types.ts'
import { COLUMNS } from './columns.ts'
import { placeOf } from './place.ts'
import type { Row } from './row.ts'
import { tidyRow } from './row.ts'

/** Rows of `lines` of one file; none unless lines were searched for. */
export function lineRows(outcome: Outcome): Row[] {
  return outcome.spectra.flatMap((spectrum) =>
    (spectrum.lines ?? []).map((line) =>
      tidyRow(COLUMNS.lines, {
        ...placeOf(outcome, spectrum),
        centre: line.centre,
        centre_err: line.centreErr,
        kind: line.kind,
        ew: line.ew,
        ew_err: line.ewErr,
        significance: line.significance,
        fwhm: line.fwhm,
        origin: line.origin,
        candidates: line.candidates.map((c) => `${c.species} ${c.wavelength.toFixed(3)}`).join('; '),
      }),
    ),
  )
}
