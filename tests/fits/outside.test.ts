import { spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readImage } from '../../src/fits/image.ts'
import { readImageRows } from '../../src/fits/imageRows.ts'
import { readColumn } from '../../src/fits/table.ts'
import type { ColumnValues } from '../../src/fits/types.ts'
import { requirePython, requireTool, runPython } from '../support/tools.ts'
import { hduAt, openBytes } from './sharedFile.ts'

/** Writes files by astropy, and every value as it reads them back, as JSON with NaN as null. */
const PROGRAM = `
import sys, json, numpy as np, warnings
from astropy.io import fits
folder = sys.argv[1]
rng = np.random.default_rng(20261201)
n = 300
C = fits.Column
ragged = lambda make, most: np.array([make(i % most) for i in range(n)], dtype=object)
cols = [
  C('D', 'D', array=rng.normal(size=n)), C('E', '6E', dim='(3,2)', array=rng.normal(size=(n, 2, 3)).astype('f4')),
  C('I', 'I', array=rng.integers(-30000, 30000, n)), C('J', '2J', array=rng.integers(-2**31, 2**31, (n, 2))),
  C('K', 'K', array=rng.integers(-2**60, 2**60, n)), C('B', 'B', array=rng.integers(0, 256, n)),
  C('A', '7A', array=['star %d' % i for i in range(n)]), C('L', 'L', array=rng.integers(0, 2, n).astype(bool)),
  C('C', 'C', array=(rng.normal(size=n) + 1j * rng.normal(size=n)).astype('c8')), C('X', '13X', array=rng.integers(0, 2, (n, 13)).astype(bool)),
  C('U', 'I', bzero=32768, array=rng.integers(0, 65536, n).astype('u2')), C('S', 'I', array=np.arange(n)),
  C('VI', 'PI()', array=ragged(lambda k: rng.integers(-99, 99, k), 7)), C('VD', 'QD()', array=ragged(lambda k: rng.normal(size=k), 5)),
]
t = fits.BinTableHDU.from_columns(cols)
t.writeto(folder + '/table.fits')
fits.setval(folder + '/table.fits', 'TSCAL12', value=0.01, ext=1)
fits.setval(folder + '/table.fits', 'TZERO12', value=5.0, ext=1)
a = fits.TableHDU.from_columns([C('NAME', 'A9', array=['n%d' % i for i in range(20)]), C('COUNT', 'I6', array=np.arange(20) * 7 - 50), C('FLUX', 'E15.7', array=rng.normal(size=20)), C('WAVE', 'D23.15', array=rng.normal(size=20) * 1e3)])
a.writeto(folder + '/ascii.fits')
y, x = np.mgrid[0:60, 0:97]
image = 1000 + 50 * np.sin(x / 9) + rng.normal(size=(60, 97)) * 5
image[10:20, 30:40] = 0
whole = np.round(image)
for name, data in [('i16', whole.astype('i2')), ('i32', (whole * 1000).astype('i4')), ('u8', (whole / 8).astype('u1')), ('u16', (whole * 40).astype('u2')), ('f32', image.astype('f4')), ('f64', image)]:
  fits.PrimaryHDU(data).writeto(folder + '/' + name + '.fits')
holes = image.astype('f4'); holes[30, 40:50] = np.nan
fits.PrimaryHDU(holes).writeto(folder + '/holes.fits')
def plain(v):
  v = np.asarray(v)
  if v.dtype.kind == 'c': v = np.stack([v.real, v.imag], -1)
  if v.dtype.kind in 'US': return [str(s).rstrip() for s in v.ravel()]
  if v.dtype.kind == 'b': return [bool(b) for b in v.ravel()]
  return [None if e != e else (str(e) if v.dtype.kind in 'iu' and v.dtype.itemsize == 8 else float(e)) for e in v.ravel()]
out = {}
for name in ['table', 'ascii']:
  with fits.open(folder + '/' + name + '.fits') as f:
    d = f[1].data
    out[name] = {c: [plain(r) for r in d[c]] if c in ('VI', 'VD') else plain(d[c]) for c in f[1].columns.names}
for name in ['i16', 'i32', 'u8', 'u16', 'f32', 'f64', 'holes']:
  with fits.open(folder + '/' + name + '.fits') as f: out[name] = plain(f[0].data)
print(json.dumps(out))
`

