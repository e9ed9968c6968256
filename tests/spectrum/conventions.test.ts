import { describe, expect, it } from 'vitest'
import type { FitsHduInput } from '../../src/fits/write.ts'
import { image, ramp, readMade, table } from './made.ts'

/** A linear axis of 50 samples of 2 Å from 4000 Å (4000 ... 4098), exact in binary. */
const N = 50
const WAVE = Float64Array.from({ length: N }, (_, i) => 4000 + 2 * i)
const FLUX = ramp(N, 100)
const LINEAR = { CTYPE1: 'LINEAR', CUNIT1: 'Angstrom', CRVAL1: 4000, CDELT1: 2, CRPIX1: 1 }

interface Expected {
  readonly first?: number
  readonly last?: number
  readonly flux?: number
  readonly samples?: number
  readonly medium?: string
  readonly how?: string
  readonly uncertainty?: string
  readonly note?: string
  readonly count?: number
}

/** Every file holds the same wavelengths, so the expected values are exact arithmetic unless a case says else. */
const CASES: readonly {
  name: string
  hdus: readonly FitsHduInput[]
  companion?: readonly FitsHduInput[]
  expected: Expected
}[] = [
  {
    name: 'a linear axis',
    hdus: [image(FLUX, LINEAR)],
    expected: { medium: 'air', how: 'guessed', note: 'medium-guessed' },
  },
  {
    name: 'a linear axis along the second of two dimensions',
    hdus: [
      image(FLUX, { CTYPE2: 'LINEAR', CUNIT2: 'Angstrom', CRVAL2: 4000, CDELT2: 2, CRPIX2: 1 }, { dimensions: [1, N] }),
    ],
    expected: {},
  },
  {
    name: 'CD1_1 that wins over CDELT1',
    hdus: [image(FLUX, { ...LINEAR, CDELT1: 1, CD1_1: 2 })],
    expected: { note: 'step-disagrees' },
  },
  { name: 'PC1_1 times CDELT1', hdus: [image(FLUX, { ...LINEAR, CDELT1: 4, PC1_1: 0.5 })], expected: {} },
  {
    name: 'no unit, in nm by its values',
    hdus: [image(FLUX, { CRVAL1: 400, CDELT1: 0.2 })],
    expected: { note: 'unit-guessed' },
  },
  {
    name: 'no unit, in µm by its values',
    hdus: [image(FLUX, { CRVAL1: 0.4, CDELT1: 0.0002 })],
    expected: { note: 'unit-guessed' },
  },
  {
    name: "a unit that is none ('deg') beside attribute cards that name one",
    hdus: [image(FLUX, { ...LINEAR, CUNIT1: 'deg', WAT1_001: 'wtype=linear label=Wavelength units=angstroms' })],
    expected: {},
  },
  {
    name: 'units of attribute cards in nm',
    hdus: [
      image(FLUX, {
        CTYPE1: 'LINEAR',
        CRVAL1: 400,
        CDELT1: 0.2,
        CRPIX1: 1,
        WAT1_001: 'wtype=linear label=Wavelength units=nanometers',
      }),
    ],
    expected: {},
  },
  {
    name: 'AWAV, declared air',
    hdus: [image(FLUX, { ...LINEAR, CTYPE1: 'AWAV' })],
    expected: { medium: 'air', how: 'declared', note: 'medium-declared' },
  },
  {
    name: 'WAVE without a unit although the standard says m',
    hdus: [image(FLUX, { CTYPE1: 'WAVE', CRVAL1: 4000, CDELT1: 2, CRPIX1: 1 })],
    expected: { medium: 'vacuum', how: 'declared', note: 'unit-guessed' },
  },
  {
    name: 'WAVE in m by default',
    hdus: [image(FLUX, { CTYPE1: 'WAVE', CRVAL1: 4e-7, CDELT1: 2e-10, CRPIX1: 1 })],
    expected: { medium: 'vacuum' },
  },
  {
    name: 'VACUUM = T before a silent axis',
    hdus: [image(FLUX, { ...LINEAR, VACUUM: true })],
    expected: { medium: 'vacuum', how: 'declared' },
  },
  {
    name: 'a remark that says vacuum',
    hdus: [
      {
        ...image(FLUX, LINEAR),
        cards: [...(image(FLUX, LINEAR).cards ?? []), { keyword: 'HISTORY', comment: 'All wavelengths are in vacuum' }],
      },
    ],
    expected: { medium: 'vacuum', how: 'declared' },
  },
  {
    name: 'an alternate spectral description beside pixels',
    hdus: [
      image(FLUX, {
        CTYPE1: 'PIXEL',
        CRVAL1: 1,
        CDELT1: 1,
        CRPIX1: 1,
        CTYPE1A: 'AWAV',
        CUNIT1A: 'nm',
        CRVAL1A: 400,
        CDELT1A: 0.2,
        CRPIX1A: 1,
      }),
    ],
    expected: { medium: 'air', how: 'declared' },
  },
  {
    name: 'flux and wavelengths in two extensions',
    hdus: [image(FLUX, {}, { name: 'FLUX' }), image(WAVE, { BUNIT: 'Angstrom' }, { name: 'WAVELENGTH' })],
    expected: {},
  },
  {
    name: 'log10 of the wavelengths in an extension',
    hdus: [image(FLUX, {}), image(WAVE.map(Math.log10), {}, { name: 'LOGLAM' })],
    expected: {},
  },
  {
    name: 'flux, error and flags in extensions, described in the primary header',
    hdus: [
      image(new Float64Array(0), LINEAR, { dimensions: [] }),
      image(FLUX, {}, { name: 'SCI' }),
      image(
        FLUX.map((v) => v / 10),
        {},
        { name: 'ERR' },
      ),
      image(
        FLUX.map((_, i) => (i === 3 ? 4 : 0)),
        {},
        { name: 'DQ' },
      ),
    ],
    expected: { uncertainty: 'sigma', count: 1 },
  },
  {
    name: 'rows named wavelength, flux and inverse variance',
    hdus: [
      image(
        Float64Array.of(...WAVE, ...FLUX, ...FLUX),
        { ARRAY1: 'WAVELENGTH', ARRAY2: 'FLUX', ARRAY3: 'IVAR' },
        { dimensions: [N, 3] },
      ),
    ],
    expected: { uncertainty: 'inverse variance', count: 1 },
  },
  {
    name: 'two rows, wavelength and flux, without any name',
    hdus: [image(Float64Array.of(...WAVE, ...FLUX), {}, { dimensions: [N, 2] })],
    expected: { count: 1, note: 'layout-guessed' },
  },
  {
    name: 'a companion file with the wavelengths in a table',
    hdus: [image(FLUX, {})],
    companion: [table(N, [{ name: 'lambda', letter: 'D', unit: 'Angstrom', values: WAVE }])],
    expected: {},
  },
  {
    name: 'a companion file with the wavelengths in an image',
    hdus: [table(N, [{ name: 'flux', letter: 'D', values: FLUX }])],
    companion: [image(WAVE, { BUNIT: 'Angstrom' })],
    expected: {},
  },
  {
    name: 'a table of rows with a photon energy',
    hdus: [
      table(N, [
        { name: 'ENERGY', letter: 'D', unit: 'eV', values: WAVE.map((w) => 12398.419843320026 / w) },
        { name: 'FLUX', letter: 'E', values: FLUX },
      ]),
    ],
    expected: { medium: 'vacuum', how: 'declared' },
  },
  {
    name: 'a table of rows in THz',
    hdus: [
      table(N, [
        { name: 'frequency', letter: 'D', unit: 'THz', values: WAVE.map((w) => 2997924.58 / w) },
        { name: 'flux_density', letter: 'E', unit: 'Jy', values: FLUX },
      ]),
    ],
    expected: { medium: 'vacuum' },
  },
  {
    name: 'wavelengths in air by their UCD',
    hdus: [
      table(N, [
        { name: 'w', letter: 'D', unit: 'nm', ucd: 'em.wl;obs.atmos', values: WAVE.map((w) => w / 10) },
        { name: 'FLUX', letter: 'E', values: FLUX },
      ]),
    ],
    expected: { medium: 'air', how: 'declared' },
  },
  {
    name: 'wavelengths in vacuum by their name',
    hdus: [
      table(N, [
        { name: 'LAMBDA_VAC', letter: 'D', unit: 'Angstrom', values: WAVE },
        { name: 'FLUX', letter: 'E', values: FLUX },
      ]),
    ],
    expected: { medium: 'vacuum', how: 'declared' },
  },
  {
    name: 'two unnamed columns',
    hdus: [
      table(N, [
        { name: 'col1', letter: 'D', values: WAVE },
        { name: 'col2', letter: 'D', values: FLUX },
      ]),
    ],
    expected: { note: 'columns-guessed' },
  },
  {
    name: 'two extractions of one star in one table, of which the first counts',
    hdus: [
      table(N, [
        { name: 'OPT_WAVE', letter: 'D', values: WAVE },
        { name: 'OPT_COUNTS', letter: 'D', values: FLUX },
        { name: 'OPT_COUNTS_IVAR', letter: 'D', values: FLUX },
        { name: 'BOX_WAVE', letter: 'D', values: WAVE },
        { name: 'BOX_COUNTS', letter: 'D', values: FLUX.map((v) => 2 * v) },
      ]),
    ],
    expected: { uncertainty: 'inverse variance', count: 1 },
  },
  {
    name: 'one row whose cells hold the arrays, cut by a count',
    hdus: [
      table(1, [
        { name: 'NELEM', letter: 'J', values: [N] },
        {
          name: 'WAVELENGTH',
          letter: 'D',
          unit: 'Angstrom',
          repeat: N + 5,
          values: Float64Array.of(...WAVE, 0, 0, 0, 0, 0),
        },
        { name: 'FLUX', letter: 'E', repeat: N + 5, values: Float64Array.of(...FLUX, 0, 0, 0, 0, 0) },
      ]),
    ],
    expected: { note: 'cells-cut', samples: N },
  },
  {
    name: 'start and step columns',
    hdus: [
      table(1, [
        { name: 'WAVELENGTH', letter: 'D', unit: 'nm', values: [400] },
        { name: 'DELTAW', letter: 'D', unit: 'nm', values: [0.2] },
        { name: 'FLUX', letter: 'E', repeat: N, values: FLUX },
      ]),
    ],
    expected: {},
  },
  {
    name: 'cells described by their own axis cards',
    hdus: [
      table(1, [{ name: 'FLUX', letter: 'E', repeat: N, values: FLUX }], {
        cards: { '1CTYP1': 'AWAV', '1CUNI1': 'Angstrom', '1CRVL1': 4000, '1CDLT1': 2, '1CRPX1': 1 },
      }),
    ],
    expected: { medium: 'air', how: 'declared' },
  },
  {
    name: 'fluxes of several stars in every row',
    hdus: [
      table(N, [
        { name: 'WAVE', letter: 'D', unit: 'Angstrom', values: WAVE },
        { name: 'FLUX', letter: 'E', repeat: 2, values: FLUX.reduce<number[]>((all, v) => [...all, v, 2 * v], []) },
      ]),
    ],
    expected: { count: 2, note: 'many-flux-columns' },
  },
  {
    name: 'wavelengths that fall',
    hdus: [image(FLUX.slice().reverse(), { ...LINEAR, CRVAL1: 4098, CDELT1: -2 })],
    expected: {},
  },
  {
    name: 'a tabulated axis',
    hdus: [
      image(FLUX, {
        CTYPE1: 'WAVE-TAB',
        CUNIT1: 'Angstrom',
        CRVAL1: 1,
        CDELT1: 1,
        CRPIX1: 1,
        PS1_0: 'WCS-TABLE',
        PS1_1: 'COORDS',
        PV1_1: 1,
        PV1_2: 1,
        PV1_3: 1,
      }),
      table(1, [{ name: 'COORDS', letter: 'D', repeat: N, shape: [1, N], values: WAVE }], {
        name: 'WCS-TABLE',
        cards: { EXTVER: 1 },
      }),
    ],
    expected: { medium: 'vacuum', how: 'declared', count: 1 },
  },
  {
    name: 'a linear solution a row, in nm',
    hdus: [
      image(
        Float64Array.of(...FLUX, ...FLUX),
        {
          CTYPE1: 'MULTISPE',
          WCSDIM: 2,
          WAT0_001: 'system=multispec',
          WAT1_001: 'wtype=multispec label=Wavelength units=nanometers',
          WAT2_001: 'wtype=multispec spec1 = "1 1 0 400. 0.2 50 0. 1. 2." spec2 = "2 2 0 ',
          WAT2_002: '410. 0.2 50 0. 3. 4."',
        },
        { dimensions: [N, 2] },
      ),
    ],
    expected: { count: 2 },
  },
  {
    name: 'a log10 solution a row, with a redshift taken out',
    hdus: [
      image(
        Float64Array.of(...FLUX, ...FLUX),
        {
          CTYPE1: 'MULTISPE',
          WAT0_001: 'system=multispec',
          WAT1_001: 'wtype=multispec label=Wavelength units=angstroms',
          WAT2_001: `wtype=multispec spec1 = "1 1 1 ${Math.log10(8000)} 1e-4 50 1. 1. 2." `,
          WAT2_002: 'spec2 = "2 2 1 3.7 1e-4 50 0. 3. 4."',
        },
        { dimensions: [N, 2] },
      ),
    ],
    // 8000 Å / (1 + 1) and 49 steps of 1e-4 in log10.
    expected: { count: 2, last: 4000 * 10 ** 0.0049, note: 'redshift-removed' },
  },
]

