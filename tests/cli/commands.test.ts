import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { encodeFits } from '../../src/fits/write.ts'
import { seededNormal } from '../../src/numeric/random.ts'
import { COLUMNS } from '../../src/report/columns.ts'
import { COMMANDS } from '../../cli/args.ts'
import { darkline } from '../support/program.ts'

const root = mkdtempSync(join(tmpdir(), 'darkline-commands-'))
afterAll(() => rmSync(root, { recursive: true, force: true }))
const at = (name: string): string => join(root, name)

/** A made spectrum of 1,500 samples from 3900 Å with one line at Hβ and noise of 1 %. */
function madeSpectrum(): Uint8Array {
  const normal = seededNormal(7)
  const data = Float64Array.from({ length: 1500 }, (_, i) => {
    const wavelength = 3900 + 1.2 * i
    return 1000 * (1 - 0.5 * Math.exp(-0.5 * ((wavelength - 4861.3) / 4) ** 2) + 0.01 * normal())
  })
  return encodeFits([
    {
      kind: 'image',
      bitpix: -64,
      dimensions: [1500],
      values: data,
      cards: [
        { keyword: 'OBJECT', value: 'made star' },
        { keyword: 'CTYPE1', value: 'AWAV' },
        { keyword: 'CUNIT1', value: 'Angstrom' },
        { keyword: 'CRVAL1', value: 3900 },
        { keyword: 'CDELT1', value: 1.2 },
        { keyword: 'CRPIX1', value: 1 },
      ],
    },
  ])
}
const good = madeSpectrum()
mkdirSync(at('empty'))
mkdirSync(at('mixed'))
writeFileSync(at('mixed/good.fits'), good)
writeFileSync(at('mixed/cut.fits'), good.subarray(0, 2880 + 2000))
writeFileSync(at('mixed/words.fits'), 'these are words, not FITS\n'.repeat(200))
writeFileSync(at('mixed/notes.txt'), 'nothing to see')
writeFileSync(
  at('mixed/noaxis.fits'),
  encodeFits([{ kind: 'image', bitpix: -64, dimensions: [300], values: new Float64Array(300).fill(1), cards: [] }]),
)

describe('exit status and messages', () => {
  it('0 for help and version, which name every command', () => {
    const help = darkline(['--help'])
    expect(help.status).toBe(0)
    for (const name of COMMANDS) expect(help.stdout).toContain(`darkline ${name}`)
    expect(darkline(['--version']).stdout.trim()).toMatch(/^\d+\.\d+\.\d+$/)
    for (const name of COMMANDS) expect(darkline([name, '--help']).stdout).toContain(`darkline ${name}`)
  })

  it.each([
    ['no command', [], 'command'],
    ['an unknown command', ['clasify', 'x.fits'], 'clasify'],
    ['an unknown option', ['check', 'x.fits', '--fromat', 'csv'], 'fromat'],
    ['a missing argument', ['night'], 'night requires FOLDER, got none'],
    [
      'a wrong number of threads',
      ['check', 'x', '--workers', 'many'],
      '--workers requires a whole number from 0 to 256, got NaN',
    ],
    ['a folder that does not exist', ['night', 'nowhere'], 'nowhere: night requires a folder, got none of that name'],
    [
      'paths that do not exist',
      ['check', 'nowhere', 'neither'],
      'nowhere: path requires a file or folder, got none of that name',
    ],
    [
      'a settings file that does not exist',
      ['check', '.', '--config', 'none.toml'],
      '--config requires a readable file, got ENOENT for none.toml',
    ],
  ])('2 with one clear line for %s', (_, words, message) => {
    const run = darkline(words)
    expect(run.status).toBe(2)
    expect(run.stderr).toContain(message)
    expect(run.stderr).not.toMatch(/\n\s+at /)
    expect(run.stdout).toBe('')
  })

  it('2 for a folder without a FITS file', () => {
    const run = darkline(['check', at('empty')])
    expect([run.status, run.stderr]).toEqual([
      2,
      `darkline: ${at('empty')}: folder requires at least one FITS file, got none\n`,
    ])
  })

  it('1 when a file could not be read, with one line for each, and the rest is done', () => {
    const run = darkline(['classify', 'mixed', 'nowhere', '--format', 'csv', '--workers', '2'], { cwd: root })
    expect(run.status).toBe(1)
    const lines = run.stderr.trim().split('\n')
    expect(lines.map((line) => line.replace(/[:,].*/, ''))).toEqual([
      'mixed/cut.fits',
      'mixed/noaxis.fits',
      'mixed/words.fits',
      'nowhere',
    ])
    for (const line of lines) expect(line).toMatch(/ requires .+, got .+/)
    expect(run.stdout.split('\r\n').map((row) => row.split(',')[0])).toEqual(['file', 'mixed/good.fits', ''])
  })

  it('0 when everything was read and nothing is unusable', () => {
    expect(darkline(['measure', at('mixed/good.fits'), '--quiet']).status).toBe(0)
  })
})