const ready = requirePython('astropy')
const packs = requireTool('fpack', ['-V']) && requireTool('funpack', ['-V'])
let folder = ''
let reference: Readonly<Record<string, unknown>> = {}

beforeAll(() => {
  if (!ready) return
  folder = mkdtempSync(join(tmpdir(), 'darkline-outside-'))
  reference = JSON.parse(runPython(PROGRAM, [folder])) as Readonly<Record<string, unknown>>
})
afterAll(() => {
  if (folder) rmSync(folder, { recursive: true, force: true })
})

/** As the program above writes values. */
function plain(values: ColumnValues): readonly unknown[] {
  const number = (value: number): number | null => (Number.isNaN(value) ? null : value)
  switch (values.kind) {
    case 'numbers':
      return Array.from(values.values, number)
    case 'integers':
      return Array.from(values.values, String)
    case 'bits':
      return Array.from(values.values, Boolean)
    case 'complex':
      return Array.from(values.re).flatMap((re, i) => [re, values.im[i]])
    case 'variable':
      return values.cells.map(plain)
    default:
      return values.values
  }
}

/** The first place where two arrays differ; their lengths where those do. */
function firstDifference(a: Float64Array, b: Float64Array): string | undefined {
  if (a.length !== b.length) return `${a.length} and ${b.length} values`
  const at = a.findIndex((value, i) => !Object.is(value, b[i]))
  return at < 0 ? undefined : `${a[at]} and ${b[at]} at ${at}`
}

const open = (name: string): ReturnType<typeof openBytes> => openBytes(new Uint8Array(readFileSync(join(folder, name))))

describe.skipIf(!ready)('values against astropy', () => {
  it.each(['table', 'ascii'])('agree in every column of the %s table', (name) => {
    const { source, file } = open(`${name}.fits`)
    const table = hduAt(file, 1)
    const wanted = reference[name] as Readonly<Record<string, readonly unknown[]>>
    expect(table.columns.map((column) => column.name)).toEqual(Object.keys(wanted))
    for (const column of table.columns) {
      const whole = readColumn(source, table, column)
      expect(plain(whole), column.name).toEqual(wanted[column.name])
      // part of the rows is that part of the whole
      const repeat = whole.kind === 'variable' ? 1 : whole.kind === 'complex' ? 2 : whole.repeat
      const part = plain(readColumn(source, table, column, { firstRow: 3, rowCount: 10 }))
      expect(part, column.name).toEqual(wanted[column.name]?.slice(3 * repeat, 13 * repeat))
    }
  })

  it.each(['i16', 'i32', 'u8', 'u16', 'f32', 'f64', 'holes'])('agree in every pixel of an image of %s', (name) => {
    const { source, file } = open(`${name}.fits`)
    const values = readImage(source, hduAt(file, 0))
    const wanted = Float64Array.from(reference[name] as readonly (number | null)[], (value) => value ?? NaN)
    expect(firstDifference(values, wanted)).toBeUndefined()
    const rows = new Float64Array(3 * 97)
    readImageRows(source, hduAt(file, 0), { firstRow: 29, rowCount: 3 }, rows)
    expect(rows).toEqual(values.slice(29 * 97, 32 * 97))
  })
})

