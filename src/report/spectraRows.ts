import type { Outcome } from '../quality/types.ts'
import { COLUMNS } from './columns.ts'
import type { NightOf } from './nightOf.ts'
import { NO_NIGHT } from './nightOf.ts'
import { joined, placeOf } from './place.ts'
import type { Row } from './row.ts'
import { tidyRow } from './row.ts'

/** Rows of `spectra` of one file. */
export function spectraRows(outcome: Outcome, nightOf: NightOf = NO_NIGHT): Row[] {
  return outcome.spectra.map((spectrum, i) => {
    const { facts, snr, restFrame, type } = spectrum
    const night = nightOf(i)
    return tidyRow(COLUMNS.spectra, {
      ...placeOf(outcome, spectrum),
      target: night?.target,
      setup: spectrum.setup,
      ra_deg: facts.ra,
      dec_deg: facts.dec,
      date_obs: facts.dateObs,
      mjd_mid: facts.mjdMid,
      exptime_s: facts.exposure,
      airmass: facts.airmass,
      wavelength_min: spectrum.wavelengthMin,
      wavelength_max: spectrum.wavelengthMax,
      samples: spectrum.samples,
      medium: spectrum.medium,
      resolution_fwhm: spectrum.resolution?.fwhm,
      snr_blue: snr.blue,
      snr_visual: snr.visual,
      snr_red: snr.red,
      velocity_kms: restFrame.trusted ? restFrame.velocity : undefined,
      velocity_err_kms: restFrame.trusted ? restFrame.error : undefined,
      barycentric_correction_kms: spectrum.barycentricCorrection,
      velocity_barycentric_kms: spectrum.barycentricVelocity,
      type_state: type.state,
      spectral_type: type.spectralType,
      luminosity_class: type.luminosityClass,
      type_number: type.typeNumber,
      type_number_err: type.typeNumberErr,
      type_low68: type.low68,
      type_high68: type.high68,
      type_low95: type.low95,
      type_high95: type.high95,
      luminosity_number: type.luminosityNumber,
      prob_dwarf: type.probDwarf,
      prob_giant: type.probGiant,
      prob_supergiant: type.probSupergiant,
      peculiar: joined(type.peculiar.map((p) => p.word)),
      expected_type: night?.expectedType,
      expected_probability: night?.expectedProbability,
      separation_arcsec: night?.separationArcsec,
      quality: night?.quality ?? spectrum.quality,
      findings: joined([...spectrum.findings, ...(night?.findings ?? [])].map((f) => f.code)),
      sha256: outcome.sha256,
    })
  })
}
