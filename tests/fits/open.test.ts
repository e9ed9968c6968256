import { describe, expect, it } from 'vitest'
import { FormatError } from '../../src/errors.ts'
import { readImage } from '../../src/fits/image.ts'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import { numbersOf, readColumn } from '../../src/fits/table.ts'
import type { ByteSource } from '../../src/fits/types.ts'
import { encodeFits } from '../../src/fits/write.ts'
import { hasShared, NEEDS_SHARED } from '../support/shared.ts'
import { hduAt, openBytes, openShared } from './sharedFile.ts'

const image = encodeFits([{ kind: 'image', bitpix: 16, dimensions: [100], values: new Float64Array(100).fill(7) }])

function blocks(cards: readonly string[], data = 0): Uint8Array {
  const text = [...cards, 'END'].map((card) => card.padEnd(80)).join('')
  const header = Buffer.from(text.padEnd(Math.ceil(text.length / 2880) * 2880), 'latin1')
  return new Uint8Array(Buffer.concat([header, Buffer.alloc(data)]))
}

const concat = (...parts: readonly Uint8Array[]): Uint8Array => new Uint8Array(Buffer.concat(parts))

describe('openFits', () => {
  it('notes junk, zeros and missing padding after the last HDU and keeps what is whole', () => {
    const codes = (bytes: Uint8Array): readonly string[] => openBytes(bytes).file.notes.map(({ code }) => code)
    expect(codes(image)).toEqual([])
    expect(codes(concat(image, new Uint8Array(2880).fill(65)))).toEqual(['trailing-bytes'])
    expect(codes(concat(image, new Uint8Array(100)))).toEqual(['zero-padding'])
    expect(codes(image.slice(0, 2880 + 200))).toEqual(['no-padding'])
    const { source, file } = openBytes(image.slice(0, 2880 + 200))
    expect(readImage(source, hduAt(file, 0)).every((value) => value === 7)).toBe(true)
  })

  it('keeps the HDUs before a damaged header', () => {
    const extension = blocks(["XTENSION= 'IMAGE   '", 'BITPIX  = 17', 'NAXIS   = 0', 'PCOUNT  = 0', 'GCOUNT  = 1'])
    const { file } = openBytes(concat(image, extension))
    expect(file.hdus).toHaveLength(1)
    expect(file.notes).toEqual([
      {
        code: 'bitpix',
        text: 'HDU 1 at byte 5760 cannot be read: BITPIX requires 8, 16, 32, 64, -32 or -64, got 17',
      },
    ])
  })

  it('refuses an array that the file cannot hold before making room for it', () => {
    const cards = ['SIMPLE  = T', 'BITPIX  = -64', 'NAXIS   = 2', 'NAXIS1  = 5000', 'NAXIS2  = 5000']
    const { source, file } = openBytes(blocks(cards, 2880))
    const before = process.memoryUsage().arrayBuffers
    expect(() => readImage(source, hduAt(file, 0))).toThrow(
      expect.objectContaining({ code: 'truncated-data', where: { hdu: 0, byte: 5760 } }),
    )
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(1e6)
    expect(file.hdus[0]?.notes.map(({ code }) => code)).toEqual(['truncated-data'])
    // what is there can be read
    expect(readImage(source, hduAt(file, 0), { start: 0, count: 360 })).toEqual(new Float64Array(360))
    const huge = [...cards.slice(0, 3), 'NAXIS1  = 999999999999', 'NAXIS2  = 999999999999']
    expect(() => openBytes(blocks(huge))).toThrow(expect.objectContaining({ code: 'too-large' }))
  })

  it('reads of a file of 6 GiB only the headers and the data asked for', () => {
    const big = blocks(['SIMPLE  = T', 'BITPIX  = 16', 'NAXIS   = 2', 'NAXIS1  = 72000', 'NAXIS2  = 45000'])
    const spectrum = encodeFits([{ kind: 'table', rows: 2, columns: [{ name: 'F', letter: 'D', values: [1, 2] }] }])
    const tail = spectrum.subarray(2880)
    const start = big.length + 72000 * 45000 * 2
    let total = 0
    const source: ByteSource = {
      size: start + tail.length,
      read(offset, length) {
        total += length
        const out = new Uint8Array(length)
        if (offset < big.length) out.set(big.subarray(offset, offset + length))
        if (offset >= start) out.set(tail.subarray(offset - start, offset - start + length))
        return out
      },
    }
    const file = openFits(source)
    expect(file.notes).toEqual([])
    const table = hduAt(file, 1)
    expect(readColumn(source, table, hduAt(file, 1).columns[0] as never)).toMatchObject({
      values: Float64Array.of(1, 2),
    })
    const row = readImage(source, hduAt(file, 0), { start: 72000 * 1000, count: 100 })
    expect(row).toEqual(new Float64Array(100))
    expect(total).toBeLessThan(50_000)
  })

  it.each([
    ['an empty file', '', 'an empty file'],
    ['a web page', '<!DOCTYPE html><html>', 'an HTML page'],
    ['text', 'wavelength flux\n4000 1', 'text: "wavelength flux"'],
    ['bzip2', 'BZh91AY', 'a bzip2 stream'],
    ['a line before the first card', '\nSIMPLE  =                    T', '1 bytes of white space before it'],
    ['an extension alone', "XTENSION= 'IMAGE   '", 'an extension without a primary HDU'],
    ['zeros', '\0\0\0\0', 'zero bytes'],
  ])('says what %s is instead of FITS', (_what, text, got) => {
    const message = `file requires "SIMPLE  =" and cards of 80 characters at its start, got ${got}`
    expect(() => openFits(memorySource(new Uint8Array(Buffer.from(text, 'latin1'))))).toThrow(
      expect.objectContaining({ code: 'not-fits', message }),
    )
  })
})

