import type { CoverRules } from './types.ts'

/** Calibrations each science set-up wants; overridable in the settings file. */
export const COVER_RULES: CoverRules = {
  bias: {
    value: 5,
    unit: 'frames',
    reason: 'five bring the noise of the mean below that of a frame by half',
    source: 'common',
  },
  dark: {
    value: 0,
    unit: 'frames',
    reason: 'cooled detectors need none; 3 where the detector glows',
    source: 'common',
  },
  darkExposure: {
    value: 1800,
    unit: 's',
    reason: 'longer science exposures gather dark counts that matter',
    source: 'common',
  },
  flat: { value: 3, unit: 'frames', reason: 'fewer cannot be cleaned of cosmic-ray hits', source: 'common' },
  flatLevel: {
    value: 1000,
    unit: 'counts',
    reason: 'a weaker flat adds more noise than it takes out',
    source: 'common',
  },
  arc: { value: 1, unit: 'frames', reason: 'no wavelength scale without an arc', source: 'common' },
  arcGapHours: { value: 2, unit: 'h', reason: 'a hanging spectrograph bends as the telescope moves', source: 'common' },
  standard: {
    value: 1,
    unit: 'frames',
    reason: 'response and telluric bands come from a standard star',
    source: 'common',
  },
}
