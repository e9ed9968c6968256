import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { FormatError } from '../../src/errors.ts'
import { readImage } from '../../src/fits/image.ts'
import { numbersOf, readColumn } from '../../src/fits/table.ts'
import type { ByteSource, ColumnValues, FitsFile, Hdu } from '../../src/fits/types.ts'
import { hasShared, NEEDS_SHARED, sharedPath } from '../support/shared.ts'
import { hduAt, openShared } from './sharedFile.ts'

/**
 * What astropy 5.2.1 says of 288 files (../shared/containers/structure.tsv), a row an HDU: name, class, BITPIX, axes,
 * cards, columns as NAME[TFORM|unit], and of the data the first, middle and last value, count of finite ones and sum;
 * of a table the first element of the first row and the last of the last.
 */
interface Row {
  readonly path: string
  readonly hdu: string
  readonly name: string
  readonly type: string
  readonly bitpix: string
  readonly dimensions: string
  readonly cards: string
  readonly columns: string
  readonly values: string
}

/** Where this reader and astropy 5.2.1 differ on purpose, and why. A difference that vanishes fails the test too. */
const DIFFERENCES: Readonly<Record<string, string>> = {
  'real/suite_c/compressed_with_nan.fits 1 cards': 'astropy leaves ZBLANK, ZDITHER0 and the stored checksums in',
  'real/suite_c/compressed_with_nan.fits 1 data': 'astropy 5.2.1 overlooks ZBLANK in the header; funpack gives NaN too',
  'real/suite_i/test_rice_dither2_seed42.fits.fz 1 cards': 'astropy leaves ZDITHER0 in the header of the image',
  'real/suite_i/test_rice_dither2_seed42.fits.fz 1 name': 'astropy makes up a name where EXTNAME is absent',
  'real/suite_c/vla_logical_pre_fix.fits 1 flag': 'logicals stored as the bytes 1 and 0, which are neither T nor F',
  'real/suite_c/group_invalid.fits 0 dimensions': 'astropy shows an axis that the header (NAXIS = 0) has not',
  'real/suite_c/group_invalid.fits 0 cards': 'astropy adds a card for that axis',
  'real/suite_d/header_with_time_wcslib71.fits 0 data': 'astropy takes the padding (NAXIS = 0, SIMPLE = F) for data',
  'broken/simple_F.fits 0 data':
    'astropy shows raw bytes where SIMPLE = F; the array that the header announces is read',
  'real/suite_b/tst0012.mt 2 data': 'an extension of unknown type has no meaning to read; astropy shows raw bytes',
  'real/suite_f/testf77.std 3 Ivalue': 'a blank number field says nothing: NaN; astropy reads 0 as Fortran did',
  'real/suite_f/testf77.std 3 Evalue': 'as above',
  'real/suite_f/testf77.std 3 Dvalue': 'as above',
  'real/suite_f/testf77.std 3 INSERT_COL': 'as above',
  'real/suite_f/testf77.std 7 Ivalue': 'as above',
  'real/suite_f/testf77.std 7 Fvalue': 'as above',
  'real/suite_f/testf77.std 7 Evalue': 'as above',
  'real/suite_f/testf77.std 7 Dvalue': 'as above',
  'synth/rows_scaled_ints_tnull.fits 1 FLUX': 'the stored value is TNULL: NaN; astropy scales it like a number',
  'broken/bitpix_bad.fits 0 error': 'BITPIX -33 leaves the size unknown: an error, as the manifest wants',
  'broken/crlf_translated.fits 0 data': 'copied as text: every line feed has a carriage return before it, so an error',
  'broken/naxis1_table_mismatch.fits 1 error': 'NAXIS1 differs from the columns: an error, as the manifest wants',
  'broken/vla_descriptor_out_of_heap.fits 1 WAVE': 'row 0 points outside the heap: an error, as the manifest wants',
}

/** astropy's sums of scaled 16-bit images are made in single precision: 7 digits. */
const TOLERANCE = 2e-6

