import { parquetReadObjects, parquetMetadata } from 'hyparquet'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { spawnSync } from 'node:child_process'
import { SaxesParser } from 'saxes'
import { afterAll, describe, expect, it } from 'vitest'
import { asciiText } from '../../src/report/asciiText.ts'
import { COLUMNS } from '../../src/report/columns.ts'
import { encodeFitsTable } from '../../src/report/fitsTable.ts'
import { normalisedFits } from '../../src/report/normalisedFits.ts'
import { encodeParquet } from '../../src/report/parquet.ts'
import type { Row, TableName } from '../../src/report/row.ts'
import { TABLE_NAMES } from '../../src/report/row.ts'
import { tableRows } from '../../src/report/tableRows.ts'
import { encodeVotable } from '../../src/report/votable.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { madeNight, madeOutcome } from '../support/madeNight.ts'
import { HOSTILE_NAME } from '../support/oddTargets.ts'
import { PROVENANCE } from '../support/pageFonts.ts'
import { requirePython, requireTool, runPython } from '../support/tools.ts'

const { outcomes, night } = madeNight(9, { curves: false })
const all = [...outcomes, madeOutcome({ object: HOSTILE_NAME, curves: false })]
const rowsOf = (name: TableName): Row[] => tableRows(name, all, night)

const folder = mkdtempSync(join(tmpdir(), 'tables-'))
afterAll(() => rmSync(folder, { recursive: true }))
const write = (name: string, bytes: Uint8Array | string): string => {
  const path = join(folder, name)
  writeFileSync(path, bytes)
  return path
}

/** Prints every table of the given files as JSON rows; absent values as null. By astropy, an independent reader. */
const READ_ALL = `
import sys, json, warnings
import numpy as np
warnings.simplefilter('ignore')
from astropy.table import Table
def plain(v):
    if v is np.ma.masked: return None
    if isinstance(v, (bytes, np.bytes_)): v = v.decode()
    if isinstance(v, str): return v.rstrip() or None
    v = v.item()
    return None if isinstance(v, float) and v != v else v
out = []
for path in sys.argv[1:]:
    t = Table.read(path, format='fits' if path.endswith('fits') else 'votable')
    out.append({'names': t.colnames, 'rows': [[plain(row[c]) for c in t.colnames] for row in t]})
print(json.dumps(out))
`

interface ReadTable {
  readonly names: readonly string[]
  readonly rows: readonly (readonly (string | number | null)[])[]
}

const wanted = (name: TableName, text: (value: string) => string): (string | number | null)[][] =>
  rowsOf(name).map((row) =>
    COLUMNS[name].map((c) => {
      const value = row[c.name]
      return typeof value === 'string' ? text(value).trimEnd() || null : (value ?? null)
    }),
  )

describe('encodeFitsTable', () => {
  const paths = TABLE_NAMES.map((name) => write(`${name}.fits`, encodeFitsTable(name, rowsOf(name))))

  it.skipIf(!requireTool('fitsverify', ['-q']))('passes fitsverify without a warning', () => {
    for (const path of paths) {
      const { status, stdout } = spawnSync('fitsverify', [path], { encoding: 'utf8' })
      expect(stdout).toContain('Verification found 0 warning(s) and 0 error(s)')
      expect(status).toBe(0)
    }
  })

  it.skipIf(!requirePython('astropy'))('holds the same columns and values as the rows', () => {
    const read = JSON.parse(runPython(READ_ALL, paths)) as ReadTable[]
    TABLE_NAMES.forEach((name, i) => {
      expect(read[i].names).toEqual(COLUMNS[name].map((c) => c.name))
      expect(read[i].rows).toEqual(wanted(name, asciiText))
    })
  })

  it.skipIf(!requirePython('astropy'))('says unit, UCD, utype and null value of a column, and its sums agree', () => {
    const told = runPython(
      `import sys
from astropy.io import fits
with fits.open(sys.argv[1], checksum=True) as f:
    h = f[1].header
    n = f[1].columns.names.index('velocity_kms') + 1
    w = f[1].columns.names.index('wavelength_min') + 1
    print(h['TUNIT%d' % n], h['TUCD%d' % n], h['TUTYP%d' % w], h['TNULL2'], 'CHECKSUM' in h, 'DATASUM' in h)`,
      [paths[0]],
    )
    expect(told.trim()).toBe(
      'km/s spect.dopplerVeloc.opt spec:Char.SpectralAxis.Coverage.Bounds.Start -2147483648 True True',
    )
  })
})

