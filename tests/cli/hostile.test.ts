import { spawn } from 'node:child_process'
import { existsSync, mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, describe, expect, it } from 'vitest'
import { fileNames } from '../../cli/fileNames.ts'
import { printable } from '../../cli/printable.ts'
import { darkline } from '../support/program.ts'

const root = mkdtempSync(join(tmpdir(), 'darkline-hostile-'))
afterAll(() => rmSync(root, { recursive: true, force: true }))

const card = (text: string): string => text.padEnd(80)

/** A primary image of 64-bit floats from 4000 Å on with steps of `step` Å, by the layout of the FITS Standard 4.0. */
function image(flux: readonly number[], step = 1000 / flux.length): Buffer {
  const header = [
    'SIMPLE  =                    T',
    'BITPIX  =                  -64',
    'NAXIS   =                    1',
    `NAXIS1  = ${String(flux.length).padStart(20)}`,
    "CTYPE1  = 'AWAV    '",
    "CUNIT1  = 'Angstrom'",
    'CRVAL1  =               4000.0',
    'CRPIX1  =                  1.0',
    `CDELT1  = ${String(step).padStart(20)}`,
    'END',
  ]
  const head = Buffer.from(
    header
      .map(card)
      .join('')
      .padEnd(2880 * Math.ceil(header.length / 36)),
    'latin1',
  )
  const data = Buffer.alloc(2880 * Math.ceil((8 * flux.length) / 2880))
  flux.forEach((value, i) => data.writeDoubleBE(value, 8 * i))
  return Buffer.concat([head, data])
}

const hill = Array.from({ length: 600 }, (_, i) => 1000 + 10 * Math.sin(12.9898 * i * i))
writeFileSync(join(root, 'good.fits'), image(hill))
mkdirSync(join(root, 'empty'))

describe('the command line, badly treated', () => {
  it('says in one line what is wrong with its options, with status 2 and nothing left behind', () => {
    for (const [words, answer] of [
      [['chekc', 'good.fits'], /^darkline: command requires one of night, .*, got chekc\n$/],
      [['check', 'good.fits', '--out', ''], /^darkline: --out requires at least one character/],
      [['check', 'good.fits', '--out.x=1'], /got out\.x\n$/],
      [['check', 'good.fits', '--format', 'xml'], /^darkline: --format requires one of table, .*, got xml\n$/],
      [['check', 'good.fits', '--wavelengths', 'empty'], /^darkline: --wavelengths requires a FITS file, got empty/],
      [['describe', 'good.fits', '--wavelengths', 'none'], /^darkline: --wavelengths requires .*, got none: ENOENT/],
      [['check', 'empty', '--out', 'left'], /^darkline: empty: folder requires at least one FITS file, got none\n$/],
      // a folder below /proc cannot be made, and asking the system library for it recursively never ends
      [['check', 'good.fits', '--out', '/proc/none'], /^darkline: \/proc\/none: the system answers ENOENT\n$/],
    ] as const) {
      const { status, stdout, stderr } = darkline(words, { cwd: root })
      expect(stderr).toMatch(answer)
      expect([status, stdout]).toEqual([2, ''])
    }
    expect(readdirSync(join(root, 'left'))).toEqual([])
  })

  it('answers for a path below a file and goes on', () => {
    const { status, stderr, stdout } = darkline(['check', 'good.fits/below', 'good.fits', '--format', 'csv'], {
      cwd: root,
    })
    expect(status).toBe(1)
    expect(stderr).toBe('good.fits/below: path requires a file or folder, got ENOTDIR from the system\n')
    expect(stdout).toMatch(/^good.fits,/m)
  })

  it('prints nothing that steers a terminal', () => {
    expect(printable('a\u001b[31m\nb\u202ec')).toBe('a?[31m?b?c')
    writeFileSync(join(root, 'x\u001b[2J.fits'), 'no FITS')
    const { stderr } = darkline(['check', 'x\u001b[2J.fits', 'good.fits'], { cwd: root })
    expect(stderr).toMatch(/^x\?\[2J\.fits, byte 0: file requires/)
  })

  it('survives fluxes no one can square, with a reason or a note and never a stack', () => {
    writeFileSync(join(root, 'huge.fits'), image(hill.map((value) => value * 1e300)))
    writeFileSync(join(root, 'spike.fits'), image(hill.map((value, i) => (i === 300 ? 1e308 : value))))
    writeFileSync(join(root, 'close.fits'), image(hill, 1e-9))
    const { status, stdout, stderr } = darkline(['check', 'huge.fits', 'spike.fits', 'close.fits', '--format', 'csv'], {
      cwd: root,
    })
    expect(stderr).toBe('')
    expect(stdout).toMatch(/^huge\.fits,.*,flux-scaled,/m)
    expect(stdout).toMatch(/^spike\.fits,.*,absurd-flux,/m)
    expect(stdout).not.toMatch(/unforeseen/)
    expect(status).toBe(1)
  })

  it('ends on interrupt with its status and without unfinished files', async () => {
    const main = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url))
    const night = join(root, 'night')
    mkdirSync(night)
    for (let i = 0; i < 60; i++) writeFileSync(join(night, `${i}.fits`), image(hill))
    const out = join(root, 'out')
    const run = spawn(process.execPath, [main, 'classify', night, '--out', out, '--workers', '0'])
    const looking = setInterval(() => {
      if (existsSync(out) && readdirSync(out).some((name) => name.endsWith('.part'))) run.kill('SIGINT')
    }, 50)
    const status = await new Promise((resolve) => run.on('exit', resolve))
    clearInterval(looking)
    expect(status).toBe(130)
    expect(readdirSync(out)).toEqual([])
  })
})

describe('fileNames', () => {
  it('gives every target a file of its own, whatever the names', () => {
    expect(fileNames(['a', 'A', 'a-2', '../../etc/x', '..', '<b>', ''])).toEqual([
      'a',
      'A-2',
      'a-2-2',
      'etc-x',
      'target',
      'b',
      'target-2',
    ])
  })
})
