import type { ColumnSpec, TableName } from './row.ts'

type Given = Partial<Pick<ColumnSpec, 'unit' | 'ucd' | 'utype' | 'significant'>>

const text = (name: string, description: string, given: Given = {}): ColumnSpec => ({
  name,
  kind: 'text',
  unit: '',
  ucd: '',
  digits: 0,
  description,
  ...given,
})
const integer = (name: string, description: string, given: Given = {}): ColumnSpec => ({
  ...text(name, description, given),
  kind: 'integer',
})
const number = (name: string, digits: number, description: string, given: Given = {}): ColumnSpec => ({
  ...text(name, description, given),
  kind: 'number',
  digits,
})

const FILE = text('file', 'Path of the file as it was given, without a leading ./', { ucd: 'meta.id;meta.file' })
const PLACE = [
  FILE,
  integer(
    'hdu',
    'Header and data unit of the spectrum, counted from 0 (the primary); of the first when several were joined',
    {
      ucd: 'meta.number',
    },
  ),
  integer('row', 'Table row, image row or aperture, counted from 0; empty where the unit holds but one spectrum', {
    ucd: 'meta.number',
  }),
  text('object', 'Name of the object as the header gives it', { ucd: 'meta.id;src', utype: 'spec:Target.Name' }),
]
const KMS = { unit: 'km/s' }
const ANGSTROM = { unit: 'Angstrom' }
const PROBABILITY: Given = { ucd: 'stat.probability', significant: true }

const probability = (name: string, description: string): ColumnSpec => number(name, 4, description, PROBABILITY)

const TIME_AND_PLACE = {
  ra: number('ra_deg', 6, 'Right ascension as the header gives it', { unit: 'deg', ucd: 'pos.eq.ra' }),
  dec: number('dec_deg', 6, 'Declination as the header gives it', { unit: 'deg', ucd: 'pos.eq.dec' }),
  date: text('date_obs', 'Start of the exposure as the header gives it (ISO 8601)', { ucd: 'time.start;obs.exposure' }),
  mjd: number('mjd_mid', 6, 'Middle of the exposure, Modified Julian Date, UTC', { unit: 'd', ucd: 'time.epoch' }),
  exposure: number('exptime_s', 4, 'Exposure time', { unit: 's', ucd: 'time.duration;obs.exposure' }),
  airmass: number('airmass', 4, 'Air mass', { ucd: 'obs.airMass' }),
}
const SETUP = text('setup', 'Set-up of the instrument by its values: grating, slit, binning', {
  ucd: 'meta.id;instr.setup',
})
const QUALITY = text('quality', 'usable, doubtful (a finding of level doubt) or unusable (a finding of level fault)', {
  ucd: 'meta.code.qual',
})
const CODES = text('findings', 'Codes of the findings, joined by "; "; the findings table explains each', {
  ucd: 'meta.code.error',
})

