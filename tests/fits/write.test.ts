import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { verifyChecksums } from '../../src/fits/checksum.ts'
import { booleanValue, numberValue, textValue } from '../../src/fits/header.ts'
import { readImage } from '../../src/fits/image.ts'
import { readColumn } from '../../src/fits/table.ts'
import { encodeFits } from '../../src/fits/write.ts'
import type { FitsHduInput } from '../../src/fits/write.ts'
import { requirePython, requireTool, runPython } from '../support/tools.ts'
import { hduAt, openBytes } from './sharedFile.ts'

const LONG = `a text with more ${'than sixty-eight characters '.repeat(6)}ends here`

const hdus: readonly FitsHduInput[] = [
  {
    kind: 'image',
    bitpix: 16,
    dimensions: [3, 2],
    values: [0, 32768, 65535, 1, 2, 3],
    zero: 32768,
    cards: [
      { keyword: 'OBJECT', value: "Barnard's star", comment: 'invented' },
      { keyword: 'EXPTIME', value: 1e-7, comment: '[s] exposure' },
      { keyword: 'BIG', value: 9007199254740993n },
      { keyword: 'LONGTEXT', value: LONG, comment: 'continued' },
      { keyword: 'ESO TEL AIRM START', value: 1.2, comment: 'airmass' },
      { keyword: 'COMMENT', comment: 'x'.repeat(100) },
      { keyword: 'HISTORY', comment: 'made in a test' },
    ],
  },
  { kind: 'image', bitpix: -32, dimensions: [4], values: [1.5, NaN, -2, 1e30], name: 'SIGMA' },
  { kind: 'image', bitpix: -64, dimensions: [2], values: [Math.PI, -0.1], name: 'DOUBLE' },
  { kind: 'image', bitpix: 16, dimensions: [3], values: [-1.5, NaN, 100], scale: 0.5, blank: -32768, name: 'SCALED' },
  { kind: 'image', bitpix: 32, dimensions: [2], values: [-2147483648, 2147483647], name: 'INTS' },
  { kind: 'image', bitpix: 64, dimensions: [1], values: [2 ** 53 - 1], name: 'WIDE' },
  {
    kind: 'table',
    name: 'SPECTRA',
    rows: 3,
    columns: [
      { name: 'file', letter: 'A', repeat: 20, values: ['a.fits', 'Ångström', undefined], comment: 'path' },
      {
        name: 'ra',
        letter: 'D',
        values: [10.5, NaN, 359.25],
        unit: 'deg',
        ucd: 'pos.eq.ra;meta.main',
        display: 'F10.5',
      },
      { name: 'flux', letter: 'E', repeat: 2, values: [1, 2, 3, 4, 5, 6], unit: 'erg/s/cm2/Angstrom' },
      { name: 'samples', letter: 'J', values: [1, undefined, -3], nullValue: -2147483648 },
      { name: 'id', letter: 'K', values: [9223372036854775807n, undefined, 5], nullValue: -1 },
      { name: 'usable', letter: 'L', values: [true, false, undefined] },
      { name: 'short', letter: 'I', values: [-32768, 0, 32767] },
      { name: 'byte', letter: 'B', repeat: 4, values: [1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12], shape: [2, 2] },
    ],
  },
]

const bytes = encodeFits(hdus)