describe('readSpectra', () => {
  it.each(CASES)('understands $name', ({ hdus, companion, expected }) => {
    const result = readMade(hdus, companion)
    expect(result.error).toBeUndefined()
    const [spectrum] = result.spectra
    const { first = 4000, last = 4098, flux = 100, samples = N } = expected
    expect(spectrum.asStored.samples).toBe(samples)
    expect(spectrum.asStored.first).toBeCloseTo(first, 8)
    expect(spectrum.asStored.last).toBeCloseTo(last, 8)
    expect(spectrum.asStored.fluxFirst).toBe(flux)
    expect(result.spectra).toHaveLength(expected.count ?? 1)
    if (expected.medium) expect(spectrum.medium).toBe(expected.medium)
    if (expected.how) expect(spectrum.mediumHow).toBe(expected.how)
    expect(spectrum.uncertainty).toBe(expected.uncertainty ?? 'none')
    if (expected.note) expect(spectrum.notes.map((note) => note.code)).toContain(expected.note)
  })

  it('converts vacuum wavelengths to air and keeps what the file has', () => {
    const [spectrum] = readMade([image(FLUX, { ...LINEAR, CTYPE1: 'WAVE' })]).spectra
    // Ciddor 1996: 4000 Å in vacuum is 3998.8693 Å in air (checked against the table of refractive indices there).
    expect(spectrum.wavelength[0]).toBeCloseTo(3998.8693, 4)
    expect(spectrum.asStored.first).toBe(4000)
  })
})