describe('tables', () => {
  it('print the columns of the contract, in every text format', () => {
    const csv = darkline(['classify', at('mixed/good.fits'), '--format', 'csv']).stdout
    expect(csv.split('\r\n')[0].split(',')).toEqual(COLUMNS.spectra.map((c) => c.name))
    const line = JSON.parse(darkline(['classify', at('mixed/good.fits'), '--format', 'jsonl']).stdout) as Record<
      string,
      unknown
    >
    expect(Object.keys(line)).toEqual(COLUMNS.spectra.map((c) => c.name))
    expect(line.object).toBe('made star')
  })

  it('go to a folder as CSV and JSON Lines when only --out is given, and leave no other file', () => {
    darkline(['measure', at('mixed/good.fits'), '--out', at('out')])
    expect(readdirSync(at('out')).sort()).toEqual(
      ['features', 'findings', 'frames', 'spectra'].flatMap((name) => [`${name}.csv`, `${name}.jsonl`]),
    )
  })

  it('are the same whatever the number of threads', () => {
    const [one, many] = ['0', '2'].map(
      (workers) => darkline(['measure', 'mixed', '--format', 'csv', '--workers', workers], { cwd: root }).stdout,
    )
    expect(many).toBe(one)
    expect(one.length).toBeGreaterThan(1000)
  })

  it('measure the line that was put in: Hβ of depth 0.5 and sigma 4 Å has W = √(2π)·0.5·4 = 5.01 Å', () => {
    const rows = darkline(['measure', at('mixed/good.fits'), '--format', 'jsonl'])
      .stdout.trim()
      .split('\n')
      .map((line) => JSON.parse(line) as { feature: string; method: string; ew: number; ew_err: number })
    const line = rows.find((r) => r.feature === 'Hbeta' && r.method === 'integration')
    expect(Math.abs((line?.ew ?? NaN) - 5.013)).toBeLessThan(2 * (line?.ew_err ?? 0))
  })
})

describe('other commands', () => {
  it('describe gives an object a spectrum, and an error object for what is none', () => {
    const run = darkline(['describe', 'mixed', '--format', 'jsonl'], { cwd: root })
    const entries = run.stdout
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as { file: string; samples?: number; error?: { code: string; message: string } })
    expect(entries.map((e) => [e.file, e.samples ?? 'error'])).toEqual([
      ['mixed/cut.fits', 'error'],
      ['mixed/good.fits', 1500],
      ['mixed/noaxis.fits', 'error'],
      ['mixed/words.fits', 'error'],
    ])
    expect(run.status).toBe(1)
  })

  it('describe --hdus --verify tells the checksums that the writer put in', () => {
    const entry = JSON.parse(
      darkline(['describe', at('mixed/good.fits'), '--hdus', '--verify', '--format', 'jsonl']).stdout,
    ) as { checksums: { datasum: { state: string } } }
    expect(JSON.stringify(entry.checksums)).toContain('right')
  })

  it('settings prints TOML that --config takes back', () => {
    const toml = darkline(['settings']).stdout
    writeFileSync(at('mine.toml'), toml.replace(/^snr-minimum = .*$/m, 'snr-minimum = 31'))
    const table = darkline(['settings', '--config', at('mine.toml'), '--format', 'table']).stdout
    expect(table).toMatch(/check\.snr-minimum +31 .*\(file, line \d+\)/)
  })

  it('demo refuses a folder with other files in it', () => {
    const run = darkline(['demo', at('mixed')])
    expect(run.status).toBe(2)
    expect(run.stderr).toContain('demo requires an empty or new folder')
  })

  it('classify --why names what decided', () => {
    expect(darkline(['classify', at('mixed/good.fits'), '--why']).stdout).toContain('good.fits')
    expect(readFileSync(at('mixed/good.fits')).length).toBe(good.length)
  })
})
