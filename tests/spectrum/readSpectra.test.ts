import { describe, expect, it } from 'vitest'
import { FormatError } from '../../src/errors.ts'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import type { ByteSource } from '../../src/fits/types.ts'
import { encodeFits } from '../../src/fits/write.ts'
import { seededUniform } from '../../src/numeric/random.ts'
import { describeSpectrum } from '../../src/spectrum/describe.ts'
import { joinOrders } from '../../src/spectrum/joinOrders.ts'
import { readSpectra } from '../../src/spectrum/readSpectra.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'
import { image, ramp, readMade, table } from './made.ts'

const N = 60
const WAVE = Float64Array.from({ length: N }, (_, i) => 4000 + 2 * i)
const LINEAR = { CTYPE1: 'AWAV', CUNIT1: 'Angstrom', CRVAL1: 4000, CDELT1: 2, CRPIX1: 1 }

describe('readSpectra', () => {
  it('sorts wavelengths, keeps the first of repeated ones, and leaves samples without one out', () => {
    const wave = Float64Array.from(WAVE)
    ;[wave[3], wave[7]] = [wave[7], wave[3]]
    wave[20] = wave[21]
    wave[30] = NaN
    const [spectrum] = readMade([
      table(N, [
        { name: 'WAVE', letter: 'D', unit: 'Angstrom', values: wave },
        { name: 'FLUX', letter: 'D', values: ramp(N) },
      ]),
    ]).spectra
    expect(spectrum.wavelength).toHaveLength(N - 2)
    expect(spectrum.wavelength.every((w, i) => i === 0 || w > spectrum.wavelength[i - 1])).toBe(true)
    // Sample 7 of the file (flux 8) holds the wavelength that belongs in place 3.
    expect(spectrum.flux[3]).toBe(8)
    expect(spectrum.asStored.samples).toBe(N)
    const codes = spectrum.notes.map((note) => note.code)
    for (const code of ['wavelengths-sorted', 'wavelengths-repeated', 'wavelength-missing'])
      expect(codes).toContain(code)
  })

  it.each([
    ['STAT_ERROR', [0.5, 0.5], 'sigma', 0.5],
    ['VARIANCE', [0.25, 0.25], 'variance', 0.5],
    ['IVAR', [4, 4], 'inverse variance', 0.5],
    ['REL_ERR', [0.5, 0.5], 'relative', 0.5],
  ])('turns %s into one sigma', (name, values, kind, expected) => {
    const plane = new Float64Array(N).fill(values[0])
    const [spectrum] = readMade([
      table(N, [
        { name: 'WAVE', letter: 'D', unit: 'Angstrom', values: WAVE },
        { name: 'FLUX', letter: 'D', values: new Float64Array(N).fill(1) },
        { name, letter: 'D', values: plane },
      ]),
    ]).spectra
    expect(spectrum.uncertainty).toBe(kind)
    expect(spectrum.sigma?.[5]).toBeCloseTo(expected, 12)
  })

  it('masks what the file flags, what is not finite and what is padding', () => {
    const flux = ramp(N)
    flux.fill(0, 0, 4)
    flux[20] = NaN
    const [spectrum] = readMade([
      table(N, [
        { name: 'WAVE', letter: 'D', unit: 'Angstrom', values: WAVE },
        { name: 'FLUX', letter: 'D', values: flux },
        { name: 'IVAR', letter: 'D', values: flux.map((_, i) => (i === 40 ? 0 : 1)) },
        { name: 'QUALITY', letter: 'J', values: flux.map((_, i) => (i === 50 ? 8 : 0)) },
      ]),
    ]).spectra
    const masked = [...spectrum.usable].flatMap((value, i) => (value === 0 ? [i] : []))
    expect(masked).toEqual([0, 1, 2, 3, 20, 40, 50])
  })

  it('turns flags round where the header says that 1 is good', () => {
    const [spectrum] = readMade([
      table(N, [
        { name: 'WAVE', letter: 'D', unit: 'Angstrom', values: WAVE },
        { name: 'FLUX', letter: 'D', values: ramp(N) },
        {
          name: 'DATAQUAL',
          letter: 'I',
          comment: 'Data quality: 1=good, 0=bad',
          values: WAVE.map((_, i) => (i === 5 ? 0 : 1)),
        },
      ]),
    ]).spectra
    expect([...spectrum.usable].indexOf(0)).toBe(5)
  })

  it('takes uncertainties for fractions of the flux when as σ they would be absurd, and says so', () => {
    const [spectrum] = readMade([
      image(new Float64Array(N).fill(50_000), LINEAR, { name: 'FLUX' }),
      image(new Float64Array(N).fill(0.01), {}, { name: 'SIGMA' }),
    ]).spectra
    expect(spectrum.uncertainty).toBe('relative')
    expect(spectrum.sigma?.[0]).toBe(500)
    expect(spectrum.notes.map((note) => note.code)).toContain('uncertainty-guessed')
  })

  it('names every fibre by the table that lists them, and knows the sky fibres', () => {
    const { spectra } = readMade([
      image(
        ramp(3 * N),
        { ...LINEAR, COEFF0: Math.log10(4000), COEFF1: 1e-4, CTYPE1: '', CRVAL1: Math.log10(4000), CDELT1: 1e-4 },
        { dimensions: [N, 3] },
      ),
      table(
        3,
        [
          { name: 'NAME', letter: 'A', values: ['star one', 'blank', 'star two'] },
          { name: 'OBJTYPE', letter: 'A', values: ['STAR', 'SKY', 'STAR'] },
          { name: 'RA', letter: 'D', values: [10, 11, 12] },
          { name: 'DEC', letter: 'D', values: [-1, -2, -3] },
        ],
        { name: 'FIBERMAP' },
      ),
    ])
    expect(spectra.map(({ facts, role }) => [facts.object, facts.dec, role])).toEqual([
      ['star one', -1, 'star'],
      ['blank', -2, 'sky'],
      ['star two', -3, 'star'],
    ])
  })

  it('stops at the number of spectra that is asked for, and says so', () => {
    const bytes = encodeFits([
      table(20, [
        { name: 'WAVE', letter: 'D', repeat: N, values: Float64Array.from({ length: 20 * N }, (_, i) => WAVE[i % N]) },
        { name: 'FLUX', letter: 'D', repeat: N, values: ramp(20 * N) },
      ]),
    ])
    const source = memorySource(bytes)
    const { spectra } = readSpectra(openFits(source), source, { keywords: KEYWORDS, maxSpectra: 3 })
    expect(spectra.map(({ row }) => row)).toEqual([0, 1, 2])
    expect(spectra[0].notes.map((note) => note.code)).toContain('spectra-limit')
  })

  it('reads no more of a large file than its headers and the spectrum', () => {
    const bytes = encodeFits([
      image(ramp(N), LINEAR),
      image(new Float64Array(0), {}, { dimensions: [], name: 'EMPTY' }),
    ])
    // A third HDU announces 400 million bytes that nobody may read: it is a mask by its name.
    const text = [
      "XTENSION= 'IMAGE   '",
      'BITPIX  = 8',
      'NAXIS   = 2',
      'NAXIS1  = 20000',
      'NAXIS2  = 20000',
      'PCOUNT  = 0',
      'GCOUNT  = 1',
      "EXTNAME = 'MASK    '",
      'END',
    ]
    const header = Buffer.from(
      text
        .map((card) => card.padEnd(80))
        .join('')
        .padEnd(2880),
      'latin1',
    )
    const size = bytes.length + header.length + Math.ceil(4e8 / 2880) * 2880
    let read = 0
    const source: ByteSource = {
      size,
      read(offset, length) {
        read += length
        const out = new Uint8Array(length)
        const all = Buffer.concat([bytes, header])
        if (offset < all.length) out.set(all.subarray(offset, Math.min(all.length, offset + length)))
        return out
      },
    }
    const { spectra } = readSpectra(openFits(source), source, { keywords: KEYWORDS })
    expect(spectra).toHaveLength(1)
    // Headers of at most 4 + 4 + 4 blocks are looked at, and 480 bytes of flux.
    expect(read).toBeLessThan(20 * 2880)
  })

  it('keeps what is wrong with another HDU with the spectrum', () => {
    const bytes = encodeFits([
      image(ramp(N), LINEAR),
      table(N, [
        { name: 'WAVE', letter: 'D', values: WAVE },
        { name: 'FLUX', letter: 'D', values: ramp(N) },
      ]),
    ])
    const source = memorySource(bytes.subarray(0, bytes.length - 2880))
    const { spectra } = readSpectra(openFits(source), source, { keywords: KEYWORDS })
    expect(spectra).toHaveLength(1)
    expect(spectra[0].notes.map((note) => note.code)).toContain('truncated-data')
  })
})

