import { describe, expect, it } from 'vitest'
import { encodedChecksum, onesComplementSum, verifyChecksums } from '../../src/fits/checksum.ts'
import { hasShared, NEEDS_SHARED } from '../support/shared.ts'
import { hduAt, openShared } from './sharedFile.ts'

describe('onesComplementSum', () => {
  // worked values: Seaman, Pence & Rots, "FITS Checksum Proposal" (2002), and sums made once with CFITSIO's routine
  const words = (fill: (view: DataView, i: number) => void, step: number): Uint8Array => {
    const bytes = new Uint8Array(2880)
    for (let i = 0; i < 2880; i += step) fill(new DataView(bytes.buffer), i)
    return bytes
  }
  it.each([
    ['blanks', new Uint8Array(2880).fill(32), 1515870810],
    ['zero bytes', new Uint8Array(2880), 0],
    ['bytes of ones', new Uint8Array(2880).fill(255), 4294967295],
    ['32-bit integers of 1', words((view, i) => view.setInt32(i, 1), 4), 720],
    ['32-bit floats of 1', words((view, i) => view.setFloat32(i, 1), 4), 2550137010],
    ['16-bit integers 0 to 1439', words((view, i) => view.setInt16(i, i / 2), 2), 3862423815],
  ])('sums a block of %s', (_what, bytes, sum) => {
    expect(onesComplementSum(bytes)).toBe(sum)
    // the sum of the parts is the sum of the whole
    expect(onesComplementSum(bytes.subarray(1000), onesComplementSum(bytes.subarray(0, 1000)))).toBe(sum)
  })
})

describe('encodedChecksum', () => {
  it('reproduces the worked example of the standard', () => {
    // FITS 4.0, appendix J: sum 868229149, its complement 3426738146
    expect(encodedChecksum(868229149)).toBe('hcHjjc9ghcEghc9g')
  })
  it('gives sixteen zeros for a sum of all ones', () => {
    expect(encodedChecksum(0xffffffff)).toBe('0000000000000000')
  })
})

describe.skipIf(!hasShared)(`verifyChecksums (${NEEDS_SHARED})`, () => {
  const cases: readonly (readonly [string, readonly (readonly [string, string])[]])[] = [
    ['synth/checksum_ok.fits', [['right', 'right']]],
    ['broken/checksum_bad_data.fits', [['wrong', 'wrong']]],
    ['synth/u8_noscale.fits', [['absent', 'absent']]],
    [
      'real/suite_c/checksum.fits',
      [
        ['right', 'right'],
        ['right', 'right'],
      ],
    ],
  ]
  it.each(cases)('%s', (path, wanted) => {
    const { source, file } = openShared(path)
    const states = file.hdus.map((hdu) => verifyChecksums(source, hdu))
    expect(states.map(({ datasum, checksum }) => [datasum.state, checksum.state])).toEqual(wanted)
  })
  it('gives the sum that the file should hold where it is wrong', () => {
    const { source, file } = openShared('broken/checksum_bad_data.fits')
    const { datasum } = verifyChecksums(source, hduAt(file, 0))
    expect(Number(datasum.found)).not.toBe(Number(datasum.written))
  })
})
