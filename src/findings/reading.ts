import type { Finding, FindingRule, Note } from './types.ts'

const note = (meaning: string, remedy?: string): FindingRule => ({
  level: 'note',
  meaning,
  ...(remedy === undefined ? {} : { remedy }),
})
const doubt = (meaning: string, remedy?: string): FindingRule => ({ ...note(meaning, remedy), level: 'doubt' })
const fault = (meaning: string, remedy?: string): FindingRule => ({ ...note(meaning, remedy), level: 'fault' })

/**
 * What the reading of a file can say: how something was understood, what was guessed, and what breaks the format
 * without stopping the reading.
 */
export const READING_RULES = {
  // The wavelength axis
  'medium-declared': note('the file says whether its wavelengths are in air or vacuum'),
  'medium-guessed': note(
    'the file does not say whether its wavelengths are in air or vacuum',
    'write CTYPE1 = AWAV or WAVE, or VACUUM, into the header; a wrong guess looks like a velocity of 83 km/s',
  ),
  'unit-guessed': note('the file gives no usable unit of its wavelengths', 'write CUNIT1 or TUNITn into the header'),
  'log-guessed': note('the values of the axis are taken for logarithms though nothing says so'),
  'step-disagrees': note('two cards give different wavelength steps', 'correct CD1_1 or CDELT1'),
  'no-reference-pixel': note('the reference pixel is not given'),
  'wavelengths-sorted': note('the wavelengths are not in order in the file'),
  'wavelengths-repeated': note('several samples have one wavelength'),
  'wavelength-missing': note('some samples have no wavelength'),
  'redshift-removed': note('the wavelengths were divided by 1 + z as the solution asks'),
  'velocity-frame': note('the wavelengths are corrected for the motion of the observer'),
  // Fluxes and planes
  'columns-guessed': doubt(
    'columns without telling names are taken for wavelength and flux',
    'name the columns WAVE and FLUX',
  ),
  'rows-guessed': note('the rows of an image are taken for spectra though nothing says so'),
  'layout-guessed': note('what the rows of an image hold is known from a survey, not from the file'),
  'uncertainty-guessed': note('uncertainties are taken for fractions of the flux by their size'),
  'many-flux-columns': note('several flux columns share one wavelength column'),
  'flux-scaled': note('the fluxes are too far from 1 to reckon with and are divided by a power of ten'),
  'absurd-flux': doubt(
    'samples far beyond what any detector counts are taken for missing',
    'mask them in the reduction',
  ),
  planes: note('one cell holds several spectra over one set of wavelengths'),
  'cells-cut': note('only part of the samples is filled'),
  'flags-ignored': note('flags that mark every sample are not used'),
  padding: note('samples without signal at the ends are taken for padding'),
  joined: note('orders or arms of one star were joined'),
  'join-step': note('the levels of joined orders or arms differ', 'divide by the blaze or the response first'),
  'spectra-limit': doubt('the file holds more spectra than are read', 'split the file'),
  // Header facts
  'impossible-value': note('a header value is impossible and left out', 'correct the header'),
  'placeholder-position': note('the position in the header is a placeholder'),
  'angle-judged': note('the unit of an angle was judged by its form or comment'),
  'longitude-judged': note('the sign of the longitude was judged'),
  'site-guessed': note('the place of the telescope is known from its name only'),
  'times-disagree': note('two cards give different times', 'check the clock of the camera computer'),
  'time-scale': note('times are not in UTC'),
  'airmass-derived': note('the airmass is derived from the zenith distance'),
  // The format
  'simple-false': note('the file says itself that it does not conform to the standard'),
  'duplicate-keyword': note('a keyword is given twice with different values; the first is used', 'remove one'),
  'lower-case-keyword': note('a keyword is written in lower case'),
  'value-indicator': note('a card lacks the sign of equality in its place'),
  'unquoted-text': note('a text value stands without quotes'),
  'unclosed-text': note('a text value has no closing quote'),
  'non-ascii-header': note('the header holds bytes outside printable ASCII'),
  'nul-in-header': note('the header holds NUL bytes'),
  'blank-on-floats': note('BLANK is given for floating-point data and ignored'),
  'no-padding': note('the last block of the file is not filled up'),
  'truncated-data': doubt('the file ends before its data do', 'copy the file again'),
  'gzip-check': doubt('the check value of the compressed file is wrong', 'copy the file again'),
  'gzip-cut': doubt('the compressed file ends early', 'copy the file again'),
  'inflate-cut': doubt('the compressed file holds more than is read of it'),
  heap: doubt('an array of a table lies outside its heap', 'copy the file again'),
  // Reasons why a file has no spectrum
  'no-data': fault('the file holds no image and no table with data'),
  'no-wavelength-axis': fault('nothing in the file gives wavelengths'),
  'pixel-axis': fault('the axis counts pixels: no wavelength solution', 'calibrate the wavelengths first'),
  'no-dispersion': fault('a row has no dispersion solution that can be read'),
  'no-rest-wavelength': fault('a velocity axis has no rest wavelength', 'write RESTWAV into the header'),
  'grism-incomplete': fault('a grism axis lacks its ruling or order'),
  'no-table': fault('the table of a tabulated axis is missing'),
  'unit-unknown': fault('the unit of the wavelengths is unknown', 'correct CUNIT1 or TUNITn'),
  'zero-step': fault('the wavelength step is 0'),
  'constant-wavelength': fault('all wavelengths are the same'),
  'no-finite-wavelength': fault('no wavelength is finite'),
  'wavelength-out-of-range': fault('the wavelengths are those of no optical or neighbouring spectrum'),
  'no-flux': fault('wavelengths stand without a flux: a list of lines, a mask or a response curve'),
  'empty-table': fault('the table has no rows'),
  'empty-cell': fault('the cell has no values'),
  'lengths-differ': fault('flux and wavelengths differ in number'),
  'too-large': fault('the file announces more data than one spectrum can have'),
  'too-few-samples': fault('there are too few samples for a spectrum'),
  cube: fault('the image is a data cube'),
  'two-dimensional': fault('the image is a two-dimensional frame, not a spectrum'),
} as const satisfies Readonly<Record<string, FindingRule>>

const RULES: Readonly<Record<string, FindingRule | undefined>> = READING_RULES

/**
 * A note of the reader as a finding, as grave as its rule says. What would have stopped the reading is a doubt where a
 * spectrum came of it all the same; a code without a rule is a note.
 */
export function noteFinding({ code, text }: Note): Finding {
  const level = RULES[code]?.level ?? 'note'
  return { level: level === 'fault' ? 'doubt' : level, code, text }
}