describe.skipIf(!ready || !packs)('tile-compressed files against funpack', () => {
  const run = (command: string, args: readonly string[]): Buffer => {
    const { stdout, stderr, status } = spawnSync(command, args, { maxBuffer: 1 << 28 })
    if (status !== 0)
      throw new Error(`${command} ${args.join(' ')} requires status 0, got ${status}: ${stderr.toString()}`)
    return stdout
  }
  const images = ['i16', 'i32', 'u8', 'u16', 'f32', 'f64', 'holes']
  const ways: readonly (readonly [string, readonly string[], readonly string[]])[] = [
    ['RICE_1', ['-r'], images],
    // with NaN in it, funpack 1.7 gives zeros for some whole tiles of odd size: see the next test
    ['RICE_1 in odd tiles', ['-r', '-t', '31,17'], images.filter((name) => name !== 'holes')],
    ['RICE_1 without dithering', ['-r', '-qt', '4'], ['f32', 'holes']],
    ['RICE_1 that keeps zeros', ['-r', '-qz', '4'], ['f32', 'f64', 'holes']],
    ['GZIP_1', ['-g1'], images],
    ['GZIP_2', ['-g2'], images],
    ['GZIP_2 without loss', ['-g2', '-q', '0'], ['f32', 'f64', 'holes']],
    ['HCOMPRESS_1', ['-h', '-w'], ['i16', 'i32', 'u8', 'u16', 'f32']],
    ['HCOMPRESS_1 with loss', ['-h', '-s', '2', '-t', '33,20'], ['i16', 'f32']],
    ['PLIO_1', ['-p'], ['u8', 'i16']],
  ]
  it.each(ways)('%s gives the same pixels, whole and by rows', (_way, options, names) => {
    for (const name of names) {
      const packed = run('fpack', [...options, '-S', join(folder, `${name}.fits`)])
      const path = join(folder, 'packed.fits.fz')
      writeFileSync(path, packed)
      const plainBytes = run('funpack', ['-S', path])
      const own = openBytes(new Uint8Array(packed))
      const theirs = openBytes(new Uint8Array(plainBytes))
      const shown = own.file.hdus.find((hdu) => hdu.kind === 'compressed image') ?? hduAt(own.file, 0)
      expect(shown.kind, name).toBe('compressed image')
      const values = readImage(own.source, shown)
      expect(firstDifference(values, readImage(theirs.source, hduAt(theirs.file, 0))), name).toBeUndefined()
      const part = readImage(own.source, shown, { start: 1000, count: 777 })
      expect(firstDifference(part, values.slice(1000, 1777)), name).toBeUndefined()
    }
  })

  it('RICE_1 in odd tiles with NaN keeps within half a quantum of the image before packing', () => {
    const own = openBytes(new Uint8Array(run('fpack', ['-r', '-t', '31,17', '-S', join(folder, 'holes.fits')])))
    const shown = hduAt(own.file, 1)
    const before = open('holes.fits')
    const original = readImage(before.source, hduAt(before.file, 0))
    const scale = shown.stored?.columns.find((column) => column.name === 'ZSCALE')
    if (!shown.stored || !scale) throw new RangeError('file requires a ZSCALE column, got none')
    const scales = readColumn(own.source, { ...shown, ...shown.stored, kind: 'table' }, scale)
    const quantum = scales.kind === 'numbers' ? Math.max(...scales.values) : NaN
    // the noise is 5, and fpack's default quantum a quarter of it
    expect(quantum).toBeLessThan(2)
    readImage(own.source, shown).forEach((value, i) => {
      if (Number.isNaN(original[i])) expect(value).toBeNaN()
      else expect(Math.abs(value - (original[i] as number))).toBeLessThanOrEqual(quantum / 2 + 1e-4)
    })
  })

  it('compressed tables give the same columns, variable-length arrays as well', () => {
    const path = join(folder, 'table.fits')
    const own = openBytes(new Uint8Array(run('fpack', ['-table', '-S', path])))
    const theirs = open('table.fits')
    const [packed, table] = [hduAt(own.file, 1), hduAt(theirs.file, 1)]
    expect([packed.kind, packed.rows, packed.dimensions]).toEqual(['compressed table', table.rows, table.dimensions])
    packed.columns.forEach((column, i) => {
      const wanted = table.columns[i]
      if (!wanted) throw new RangeError(`table requires a column ${i}`)
      expect(column.form).toBe(wanted.form)
      for (const rows of [undefined, { firstRow: 5, rowCount: 11 }]) {
        const values = readColumn(own.source, packed, column, rows)
        expect(values, column.name).toEqual(readColumn(theirs.source, table, wanted, rows))
      }
    })
  })
})