const REFUSED: readonly { name: string; hdus: readonly FitsHduInput[]; code: string; frame?: boolean }[] = [
  { name: 'an image without an axis', hdus: [image(FLUX, {})], code: 'no-wavelength-axis' },
  { name: 'an axis of pixels', hdus: [image(FLUX, { CTYPE1: 'PIXEL', CRVAL1: 1, CDELT1: 1 })], code: 'pixel-axis' },
  { name: 'pixels without a name', hdus: [image(FLUX, { CRVAL1: 1, CDELT1: 1 })], code: 'pixel-axis' },
  { name: 'a step of 0', hdus: [image(FLUX, { ...LINEAR, CDELT1: 0 })], code: 'zero-step' },
  { name: 'a unit that does not exist', hdus: [image(FLUX, { ...LINEAR, CUNIT1: 'furlong' })], code: 'unit-unknown' },
  {
    name: 'velocities without a rest wavelength',
    hdus: [image(FLUX, { ...LINEAR, CTYPE1: 'VELO', CUNIT1: 'm/s' })],
    code: 'no-rest-wavelength',
  },
  {
    name: 'radio frequencies',
    hdus: [image(FLUX, { CTYPE1: 'FREQ', CUNIT1: 'MHz', CRVAL1: 1420, CDELT1: 0.01, CRPIX1: 1 })],
    code: 'wavelength-out-of-range',
  },
  { name: 'a negative range', hdus: [image(FLUX, { ...LINEAR, CRVAL1: -50 })], code: 'wavelength-out-of-range' },
  {
    name: 'a list of lines',
    hdus: [
      table(3, [
        { name: 'WAVE', letter: 'D', unit: 'Angstrom', values: [4000, 4100, 4300] },
        { name: 'ION', letter: 'A', values: ['He', 'Ar', 'Ne'] },
      ]),
    ],
    code: 'no-flux',
  },
  {
    name: 'a line mask',
    hdus: [
      table(N, [
        { name: 'lambda', letter: 'D', values: WAVE },
        { name: 'contrast', letter: 'D', values: FLUX },
      ]),
    ],
    code: 'no-flux',
  },
  {
    name: 'a response curve',
    hdus: [
      table(N, [
        { name: 'WAVELENGTH', letter: 'D', unit: 'Angstrom', values: WAVE },
        { name: 'THROUGHPUT', letter: 'D', values: FLUX },
        { name: 'ERROR', letter: 'D', values: FLUX },
      ]),
    ],
    code: 'no-flux',
  },
  {
    name: 'lines with intensities that scatter',
    hdus: [
      table(N, [
        {
          name: 'WAVE',
          letter: 'D',
          unit: 'Angstrom',
          values: WAVE.map((w, i) => w + 300 * Math.abs(Math.sin(i * i)) + 40 * i),
        },
        { name: 'INTENSITY', letter: 'D', values: FLUX },
      ]),
    ],
    code: 'no-flux',
  },
  {
    name: 'a cube',
    hdus: [
      image(
        ramp(9 * 8 * 20),
        { CTYPE3: 'WAVE', CRVAL3: 4000, CDELT3: 1, CUNIT3: 'Angstrom' },
        { dimensions: [9, 8, 20] },
      ),
    ],
    code: 'cube',
  },
  { name: 'a raw frame', hdus: [image(ramp(N * N), {}, { dimensions: [N, N] })], code: 'two-dimensional', frame: true },
  {
    name: 'a rectified long-slit frame',
    hdus: [
      image(ramp(N * N), { ...LINEAR, CTYPE2: 'LINEAR', CRVAL2: 1, CDELT2: 1, 'DC-FLAG': 0 }, { dimensions: [N, N] }),
    ],
    code: 'two-dimensional',
    frame: true,
  },
  {
    name: 'wavelength against position',
    hdus: [
      image(
        ramp(N * 4),
        { CTYPE1: 'LAMBDA', CUNIT1: 'Angstrom', CRVAL1: 4000, CDELT1: 2, CRPIX1: 1, CTYPE2: 'ANGLE', CUNIT2: 'deg' },
        { dimensions: [N, 4] },
      ),
    ],
    code: 'two-dimensional',
    frame: true,
  },
  {
    name: 'a table without rows',
    hdus: [
      table(0, [
        { name: 'WAVE', letter: 'D', values: [] },
        { name: 'FLUX', letter: 'D', values: [] },
      ]),
    ],
    code: 'empty-table',
  },
  {
    name: 'wavelengths that are all missing',
    hdus: [
      table(N, [
        { name: 'WAVE', letter: 'D', unit: 'nm', values: WAVE.map(() => NaN) },
        { name: 'FLUX', letter: 'D', values: FLUX },
      ]),
    ],
    code: 'no-finite-wavelength',
  },
  { name: 'nothing but a header', hdus: [image(new Float64Array(0), {}, { dimensions: [] })], code: 'no-data' },
]

describe('readSpectra, without a spectrum', () => {
  it.each(REFUSED)('says why of $name', ({ hdus, code, frame = false }) => {
    const result = readMade(hdus)
    expect(result.spectra).toHaveLength(0)
    expect(result.error?.code).toBe(code)
    expect(result.error?.where.file).toBe('made.fits')
    expect(result.frame2d !== undefined).toBe(frame)
    // The grammar of messages: NAME requires RULE, got VALUE, without a full stop.
    expect(result.error?.message).toMatch(/ requires .*, got [^.]*(\.\d[^.]*)*$/)
  })
})
