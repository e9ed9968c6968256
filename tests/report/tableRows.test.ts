import { describe, expect, it } from 'vitest'
import { COLUMNS, TABLE_TITLES } from '../../src/report/columns.ts'
import { findingRows } from '../../src/report/findingRows.ts'
import { frameRows } from '../../src/report/frameRows.ts'
import { roundedNumber, TABLE_NAMES } from '../../src/report/row.ts'
import { spectraRows } from '../../src/report/spectraRows.ts'
import { tableRows } from '../../src/report/tableRows.ts'
import { targetRows } from '../../src/report/targetRows.ts'
import { madeNight, madeOutcome, UNREADABLE } from '../support/madeNight.ts'

/** The contract, typed anew from the project's design ("Tables"): other people's scripts depend on it. */
const CONTRACT = {
  spectra:
    'file, hdu, row, object, target, setup, ra_deg, dec_deg, date_obs, mjd_mid, exptime_s, airmass, wavelength_min, wavelength_max, samples, medium, resolution_fwhm, snr_blue, snr_visual, snr_red, velocity_kms, velocity_err_kms, barycentric_correction_kms, velocity_barycentric_kms, type_state, spectral_type, luminosity_class, type_number, type_number_err, type_low68, type_high68, type_low95, type_high95, luminosity_number, prob_dwarf, prob_giant, prob_supergiant, peculiar, expected_type, expected_probability, separation_arcsec, quality, findings, sha256',
  features:
    'file, hdu, row, object, feature, species, wavelength_rest, unit, method, status, reason, ew, ew_err_noise, ew_err_continuum, ew_err, limit_3sigma, centre, centre_err, fwhm, depth, expected, expected_scatter, pull, share',
  lines: 'file, hdu, row, object, centre, centre_err, kind, ew, ew_err, significance, fwhm, origin, candidates',
  findings: 'file, hdu, row, object, level, code, value, limit, unit, text',
  frames:
    'file, kind, kind_how, setup, object, instrument, date_obs, mjd_mid, exptime_s, ra_deg, dec_deg, airmass, width, height, binning, level_median, level_p99, level_max, noise, saturated_fraction, arc_lines, spectra, quality, findings',
  targets:
    'target, spectra, spectral_type, luminosity_class, type_low68, type_high68, expected_type, expected_probability, snr_wanted, snr_reached, observe_again, reason, exposure_needed_s, urgency',
} as const

/** Unit strings of VOUnits 1.0 that the tables use. */
const UNITS = ['', 'deg', 'd', 's', 'Angstrom', 'km/s', 'arcsec', 'pixel', 'adu']

describe('COLUMNS', () => {
  it.each(TABLE_NAMES)('%s has the columns of the contract in its order', (name) => {
    expect(COLUMNS[name].map((c) => c.name).join(', ')).toBe(CONTRACT[name])
  })

  it('describes every column in a sentence without full stop, with a known unit and a UCD', () => {
    for (const column of TABLE_NAMES.flatMap((name) => COLUMNS[name])) {
      expect(column.description, column.name).toMatch(/^[A-Za-z0-9].*[^.]$/)
      expect(UNITS, column.name).toContain(column.unit)
      expect(column.ucd, column.name).toMatch(/^[a-zA-Z0-9.]+(;[a-zA-Z0-9.]+)*$/)
    }
    expect(Object.keys(TABLE_TITLES)).toEqual([...TABLE_NAMES])
  })
})

describe('roundedNumber', () => {
  const column = { ...COLUMNS.spectra[6], digits: 2 }
  it('keeps the decimals of its column, or the significant digits', () => {
    expect(roundedNumber(3.14159, column)).toBe(3.14)
    expect(roundedNumber(0.000012345, { ...column, digits: 3, significant: true })).toBe(0.0000123)
  })
  it('gives nothing for what is no number, and never a negative zero', () => {
    for (const value of [NaN, Infinity, undefined]) expect(roundedNumber(value, column)).toBeUndefined()
    expect(Object.is(roundedNumber(-0.001, column), 0)).toBe(true)
  })
})

describe('tableRows', () => {
  const { outcomes, night } = madeNight(9)

  it.each(TABLE_NAMES)('every row of %s has exactly its columns', (name) => {
    for (const row of tableRows(name, outcomes, night))
      expect(Object.keys(row)).toEqual(COLUMNS[name].map((c) => c.name))
  })

  it('has a row a spectrum, a spectrum and feature, a file, and a target or missed target', () => {
    expect(tableRows('spectra', outcomes, night)).toHaveLength(9)
    expect(tableRows('features', outcomes, night)).toHaveLength(9 * 18)
    expect(tableRows('frames', outcomes, night)).toHaveLength(outcomes.length)
    expect(tableRows('targets', outcomes, night)).toHaveLength(10)
    expect(tableRows('targets', outcomes)).toEqual([])
  })

  it('adds to a spectrum what only the night knows', () => {
    const [row] = spectraRows(outcomes[4], () => night.spectra[4])
    expect(row).toMatchObject({
      target: 'Made 5',
      expected_type: 'A2',
      expected_probability: 0.0000021,
      quality: 'doubtful',
    })
    expect(row.findings).toBe('not-as-expected')
    expect(spectraRows(outcomes[4])[0]).toMatchObject({ expected_type: undefined, quality: 'usable' })
  })

  it('leaves out a velocity that is not trusted', () => {
    const outcome = madeOutcome()
    const spectrum = { ...outcome.spectra[0], restFrame: { velocity: 0, trusted: false, how: 'none' as const } }
    expect(spectraRows({ ...outcome, spectra: [spectrum] })[0]).toMatchObject({ velocity_kms: undefined })
  })

  it('loses no file: one that could not be read has a frame row and a finding with its place', () => {
    expect(frameRows(UNREADABLE)[0]).toMatchObject({
      kind: 'unknown',
      spectra: 0,
      quality: 'unusable',
      findings: 'header-truncated',
    })
    expect(findingRows(UNREADABLE)).toEqual([
      {
        file: 'night/broken, "half".fits',
        hdu: 0,
        row: undefined,
        object: undefined,
        level: 'fault',
        code: 'header-truncated',
        value: undefined,
        limit: undefined,
        unit: undefined,
        text: 'HDU 0, byte 960, header requires an END card, got the end of the file',
      },
    ])
  })

  it('worsens a frame by what the night found of it', () => {
    const found = { level: 'doubt', code: 'odd-bias', text: 'the bias stands out' } as const
    expect(frameRows(outcomes[10], [found])[0]).toMatchObject({ quality: 'doubtful', findings: 'odd-bias' })
  })

  it('lists what was not observed as to be observed', () => {
    expect(targetRows(night).at(-1)).toMatchObject({ target: 'Made, never reached', spectra: 0, observe_again: 'yes' })
  })

  it('does not change its input', () => {
    const before = JSON.stringify(outcomes)
    for (const name of TABLE_NAMES) tableRows(name, outcomes, night)
    expect(JSON.stringify(outcomes)).toBe(before)
  })
})