const SPECTRA: readonly ColumnSpec[] = [
  ...PLACE,
  text('target', 'Target of the list that this spectrum belongs to', { ucd: 'meta.id' }),
  SETUP,
  { ...TIME_AND_PLACE.ra, ucd: 'pos.eq.ra;meta.main', utype: 'spec:Target.Pos' },
  { ...TIME_AND_PLACE.dec, ucd: 'pos.eq.dec;meta.main', utype: 'spec:Target.Pos' },
  TIME_AND_PLACE.date,
  { ...TIME_AND_PLACE.mjd, utype: 'spec:Char.TimeAxis.Coverage.Location.Value' },
  { ...TIME_AND_PLACE.exposure, utype: 'spec:Char.TimeAxis.Coverage.Bounds.Extent' },
  TIME_AND_PLACE.airmass,
  number('wavelength_min', 4, 'Shortest wavelength with a usable sample, in air', {
    ...ANGSTROM,
    ucd: 'em.wl;stat.min',
    utype: 'spec:Char.SpectralAxis.Coverage.Bounds.Start',
  }),
  number('wavelength_max', 4, 'Longest wavelength with a usable sample, in air', {
    ...ANGSTROM,
    ucd: 'em.wl;stat.max',
    utype: 'spec:Char.SpectralAxis.Coverage.Bounds.Stop',
  }),
  integer('samples', 'Number of samples', { ucd: 'meta.number', utype: 'spec:Length' }),
  text('medium', 'Medium of the wavelengths in the file: air, vacuum or unknown', { ucd: 'meta.code' }),
  number('resolution_fwhm', 3, 'Full width at half maximum of the instrument profile', {
    ...ANGSTROM,
    ucd: 'spect.resolution;em.wl',
    utype: 'spec:Char.SpectralAxis.Resolution',
  }),
  number('snr_blue', 2, 'Signal to noise per Angstrom about 4500 Angstrom', { ucd: 'stat.snr;em.opt.B' }),
  number('snr_visual', 2, 'Signal to noise per Angstrom about 5500 Angstrom', { ucd: 'stat.snr;em.opt.V' }),
  number('snr_red', 2, 'Signal to noise per Angstrom about 6500 Angstrom', { ucd: 'stat.snr;em.opt.R' }),
  number('velocity_kms', 2, 'Radial velocity cz as measured, positive receding; empty when not trusted', {
    ...KMS,
    ucd: 'spect.dopplerVeloc.opt',
  }),
  number('velocity_err_kms', 2, 'Standard error of velocity_kms', { ...KMS, ucd: 'stat.error;spect.dopplerVeloc.opt' }),
  number('barycentric_correction_kms', 3, 'Velocity to add to refer it to the barycentre of the Solar System', {
    ...KMS,
    ucd: 'spect.dopplerVeloc.opt;arith.diff',
  }),
  number('velocity_barycentric_kms', 2, 'Radial velocity referred to the barycentre of the Solar System', {
    ...KMS,
    ucd: 'spect.dopplerVeloc.opt;pos.barycenter',
  }),
  text('type_state', 'typed, wide (68 % range above 5 subclasses), outside (no ordinary O to M star) or none', {
    ucd: 'meta.code.status',
  }),
  text('spectral_type', 'Most probable spectral type on the MK system', { ucd: 'src.spType' }),
  text('luminosity_class', 'Most probable luminosity class; empty where the spectrum cannot tell', {
    ucd: 'src.class.luminosity',
  }),
  number('type_number', 2, 'Mean of the posterior in type numbers: O0 = 0, B0 = 10, A0 = 20 ... M0 = 60', {
    ucd: 'src.spType',
  }),
  number('type_number_err', 2, 'Standard deviation of the posterior in type numbers', { ucd: 'stat.error;src.spType' }),
  number('type_low68', 2, 'Lower end of the central 68 % of the posterior', { ucd: 'src.spType;stat.min' }),
  number('type_high68', 2, 'Upper end of the central 68 % of the posterior', { ucd: 'src.spType;stat.max' }),
  number('type_low95', 2, 'Lower end of the central 95 % of the posterior', { ucd: 'src.spType;stat.min' }),
  number('type_high95', 2, 'Upper end of the central 95 % of the posterior', { ucd: 'src.spType;stat.max' }),
  number('luminosity_number', 2, 'Mean luminosity class of the posterior: I = 1 ... V = 5', {
    ucd: 'src.class.luminosity',
  }),
  probability('prob_dwarf', 'Probability of class IV or V'),
  probability('prob_giant', 'Probability of class II or III'),
  probability('prob_supergiant', 'Probability of class I'),
  text('peculiar', 'Words of the trade for what is peculiar, joined by "; "', { ucd: 'src.class' }),
  text('expected_type', 'Type that the target list expects; never enters the measured type', { ucd: 'src.spType' }),
  probability('expected_probability', 'Posterior probability of the expected type'),
  number('separation_arcsec', 2, 'Distance of the header position from the position in the target list', {
    unit: 'arcsec',
    ucd: 'pos.angDistance',
  }),
  QUALITY,
  CODES,
  text('sha256', 'SHA-256 of the file, hexadecimal', { ucd: 'meta.checksum' }),
]