describe('describeSpectrum', () => {
  it('gives wavelengths in the medium of the file and null for a flux without value', () => {
    const flux = ramp(N)
    flux[0] = NaN
    const [spectrum] = readMade([image(flux, { ...LINEAR, CTYPE1: 'WAVE', OBJECT: 'HD 1', BUNIT: 'adu' })]).spectra
    const { notes, ...rest } = describeSpectrum('a.fits', spectrum)
    expect(notes.length).toBeGreaterThan(0)
    expect(rest).toEqual({
      file: 'a.fits',
      hdu: 0,
      object: 'HD 1',
      samples: N,
      medium: 'vacuum',
      mediumHow: 'declared',
      wavelength: { first: 4000, last: 4118 },
      flux: { first: null, last: N, unit: 'adu' },
      nonfinite: 1,
      uncertainty: 'none',
      convention: 'primary image, vacuum wavelength axis',
    })
  })
})

/** Good files of several layouts, small enough to be damaged by the hundred. */
const GOOD = [
  [image(ramp(N), LINEAR)],
  [image(ramp(N), LINEAR, { name: 'SCI' }), image(ramp(N), {}, { name: 'ERR' }), image(ramp(N), {}, { name: 'DQ' })],
  [image(ramp(N), {}, { name: 'FLUX' }), image(WAVE, { BUNIT: 'Angstrom' }, { name: 'WAVELENGTH' })],
  [
    table(N, [
      { name: 'WAVE', letter: 'D', unit: 'nm', values: WAVE.map((w) => w / 10) },
      { name: 'FLUX', letter: 'E', values: ramp(N) },
      { name: 'IVAR', letter: 'E', values: ramp(N) },
    ]),
  ],
  [
    table(2, [
      { name: 'WAVE', letter: 'D', repeat: N, values: Float64Array.of(...WAVE, ...WAVE) },
      { name: 'FLUX', letter: 'E', repeat: N, values: ramp(2 * N) },
    ]),
  ],
  [
    image(
      ramp(2 * N),
      {
        CTYPE1: 'MULTISPE',
        WAT0_001: 'system=multispec',
        WAT1_001: 'wtype=multispec label=Wavelength units=angstroms',
        WAT2_001: 'wtype=multispec spec1 = "1 1 2 1. 1. 60 0. 1. 2. 1. 0. 1 2 1. 60. 4',
        WAT2_002: '000. 100." spec2 = "2 2 0 4100. 2. 60 0. 3. 4."',
      },
      { dimensions: [N, 2] },
    ),
  ],
]