const rows: readonly Row[] = !hasShared
  ? []
  : readFileSync(sharedPath('containers/structure.tsv'), 'utf8')
      .trimEnd()
      .split('\n')
      .slice(1)
      .map((line) => {
        const [path, hdu, name, type, bitpix, dimensions, cards, columns, values] = line.split('\t')
        return { path, hdu, name, type, bitpix, dimensions, cards, columns, values: values ?? '' } as Row
      })

describe.skipIf(!hasShared)(`structure of the shared containers (${NEEDS_SHARED})`, () => {
  it('agrees with a reference library in every HDU, apart from the differences named', () => {
    const found: string[] = []
    let checks = 0
    const readable = rows.filter((row) => row.type !== 'astropy refuses')
    for (const path of new Set(readable.map((row) => row.path))) {
      const known = readable.filter((row) => row.path === path)
      let opened: { source: ByteSource; file: FitsFile }
      try {
        opened = openShared(path)
      } catch (error) {
        if (!(error instanceof FormatError)) throw error
        found.push(`${path} 0 error`)
        continue
      }
      for (const row of known) {
        const differences = compare(row, opened, hduAt(opened.file, Number(row.hdu)), () => checks++)
        found.push(...differences.map((what) => `${path} ${row.hdu} ${what}`))
      }
    }
    expect(found.filter((key) => !(key in DIFFERENCES))).toEqual([])
    expect(Object.keys(DIFFERENCES).filter((key) => !found.includes(key))).toEqual([])
    // 532 rows are no refusals; each has name, BITPIX, axes and cards, most have data
    expect(checks).toBeGreaterThan(4000)
  })

  it('ends in HDUs or in a FormatError for the files that the reference library refuses', () => {
    const read: string[] = []
    for (const { path } of rows.filter((row) => row.type === 'astropy refuses')) {
      try {
        read.push(`${path}: ${openShared(path).file.hdus.length}`)
      } catch (error) {
        expect(error).toBeInstanceOf(FormatError)
      }
    }
    expect(read).toEqual([
      // Unix compress, a table compressed column by column, and files whose damage lies in the data
      'real/suite_c/lzw.fits.Z: 1',
      'real/suite_j/testfile.fits.Z: 1',
      'real/suite_e/rp600245n00_im1.fits.Z: 3',
      'real/suite_e/test.fits.Z: 1',
      'real/suite_e/testBinaryTable.fits.fz: 2',
      'broken/gz_truncated.fits.gz: 1',
      'broken/naxis1_table_mismatch.fits: 2',
      'broken/trunc_header.fits: 1',
    ])
  })
})

function compare(
  row: Row,
  { source, file }: { source: ByteSource; file: FitsFile },
  hdu: Hdu,
  count: () => void,
): string[] {
  const found: string[] = []
  const check = (right: boolean, what: string): void => {
    count()
    if (!right) found.push(what)
  }
  // an image or table that was compressed is compared as stored where astropy shows it so
  const raw = hdu.kind === 'compressed table' && hdu.stored ? hdu.stored : undefined
  // astropy puts the missing EXTEND card into a primary header that extensions follow
  const lacks = hdu.index === 0 && file.hdus.length > 1 && hdu.header.get('EXTEND') === undefined ? 1 : 0
  check(hdu.name === (row.hdu === '0' && row.name === 'PRIMARY' ? '' : row.name), 'name')
  check((raw ?? hdu).dimensions.join('x') === row.dimensions, 'dimensions')
  check(String(raw ? 8 : hdu.bitpix) === row.bitpix, 'bitpix')
  check((raw ?? hdu).header.cards.length + lacks === Number(row.cards), 'cards')
  check(kindsOf(row).includes(hdu.kind), `kind ${hdu.kind}`)
  if (row.columns === 'image') check(sameImage(row, source, hdu), 'data')
  if (row.values.startsWith('rows=')) {
    if (hdu.fault) return ['error']
    check(String(hdu.rows) === /^rows=(\d+)/.exec(row.values)?.[1], 'rows')
    row.columns.split(' ; ').forEach((text, i) => {
      const column = hdu.columns[i]
      // the longest lists are cut at 600 characters
      const own = `${column?.name}[${column?.form.trim()}|${column?.unit}]`
      check(own === text || (row.columns.length === 600 && own.startsWith(text)), `column ${text}`)
    })
    for (const [name, first, last] of cellsOf(row)) check(sameEnds(source, hdu, name, [first, last]), name)
  }
  return found
}