describe('encodeFits', () => {
  it('gives back through the reader what it was given', () => {
    const { source, file } = openBytes(bytes)
    expect(file.notes).toEqual([])
    expect(file.hdus.map((hdu) => hdu.notes)).toEqual(hdus.map(() => []))
    const primary = hduAt(file, 0)
    expect([...readImage(source, primary)]).toEqual([0, 32768, 65535, 1, 2, 3])
    expect(textValue(primary.header, 'OBJECT')).toBe("Barnard's star")
    expect(textValue(primary.header, 'LONGTEXT')).toBe(LONG)
    expect(numberValue(primary.header, 'EXPTIME')).toBe(1e-7)
    expect(numberValue(primary.header, 'ESO TEL AIRM START')).toBe(1.2)
    expect(primary.header.get('BIG')?.value).toBe(9007199254740993n)
    expect(booleanValue(primary.header, 'SIMPLE')).toBe(true)
    expect([...readImage(source, hduAt(file, 1))]).toEqual([1.5, NaN, -2, Math.fround(1e30)])
    expect([...readImage(source, hduAt(file, 3))]).toEqual([-1.5, NaN, 100])
    expect([...readImage(source, hduAt(file, 5))]).toEqual([2 ** 53 - 1])
    const table = hduAt(file, 6)
    const read = (name: string): unknown => {
      const column = table.columns.find((candidate) => candidate.name === name)
      return column && readColumn(source, table, column)
    }
    expect(read('file')).toEqual({ kind: 'text', repeat: 1, values: ['a.fits', '?ngstr?m', ''] })
    expect(read('ra')).toEqual({ kind: 'numbers', repeat: 1, values: Float64Array.of(10.5, NaN, 359.25) })
    expect(read('samples')).toEqual({ kind: 'numbers', repeat: 1, values: Float64Array.of(1, NaN, -3) })
    expect(read('id')).toEqual({
      kind: 'integers',
      repeat: 1,
      values: BigInt64Array.of(9223372036854775807n, -1n, 5n),
      nulls: Uint8Array.of(0, 1, 0),
    })
    expect(read('usable')).toEqual({ kind: 'logicals', repeat: 1, values: [true, false, undefined] })
    expect(table.columns[1]).toMatchObject({ unit: 'deg', ucd: 'pos.eq.ra;meta.main', display: 'F10.5' })
    expect(table.columns[7]?.shape).toEqual([2, 2])
  })

  it('writes checksums that its own verifier finds right, and wrong after a flipped bit', () => {
    const { source, file } = openBytes(bytes)
    for (const hdu of file.hdus) {
      const { datasum, checksum } = verifyChecksums(source, hdu)
      expect([datasum.state, checksum.state]).toEqual(['right', 'right'])
    }
    const flipped = bytes.slice()
    flipped[bytes.length - 2880] = 0x42
    const damaged = openBytes(flipped)
    const { datasum, checksum } = verifyChecksums(damaged.source, hduAt(damaged.file, 6))
    expect([datasum.state, checksum.state]).toEqual(['wrong', 'wrong'])
  })

  it('splits long text between cards without splitting a doubled quote', () => {
    for (let lead = 60; lead < 70; lead++) {
      const value = `${'x'.repeat(lead)}''' and ${'y'.repeat(100)}''`
      const written = encodeFits([{ kind: 'image', bitpix: 8, dimensions: [], cards: [{ keyword: 'TEXT', value }] }])
      expect(textValue(hduAt(openBytes(written).file, 0).header, 'TEXT')).toBe(value)
    }
  })

  it('puts a primary HDU without data before a table', () => {
    const { file } = openBytes(encodeFits([{ kind: 'table', rows: 0, columns: [] }]))
    expect(file.hdus.map((hdu) => [hdu.kind, hdu.dimensions])).toEqual([
      ['image', []],
      ['table', [0, 0]],
    ])
  })

  it('names the column and value that do not fit', () => {
    const table = (column: object): FitsHduInput => ({
      kind: 'table',
      rows: 1,
      columns: [{ name: 'c', ...column } as never],
    })
    expect(() => encodeFits([table({ letter: 'I', values: [40000] })])).toThrow(
      'column c: integer of 16 bits requires a value from -32768 to 32767, got 40000',
    )
    expect(() => encodeFits([table({ letter: 'J', values: [undefined] })])).toThrow(/got NaN/)
    expect(() => encodeFits([table({ letter: 'D', values: [] })])).toThrow('column c requires 1 values, got 0')
    expect(() => encodeFits([table({ letter: 'A', repeat: 2, values: ['abc'] })])).toThrow(
      /at most 2 characters, got 3/,
    )
  })
})

describe('encodeFits against outside tools', () => {
  let folder = ''
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'darkline-write-'))
    writeFileSync(join(folder, 'all.fits'), bytes)
  })
  afterAll(() => rmSync(folder, { recursive: true, force: true }))

  it.skipIf(!requireTool('fitsverify', []))('passes fitsverify without errors or warnings', () => {
    const { stdout, status } = spawnSync('fitsverify', ['-q', join(folder, 'all.fits')], { encoding: 'utf8' })
    expect(stdout.trim()).toBe(`verification OK: ${join(folder, 'all.fits')}`)
    expect(status).toBe(0)
  })

  it.skipIf(!requirePython('astropy'))('is read by astropy with the same values, units and checksums', () => {
    const program = `
import sys, json, warnings
warnings.simplefilter('error')
from astropy.io import fits
with fits.open(sys.argv[1], checksum=True) as f:
    t = f[6]
    print(json.dumps({
        'names': [h.name for h in f], 'object': f[0].header['OBJECT'], 'long': f[0].header['LONGTEXT'],
        'big': str(f[0].header['BIG']), 'exptime': f[0].header['EXPTIME'],
        'image': [None if v != v else float(v) for v in f[0].data.ravel()],
        'scaled': [None if v != v else float(v) for v in f[3].data],
        'double': [float(v) for v in f[2].data], 'ints': [int(v) for v in f[4].data],
        'file': list(t.data['file']), 'units': [c.unit for c in t.columns],
        'flux': t.data['flux'].tolist(), 'id': [str(v) for v in t.data['id']], 'usable': t.data['usable'].tolist(),
        'byte': t.data['byte'].tolist(), 'samples': t.data['samples'].tolist()}))`
    expect(JSON.parse(runPython(program, [join(folder, 'all.fits')]))).toEqual({
      names: ['PRIMARY', 'SIGMA', 'DOUBLE', 'SCALED', 'INTS', 'WIDE', 'SPECTRA'],
      object: "Barnard's star",
      long: LONG,
      big: '9007199254740993',
      exptime: 1e-7,
      image: [0, 32768, 65535, 1, 2, 3],
      scaled: [-1.5, null, 100],
      double: [Math.PI, -0.1],
      ints: [-2147483648, 2147483647],
      file: ['a.fits', '?ngstr?m', ''],
      units: [null, 'deg', 'erg/s/cm2/Angstrom', null, null, null, null, null],
      flux: [
        [1, 2],
        [3, 4],
        [5, 6],
      ],
      id: ['9223372036854775807', '-1', '5'],
      usable: [true, false, false],
      byte: [
        [
          [1, 2],
          [3, 4],
        ],
        [
          [5, 6],
          [7, 8],
        ],
        [
          [9, 10],
          [11, 12],
        ],
      ],
      samples: [1, -2147483648, -3],
    })
  })
})
