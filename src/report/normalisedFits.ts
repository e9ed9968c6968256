import type { Continuum } from '../continuum/types.ts'
import { encodeFits } from '../fits/write.ts'
import type { FitsCardInput } from '../fits/writeCard.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { RestFrame } from '../velocity/types.ts'
import { asciiText } from './asciiText.ts'
import type { Provenance } from './provenance.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** What a normalised spectrum is written from. */
export interface NormalisedInput {
  readonly file: string
  readonly sha256?: string
  readonly spectrum: Spectrum
  readonly continuum: Continuum
  readonly restFrame: RestFrame
  /** Without a date: the same input gives the same bytes. */
  readonly provenance: Omit<Provenance, 'date'>
}

/**
 * The normalised spectrum at rest as a FITS binary table, one sample a row: WAVE [Å, air, rest frame where the
 * velocity is trusted, else as observed], FLUX (flux ÷ continuum), ERR (noise ÷ continuum), CERR (error of the
 * continuum ÷ continuum), QUALITY (0 good, 1 not to be used). NaN where there is no value.
 */
export function normalisedFits({
  file,
  sha256,
  spectrum,
  continuum,
  restFrame,
  provenance,
}: NormalisedInput): Uint8Array {
  const n = spectrum.wavelength.length
  const shift = restFrame.trusted ? 1 + restFrame.velocity / SPEED_OF_LIGHT : 1
  const wave = spectrum.wavelength.map((w) => w / shift)
  const over = (values: Float64Array): Float64Array => values.map((v, i) => v / continuum.level[i])
  const quality = Uint8Array.from({ length: n }, (_, i) =>
    spectrum.usable[i] && Number.isFinite(continuum.level[i]) ? 0 : 1,
  )
  return encodeFits([
    {
      kind: 'table',
      name: 'SPECTRUM',
      rows: n,
      columns: [
        {
          letter: 'D',
          name: 'WAVE',
          unit: 'Angstrom',
          ucd: 'em.wl;obs.atmos',
          utype: 'spec:Data.SpectralAxis.Value',
          values: wave,
        },
        {
          letter: 'D',
          name: 'FLUX',
          ucd: 'phot.flux.density;arith.ratio;em.wl',
          utype: 'spec:Data.FluxAxis.Value',
          values: over(spectrum.flux),
        },
        {
          letter: 'D',
          name: 'ERR',
          ucd: 'stat.error;phot.flux.density;em.wl',
          utype: 'spec:Data.FluxAxis.Accuracy.StatError',
          values: over(continuum.noise),
        },
        {
          letter: 'D',
          name: 'CERR',
          ucd: 'stat.error.sys;phot.flux.density;em.wl',
          utype: 'spec:Data.FluxAxis.Accuracy.SysError',
          values: over(continuum.error),
        },
        {
          letter: 'B',
          name: 'QUALITY',
          ucd: 'meta.code.qual;phot.flux.density;em.wl',
          utype: 'spec:Data.FluxAxis.Quality',
          values: quality,
        },
      ],
      cards: cards({ file, spectrum, continuum, restFrame, provenance, ...(sha256 === undefined ? {} : { sha256 }) }),
    },
  ])
}

function cards({ file, sha256, spectrum, continuum, restFrame, provenance }: NormalisedInput): FitsCardInput[] {
  const { facts } = spectrum
  const card = (keyword: string, value: string | number | boolean | undefined, comment: string): FitsCardInput[] =>
    value === undefined ? [] : [{ keyword, value: typeof value === 'string' ? asciiText(value) : value, comment }]
  return [
    ...card('OBJECT', facts.object, 'as the header of the source has it'),
    ...card('RA', facts.ra, '[deg] as the header of the source has it'),
    ...card('DEC', facts.dec, '[deg] as the header of the source has it'),
    ...card('DATE-OBS', facts.dateObs, 'start of the exposure'),
    ...card('EXPTIME', facts.exposure, '[s] exposure time'),
    ...card('SRCFILE', file, 'file this was made from'),
    ...card('SRCHDU', spectrum.hdu, 'HDU of it, from 0'),
    ...card('SRCROW', spectrum.row, 'row of it, from 0'),
    ...card('SHA256', sha256, 'of the source'),
    ...card('SPECSYS', restFrame.trusted ? 'SOURCE' : 'TOPOCENT', 'frame of the wavelengths'),
    ...card('VELSTAR', restFrame.trusted ? restFrame.velocity : undefined, '[km/s] cz that was taken out'),
    ...card('VELERR', restFrame.trusted ? restFrame.error : undefined, '[km/s] its standard error'),
    ...card('MEDIUM', 'air', 'medium of the wavelengths'),
    ...card('PSEUDO', continuum.isPseudo, 'normalised by a pseudo-continuum'),
    ...card('CREATOR', `darkline ${provenance.version}`, 'program'),
    ...card('SETTINGS', provenance.settingsDigest, 'digest of the settings'),
  ]
}