describe('readSpectra on damaged files', () => {
  it.each(GOOD.map((hdus, i) => ({ i, bytes: encodeFits(hdus) })))(
    'ends 150 mutations of layout $i in sound spectra or in one reason',
    ({ i, bytes }) => {
      const uniform = seededUniform(100 + i)
      const at = (length: number): number => Math.floor(uniform() * length)
      const values = ['1E400', '-1', '0', '99999999999', "'x'", 'NaN', '1e-300', 'T', '']
      for (let round = 0; round < 150; round++) {
        const damaged = Buffer.from(bytes)
        for (let k = 0; k <= at(6); k++) {
          const card = at(damaged.length / 80) * 80
          const kind = round % 4
          if (kind === 0) damaged[at(damaged.length)] = at(256)
          else if (kind === 1) damaged.write('COMMENT ', card, 'latin1')
          else if (kind === 2 && damaged[card + 8] === 61)
            damaged.write(` ${values[at(values.length)]}`.padEnd(40), card + 9, 'latin1')
        }
        const source = memorySource(round % 4 === 3 ? damaged.subarray(0, at(damaged.length)) : damaged)
        try {
          const result = readSpectra(openFits(source), source, { keywords: KEYWORDS })
          expect(result.spectra.length > 0 || result.error !== undefined).toBe(true)
          for (const { wavelength, flux, usable, sigma } of [...result.spectra, ...joinOrders(result.spectra)]) {
            expect(wavelength.every((w, j) => Number.isFinite(w) && (j === 0 || w > wavelength[j - 1]))).toBe(true)
            expect([flux.length, usable.length, sigma?.length ?? flux.length]).toEqual([
              wavelength.length,
              wavelength.length,
              wavelength.length,
            ])
          }
        } catch (error) {
          if (!(error instanceof FormatError)) throw error
        }
      }
    },
  )
})
