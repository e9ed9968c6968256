import { gzipSync } from 'node:zlib'
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { FormatError } from '../../src/errors.ts'
import { verifyChecksums } from '../../src/fits/checksum.ts'
import { readImage } from '../../src/fits/image.ts'
import { readImageRows } from '../../src/fits/imageRows.ts'
import { readColumn } from '../../src/fits/table.ts'
import { encodeFits } from '../../src/fits/write.ts'
import { seededUniform } from '../../src/numeric/random.ts'
import { hasShared, sharedPath } from '../support/shared.ts'
import { openBytes } from './sharedFile.ts'

/** Everything the reader can do with a file; data or FormatError, each HDU and column on its own. */
function readWhole(bytes: Uint8Array): { readonly read: number; readonly refused: number } {
  let read = 0
  let refused = 0
  const attempt = <T>(task: () => T): T | undefined => {
    try {
      const value = task()
      read++
      return value
    } catch (error) {
      if (!(error instanceof FormatError)) throw error
      expect(error.message).toMatch(/ requires? /)
      refused++
      return undefined
    }
  }
  const opened = attempt(() => openBytes(bytes))
  for (const hdu of opened?.file.hdus ?? []) {
    const { source } = opened as NonNullable<typeof opened>
    attempt(() => verifyChecksums(source, hdu))
    if (hdu.kind === 'image' || hdu.kind === 'compressed image') {
      attempt(() => readImage(source, hdu))
      const [width = 0, rows = 0] = hdu.dimensions
      if (rows > 0 && width < 10_000) {
        attempt(() => readImageRows(source, hdu, { firstRow: 0, rowCount: 1 }, new Float32Array(width)))
      }
    }
    for (const column of hdu.columns.slice(0, 20)) attempt(() => readColumn(source, hdu, column))
  }
  return { read, refused }
}

const made = encodeFits([
  { kind: 'image', bitpix: 16, dimensions: [20, 3], values: Array.from({ length: 60 }, (_, i) => i), zero: 32768 },
  { kind: 'image', bitpix: -32, dimensions: [30], values: Array.from({ length: 30 }, Math.sqrt), name: 'SIGMA' },
  {
    kind: 'table',
    rows: 4,
    columns: [
      { name: 'WAVE', letter: 'D', values: [1, 2, 3, 4] },
      { name: 'NAME', letter: 'A', values: ['a', 'b', 'c', 'd'] },
      { name: 'ID', letter: 'K', values: [1, 2, 3, 4] },
      { name: 'CELL', letter: 'E', repeat: 3, values: Array.from({ length: 12 }, (_, i) => i) },
    ],
  },
])

/** Small files of the shared containers, one for every way of storing data. */
const SHARED = [
  'synth/vla_Q.fits',
  'synth/rows_uint_tzero_bits_complex.fits',
  'synth/tile_gzip2_f32_q16.fits.fz',
  'real/suite_c/compressed_with_nan.fits',
  'real/suite_c/m13_hcomp.fits',
  'real/suite_c/m13_plio.fits',
  'real/suite_c/ascii_i4-i20.fits',
  'real/suite_e/testBinaryTable.fits.fz',
  'real/suite_e/test.fits.Z',
  'synth/lin_gzip_two_members.fits.gz',
]

const starts: readonly (readonly [string, Uint8Array])[] = [
  ['an image, an extension and a table', made],
  ['the same in gzip', new Uint8Array(gzipSync(made))],
  ...(hasShared ? SHARED : []).map(
    (path) => [path, new Uint8Array(readFileSync(sharedPath(`containers/${path}`)))] as const,
  ),
]

const DIGITS = '0123456789-TFPQJ '

/** Trials a file and kind of damage; DARKLINE_DAMAGE asks for more. */
const TRIALS = Number(process.env.DARKLINE_DAMAGE ?? 12)

describe.each(starts)('damage to %s', (_name, good) => {
  it('ends in data or in a FormatError when bytes are flipped anywhere', () => {
    const random = seededUniform(20261201)
    for (let trial = 0; trial < TRIALS; trial++) {
      const bytes = good.slice()
      const flips = 1 + Math.floor(random() * 8)
      for (let i = 0; i < flips; i++) bytes[Math.floor(random() * bytes.length)] = Math.floor(random() * 256)
      readWhole(bytes)
    }
  })

  it('ends in data or in a FormatError when digits and letters of the headers change', () => {
    const random = seededUniform(7)
    const cards: number[] = []
    for (let at = 0; at + 80 <= good.length; at += 80) if (good[at + 8] === 61 && good[at + 9] === 32) cards.push(at)
    for (let trial = 0; trial < TRIALS * 2; trial++) {
      const bytes = good.slice()
      const card = cards[Math.floor(random() * cards.length)] ?? 0
      for (let i = 0; i < 3; i++) {
        bytes[card + 10 + Math.floor(random() * 21)] = DIGITS.charCodeAt(Math.floor(random() * DIGITS.length))
      }
      readWhole(bytes)
    }
  })

  it('ends in data or in a FormatError wherever the file is cut', () => {
    const random = seededUniform(99)
    for (let trial = 0; trial < TRIALS; trial++) readWhole(good.slice(0, Math.floor(random() * good.length)))
    expect(readWhole(good.slice(0, 0))).toEqual({ read: 0, refused: 1 })
  })
})