function kindsOf(row: Row): readonly string[] {
  if (row.type === 'BinTableHDU') return ['table', 'compressed table']
  if (row.type === 'TableHDU') return ['ascii table']
  if (row.type === 'CompImageHDU') return ['compressed image']
  return row.type === 'NonstandardExtHDU' ? ['unknown'] : ['image']
}

function sameImage(row: Row, source: ByteSource, hdu: Hdu): boolean {
  if (hdu.kind === 'unknown' || hdu.fault) return false
  const values = readImage(source, hdu)
  const wanted = new Map(row.values.split(' ').map((part) => part.split('=') as [string, string]))
  let finite = 0
  let sum = 0
  for (const value of values) {
    if (!Number.isFinite(value)) continue
    finite++
    sum += value
  }
  if (Number(wanted.get('n')) !== values.length || Number(wanted.get('finite')) !== finite) return false
  if (values.length === 0) return true
  const ends = [values[0], values[values.length >> 1], values.at(-1), sum]
  return ['first', 'mid', 'last', 'sum'].every((name, i) => near(ends[i] as number, Number(wanted.get(name))))
}

function cellsOf(row: Row): readonly (readonly [string, string, string])[] {
  const list = row.values.slice(row.values.indexOf(' ') + 1)
  if (!list.includes(': ')) return []
  return list.split(' ; ').map((part) => {
    const colon = part.lastIndexOf(': ')
    const [first = '', last = ''] = part.slice(colon + 2).split(' .. ')
    return [part.slice(0, colon), first, last] as const
  })
}

function sameEnds(source: ByteSource, hdu: Hdu, name: string, wanted: readonly [string, string]): boolean {
  const column = hdu.columns.find((candidate) => candidate.name === name)
  if (!column) return false
  let values: ColumnValues
  try {
    values = readColumn(source, hdu, column)
  } catch (error) {
    if (error instanceof FormatError) return false
    throw error
  }
  return endsOf(values, hdu.rows).every((own, i) => sameCell(own, wanted[i] as string))
}

function sameCell(own: string | number | undefined, wanted: string): boolean {
  if (own === undefined) return wanted === 'empty' || wanted.trim() === ''
  if (typeof own === 'string') return own.trim() === wanted.trim()
  // astropy shows the logicals of variable-length arrays as their stored letters, and undefined ones as 0
  const letters: Readonly<Record<string, number>> = { '84': 1, '70': 0 }
  return near(
    own,
    letters[wanted] !== undefined && (own === 0 || own === 1) ? (letters[wanted] as number) : Number(wanted),
  )
}

type Ends = readonly [string | number | undefined, string | number | undefined]

function endsOf(values: ColumnValues, rowCount: number): Ends {
  switch (values.kind) {
    case 'variable':
      return [firstOf(values.cells[0]), lastOf(values.cells.at(-1))]
    case 'text':
      return [values.values[0], values.values[(rowCount - 1) * values.repeat]]
    default:
      return [firstOf(values), lastOf(values)]
  }
}

function firstOf(cell: ColumnValues | undefined): string | number | undefined {
  return plain(cell)[0]
}

function lastOf(cell: ColumnValues | undefined): string | number | undefined {
  return plain(cell).at(-1)
}

function plain(cell: ColumnValues | undefined): readonly (string | number)[] {
  if (!cell) return []
  if (cell.kind === 'text') return [...(cell.values[0] ?? '')]
  if (cell.kind === 'logicals') return cell.values.map((value) => (value ? 1 : 0))
  if (cell.kind === 'complex') return [...cell.re]
  return [...(numbersOf(cell) ?? [])]
}

function near(a: number, b: number): boolean {
  if (Number.isNaN(a) && Number.isNaN(b)) return true
  return Math.abs(a - b) <= TOLERANCE * Math.max(Math.abs(a), Math.abs(b))
}
