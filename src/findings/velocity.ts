import type { FindingRule } from './types.ts'

/** What the measurement of velocities and of the wavelength scale can find. */
export const VELOCITY_RULES: Readonly<Record<string, FindingRule>> = {
  'air-vacuum-by-velocity': {
    level: 'doubt',
    meaning: 'The velocity differs from the known one by what air and vacuum wavelengths differ by',
    remedy: 'Find out which wavelengths the file holds; the difference is 82 to 85 km/s',
    unit: 'km/s',
    source: 'Ciddor 1996, Applied Optics 35, 1566',
  },
  'air-vacuum-possible': {
    level: 'note',
    meaning: 'The velocity is one that a mix-up of air and vacuum wavelengths would feign, and nothing else can tell',
    remedy: 'Compare with a known velocity, or with other stars of the night',
    unit: 'km/s',
    source: 'Ciddor 1996, Applied Optics 35, 1566',
  },
  'velocity-differs-from-known': {
    level: 'note',
    meaning: 'The velocity is not the known one',
    remedy: 'Another star, a binary, or a wavelength scale that is off',
    unit: 'km/s',
    source: 'common practice, no source',
  },
  'wavelength-scale-bent': {
    level: 'note',
    meaning: 'Parts of the spectrum have different velocities, so the wavelength scale is stretched or bent',
    remedy: 'Reduce again with an arc near in time; look at the residuals of the wavelength fit',
    unit: 'km/s',
    source: 'common practice, no source',
  },
}