describe('readColumn', () => {
  it('reads blank ASCII fields and TNULL as NaN, Fortran exponents with and without their letter', () => {
    const fields = ['  1.5D+01', '  2.5E-01', '   3.5-02', '     -7. ', '         ', '      ***']
    const header = blocks(['SIMPLE  = T', 'BITPIX  = 8', 'NAXIS   = 0'])
    const cards = ["XTENSION= 'TABLE   '", 'BITPIX  = 8', 'NAXIS   = 2', 'NAXIS1  = 9', `NAXIS2  = ${fields.length}`]
    const more = [
      'PCOUNT  = 0',
      'GCOUNT  = 1',
      'TFIELDS = 1',
      'TBCOL1  = 1',
      "TFORM1  = 'D9.2'",
      "TNULL1  = '      ***'",
    ]
    const table = concat(header, blocks([...cards, ...more]), new Uint8Array(Buffer.from(fields.join('').padEnd(2880))))
    const { source, file } = openBytes(table)
    const hdu = hduAt(file, 1)
    const values = readColumn(source, hdu, hdu.columns[0] as never)
    expect(numbersOf(values)).toEqual(Float64Array.of(15, 0.25, 0.035, -7, NaN, NaN))
  })

  it('refuses rows outside the table as a broken contract', () => {
    const { source, file } = openBytes(
      encodeFits([{ kind: 'table', rows: 1, columns: [{ name: 'a', letter: 'D', values: [1] }] }]),
    )
    const table = hduAt(file, 1)
    expect(() => readColumn(source, table, table.columns[0] as never, { firstRow: 1, rowCount: 1 })).toThrow(RangeError)
  })
})

describe.skipIf(!hasShared)(`broken files (${NEEDS_SHARED})`, () => {
  /** What the shared manifest wants of each, and how it comes out here. */
  const refused: readonly (readonly [string, string, object])[] = [
    ['bitpix_bad', 'bitpix', { hdu: 0, keyword: 'BITPIX' }],
    ['header_80char_newlines', 'not-fits', { byte: 80 }],
    ['html_error_page', 'not-fits', { byte: 0 }],
    ['leading_newline', 'not-fits', { byte: 0 }],
    ['no_simple', 'not-fits', { byte: 0 }],
    ['naxis1_missing', 'naxis', { hdu: 0, keyword: 'NAXIS1' }],
    ['naxis_negative', 'naxis', { hdu: 0, keyword: 'NAXIS1' }],
    ['crlf_translated', 'copied-as-text', { hdu: 0 }],
    ['naxis1_table_mismatch', 'row-width', { hdu: 1, keyword: 'NAXIS1' }],
    ['tfields_too_big', 'columns', { hdu: 1, keyword: 'TFORM4' }],
    ['trunc_data_one_byte_short_of_values', 'truncated-data', { hdu: 0, byte: 9279 }],
    ['trunc_header', 'truncated-data', { hdu: 0, byte: 1200 }],
    ['vla_descriptor_out_of_heap', 'heap', { hdu: 1, row: 0, keyword: 'TFORM2' }],
  ]
  it.each(refused)('%s.fits is refused as %s with its place', (name, code, where) => {
    let caught: unknown
    try {
      const { source, file } = openShared(`broken/${name}.fits`)
      const last = hduAt(file, file.hdus.length - 1)
      if (last.kind === 'image') readImage(source, last)
      else if (last.columns.length === 0) readColumn(source, last, { ...columnStandIn, name })
      else for (const column of last.columns) readColumn(source, last, column)
    } catch (error) {
      caught = error
    }
    expect(caught).toBeInstanceOf(FormatError)
    expect(caught).toMatchObject({ code, where })
  })

  it('reads the rows that are right beside a descriptor that points outside the heap', () => {
    const { source, file } = openShared('broken/vla_descriptor_out_of_heap.fits')
    const table = hduAt(file, 1)
    const values = readColumn(source, table, table.columns[1] as never, { firstRow: 1, rowCount: 1 })
    expect(values.kind === 'variable' && values.cells[0]?.kind).toBe('numbers')
  })

  const noted: readonly (readonly [string, string])[] = [
    ['duplicate_crval', 'duplicate-keyword'],
    ['lowercase_keywords', 'lower-case-keyword'],
    ['no_padding_but_complete', 'no-padding'],
    ['non_ascii_header', 'non-ascii-header'],
    ['nul_padded_header', 'nul-in-header'],
    ['simple_F', 'simple-false'],
  ]
  it.each(noted)('%s.fits is read with the note %s', (name, code) => {
    const { source, file } = openShared(`broken/${name}.fits`)
    expect(readImage(source, hduAt(file, 0))).toHaveLength(1600)
    expect([...file.notes, ...hduAt(file, 0).notes].map((note) => note.code)).toContain(code)
  })
})

/** A column that no file describes, to ask for the data of a table whose columns cannot be known. */
const columnStandIn = {
  index: 0,
  name: '',
  letter: 'D',
  repeat: 1,
  unit: '',
  shape: [],
  scale: 1,
  zero: 0,
  form: 'D',
  display: '',
  offset: 0,
  width: 8,
  ucd: '',
  utype: '',
}