describe('encodeVotable', () => {
  const document = encodeVotable(TABLE_NAMES.map((name) => ({ name, rows: rowsOf(name) })))
  const path = write('all.vot', document)
  const single = TABLE_NAMES.map((name) => write(`${name}.vot`, encodeVotable([{ name, rows: rowsOf(name) }])))

  it('is well-formed whatever a name holds', () => {
    const parser = new SaxesParser()
    parser.on('error', (error) => expect.fail(error.message))
    parser.write(document).close()
    expect(document).toContain('<VOTABLE version="1.4"')
  })

  it.skipIf(!requireTool('stilts', ['-version']))('makes the lint of the standard say nothing at all', () => {
    for (const file of [path, single[0]]) {
      const { stdout, stderr } = spawnSync('stilts', ['votlint', file], { encoding: 'utf8' })
      expect(stdout + stderr).toBe('')
    }
  })

  it.skipIf(!requirePython('astropy'))('holds the same columns and values as the rows', () => {
    const read = JSON.parse(runPython(READ_ALL, single)) as ReadTable[]
    TABLE_NAMES.forEach((name, i) => {
      expect(read[i].names).toEqual(COLUMNS[name].map((c) => c.name))
      const clean = (text: string): string => text.replace(/[\u0007\u001b]/g, '\ufffd')
      expect(read[i].rows).toEqual(wanted(name, clean))
    })
  })
})

describe('encodeParquet', () => {
  it('holds the same columns and values as the rows', async () => {
    for (const name of TABLE_NAMES) {
      const bytes = encodeParquet(name, rowsOf(name))
      const file = bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer
      const names = COLUMNS[name].map((c) => c.name)
      expect(
        parquetMetadata(file)
          .schema.slice(1)
          .map((s) => s.name),
      ).toEqual(names)
      const read = await parquetReadObjects({ file })
      const values = read.map((row) => names.map((column) => (row[column] ?? null) as string | number | null))
      expect(values).toEqual(rowsOf(name).map((row) => names.map((column) => row[column] ?? null)))
    }
  })
})

describe('normalisedFits', () => {
  const n = 4
  const spectrum: Spectrum = {
    wavelength: Float64Array.of(5001, 5002, 5003, 5004),
    flux: Float64Array.of(10, 5, NaN, 20),
    usable: Uint8Array.of(1, 1, 0, 1),
    hdu: 1,
    medium: 'vacuum',
    mediumHow: 'declared',
    frame: 'topocentric',
    fluxUnit: 'adu',
    fluxKind: 'counts',
    uncertainty: 'none',
    convention: 'made',
    role: 'star',
    facts: { object: HOSTILE_NAME, exposure: 30 },
    asStored: { samples: n, medium: 'vacuum', first: 5001, last: 5004, fluxFirst: 10, fluxLast: 20, nonfinite: 1 },
    notes: [],
  }
  const level = new Float64Array(n).fill(10)
  const continuum = {
    level,
    error: new Float64Array(n).fill(0.1),
    isPseudo: false,
    supported: 1,
    noise: new Float64Array(n).fill(0.2),
    noiseFrom: 'measured' as const,
  }
  const restFrame = { velocity: 299792.458 / 1000, error: 5, trusted: true, how: 'cross-correlation' as const }

  it.skipIf(!requirePython('astropy') || !requireTool('fitsverify', ['-q']))(
    'is the flux over the continuum at rest',
    () => {
      const path = write(
        'n.fits',
        normalisedFits({ file: 'night/x.fits', spectrum, continuum, restFrame, provenance: PROVENANCE }),
      )
      expect(spawnSync('fitsverify', [path], { encoding: 'utf8' }).stdout).toContain('0 warning(s) and 0 error(s)')
      const [{ names, rows }] = JSON.parse(runPython(READ_ALL, [path])) as ReadTable[]
      expect(names).toEqual(['WAVE', 'FLUX', 'ERR', 'CERR', 'QUALITY'])
      // velocity = c / 1000, so the rest wavelength is the observed one over 1.001: exact arithmetic.
      expect(rows[0][0]).toBeCloseTo(5001 / 1.001, 9)
      expect(rows.map((r) => r[1])).toEqual([1, 0.5, null, 2])
      expect(rows.map((r) => r[4])).toEqual([0, 0, 1, 0])
      expect(rows[1].slice(2, 4)).toEqual([0.02, 0.01])
    },
  )
})