const FEATURES: readonly ColumnSpec[] = [
  ...PLACE,
  text('feature', 'Key of the feature', { ucd: 'meta.id;spect.line' }),
  text('species', 'Atom, ion or molecule', { ucd: 'phys.atmol.element' }),
  number('wavelength_rest', 3, 'Nominal rest wavelength, in air', { ...ANGSTROM, ucd: 'em.wl;spect.line' }),
  text('unit', 'Unit of ew and of the columns that share it: Å, mag, or 1 for a ratio', { ucd: 'meta.unit' }),
  text('method', 'How the feature was measured', { ucd: 'meta.code' }),
  text('status', 'measured, blend, absent, uncovered or masked', { ucd: 'meta.code.status' }),
  text('reason', 'Why the feature could not be measured', { ucd: 'meta.note' }),
  number('ew', 5, 'Equivalent width or strength, positive in absorption, in the unit of this row', {
    ucd: 'spect.line.eqWidth',
  }),
  number('ew_err_noise', 5, 'Standard error of ew from the noise', { ucd: 'stat.error;spect.line.eqWidth' }),
  number('ew_err_continuum', 5, 'Standard error of ew from the placement of the continuum', {
    ucd: 'stat.error.sys;spect.line.eqWidth',
  }),
  number('ew_err', 5, 'Standard error of ew, both parts', { ucd: 'stat.error;spect.line.eqWidth' }),
  number('limit_3sigma', 5, 'Three standard errors, given where the feature is not detected', {
    ucd: 'spect.line.eqWidth;stat.max',
  }),
  number('centre', 4, 'Centre found, in air, in the rest frame of the star', {
    ...ANGSTROM,
    ucd: 'em.wl.central;spect.line',
  }),
  number('centre_err', 4, 'Standard error of centre', { ...ANGSTROM, ucd: 'stat.error;em.wl.central;spect.line' }),
  number('fwhm', 4, 'Full width at half maximum', { ...ANGSTROM, ucd: 'spect.line.width' }),
  number('depth', 5, 'Depth as a fraction of the continuum', { ucd: 'spect.line.intensity;arith.ratio' }),
  number('expected', 5, 'Strength expected at the best type, in the unit of this row', {
    ucd: 'spect.line.eqWidth;meta.modelled',
  }),
  number('expected_scatter', 5, 'Scatter of the strength between stars of the best type', {
    ucd: 'stat.stdev;spect.line.eqWidth',
  }),
  number('pull', 3, 'Measured less expected, in units of the total error', { ucd: 'stat.fit.residual' }),
  number('share', 4, 'Part of the feature in the decision, 0 to 1', { ucd: 'stat.weight', significant: true }),
]

const LINES: readonly ColumnSpec[] = [
  ...PLACE,
  number('centre', 4, 'Centre in air; rest frame of the star for stellar lines, of the observer for others', {
    ...ANGSTROM,
    ucd: 'em.wl.central;spect.line',
  }),
  number('centre_err', 4, 'Standard error of centre', { ...ANGSTROM, ucd: 'stat.error;em.wl.central;spect.line' }),
  text('kind', 'absorption or emission', { ucd: 'meta.code.class' }),
  number('ew', 5, 'Equivalent width, positive in absorption', { ...ANGSTROM, ucd: 'spect.line.eqWidth' }),
  number('ew_err', 5, 'Standard error of ew', { ...ANGSTROM, ucd: 'stat.error;spect.line.eqWidth' }),
  number('significance', 2, 'Strength in units of its error', { ucd: 'stat.snr;spect.line' }),
  number('fwhm', 4, 'Full width at half maximum', { ...ANGSTROM, ucd: 'spect.line.width' }),
  text('origin', 'stellar, interstellar, telluric, sky, nebular or unknown', { ucd: 'meta.code.class' }),
  text('candidates', 'Possible identifications, most plausible first, joined by "; "', { ucd: 'meta.id;spect.line' }),
]

const FINDINGS: readonly ColumnSpec[] = [
  ...PLACE,
  text('level', 'note, doubt (makes a spectrum doubtful) or fault (makes it unusable)', { ucd: 'meta.code.qual' }),
  text('code', 'Code of the finding', { ucd: 'meta.code.error' }),
  number('value', 6, 'Figure that the finding rests on', { ucd: 'stat.value', significant: true }),
  number('limit', 6, 'Limit that the figure was held against', { ucd: 'stat.value', significant: true }),
  text('unit', 'Unit of value and limit', { ucd: 'meta.unit' }),
  text('text', 'The finding in one plain sentence', { ucd: 'meta.note' }),
]

const counts = (name: string, description: string, ucd: string): ColumnSpec =>
  number(name, 6, description, { unit: 'adu', ucd, significant: true })

const FRAMES: readonly ColumnSpec[] = [
  FILE,
  text('kind', 'bias, dark, flat, skyflat, arc, standard, science, acquisition, focus, sky or unknown', {
    ucd: 'meta.code.class',
  }),
  text('kind_how', 'How the kind was told: header, content or list', { ucd: 'meta.code' }),
  SETUP,
  text('object', 'Name of the object as the header gives it', { ucd: 'meta.id;src' }),
  text('instrument', 'Instrument as the header gives it', { ucd: 'meta.id;instr' }),
  TIME_AND_PLACE.date,
  TIME_AND_PLACE.mjd,
  TIME_AND_PLACE.exposure,
  { ...TIME_AND_PLACE.ra, ucd: 'pos.eq.ra;meta.main' },
  { ...TIME_AND_PLACE.dec, ucd: 'pos.eq.dec;meta.main' },
  TIME_AND_PLACE.airmass,
  integer('width', 'Pixels along the first axis', { unit: 'pixel', ucd: 'pos.cartesian.x;instr.det' }),
  integer('height', 'Pixels along the second axis', { unit: 'pixel', ucd: 'pos.cartesian.y;instr.det' }),
  text('binning', 'Binning of the detector along x and y', { ucd: 'instr.setup' }),
  counts('level_median', 'Median of the pixels', 'phot.count;stat.median'),
  counts('level_p99', '99th percentile of the pixels', 'phot.count;stat.value'),
  counts('level_max', 'Largest pixel', 'phot.count;stat.max'),
  counts('noise', 'Robust noise between neighbouring pixels; the read noise in a bias', 'stat.stdev;phot.count'),
  number('saturated_fraction', 4, 'Part of the pixels at the saturation level, 0 to 1', {
    ucd: 'instr.saturation;arith.ratio',
    significant: true,
  }),
  integer('arc_lines', 'Emission peaks along the dispersion', { ucd: 'meta.number;spect.line' }),
  integer('spectra', 'Number of spectra read from the file', { ucd: 'meta.number' }),
  QUALITY,
  CODES,
]

const TARGETS: readonly ColumnSpec[] = [
  text('target', 'Name of the target', { ucd: 'meta.id;meta.main' }),
  integer('spectra', 'Number of spectra of the target', { ucd: 'meta.number' }),
  text('spectral_type', 'Most probable spectral type from all spectra together', { ucd: 'src.spType' }),
  text('luminosity_class', 'Most probable luminosity class from all spectra together', { ucd: 'src.class.luminosity' }),
  number('type_low68', 2, 'Lower end of the central 68 % of the posterior, type number', {
    ucd: 'src.spType;stat.min',
  }),
  number('type_high68', 2, 'Upper end of the central 68 % of the posterior, type number', {
    ucd: 'src.spType;stat.max',
  }),
  text('expected_type', 'Type that the target list expects', { ucd: 'src.spType' }),
  probability('expected_probability', 'Posterior probability of the expected type'),
  number('snr_wanted', 2, 'Signal to noise that the target list asks for', { ucd: 'stat.snr' }),
  number('snr_reached', 2, 'Signal to noise reached', { ucd: 'stat.snr' }),
  text('observe_again', 'yes or no', { ucd: 'meta.code' }),
  text('reason', 'Why it should be observed again', { ucd: 'meta.note' }),
  number('exposure_needed_s', 1, 'Exposure time still needed', { unit: 's', ucd: 'time.duration;obs.exposure' }),
  number('urgency', 3, 'From 0 (can wait) to 1 (first thing next night)', { ucd: 'stat.rank' }),
]

/** The columns of every table, in the order in which every format writes them. */
export const COLUMNS: Readonly<Record<TableName, readonly ColumnSpec[]>> = {
  spectra: SPECTRA,
  features: FEATURES,
  lines: LINES,
  findings: FINDINGS,
  frames: FRAMES,
  targets: TARGETS,
}

/** What each table holds, one line each. */
export const TABLE_TITLES: Readonly<Record<TableName, string>> = {
  spectra: 'One row a spectrum: what it is, how sure, and whether it can be trusted',
  features: 'One row a spectrum and feature: strength, errors and part in the decision',
  lines: 'One row a line found without being told where to look',
  findings: 'One row a finding: what is wrong or worth knowing, with its figures',
  frames: 'One row a file: what kind of frame it is and its levels',
  targets: 'One row a target: all its spectra together, and what to observe again',
}
