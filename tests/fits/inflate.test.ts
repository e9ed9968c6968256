import { spawnSync } from 'node:child_process'
import { readFileSync } from 'node:fs'
import { deflateRawSync, gzipSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { inflateSource } from '../../src/fits/inflate.ts'
import { readImage } from '../../src/fits/image.ts'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import { encodeFits } from '../../src/fits/write.ts'
import { hasShared, sharedPath } from '../support/shared.ts'
import { requireTool } from '../support/tools.ts'
import { hduAt, openBytes } from './sharedFile.ts'

const values = Array.from({ length: 5000 }, (_, i) => Math.sin(i) * 1000)
const plain = encodeFits([{ kind: 'image', bitpix: -64, dimensions: [5000], values }])
const inflate = (bytes: Uint8Array): Uint8Array => {
  const source = inflateSource(memorySource(bytes))
  return new Uint8Array(source.read(0, source.size))
}

describe('inflateSource', () => {
  it('gives a source that is not compressed back as it is', () => {
    const source = memorySource(plain)
    expect(inflateSource(source)).toBe(source)
    expect(inflateSource(memorySource(new Uint8Array(2))).size).toBe(2)
  })

  it('inflates gzip of one and of several members', () => {
    expect(Buffer.compare(inflate(gzipSync(plain)), plain)).toBe(0)
    const members = [plain.subarray(0, 3000), plain.subarray(3000)].map((part) => gzipSync(part))
    expect(Buffer.compare(inflate(Buffer.concat(members)), plain)).toBe(0)
  })

  it('inflates a zip archive of one file', () => {
    const packed = deflateRawSync(plain)
    const header = Buffer.alloc(30 + 6)
    header.writeUInt32LE(0x04034b50, 0)
    header.writeUInt16LE(8, 8)
    header.writeUInt16LE(6, 26)
    header.write('a.fits', 30)
    expect(Buffer.compare(inflate(Buffer.concat([header, packed])), plain)).toBe(0)
  })

  it('stops where the headers say that the file ends, whatever follows in the stream', () => {
    // two members, so that the size in the last four bytes is not that of the whole; 40 MB of zeros after 42 kB
    const bomb = Buffer.concat([gzipSync(plain), gzipSync(Buffer.alloc(40_000_000))])
    const source = inflateSource(memorySource(bomb))
    expect(source.size).toBeLessThan(plain.length + 17_100_000)
    expect(readImage(source, hduAt(openFits(source), 0))).toEqual(Float64Array.from(values))
  })

  it('stops at the bound for a stream that is no FITS at all', () => {
    const source = inflateSource(memorySource(gzipSync(Buffer.alloc(40_000_000))))
    expect(source.size).toBeLessThan(17_100_000)
    expect(() => openFits(source)).toThrow(expect.objectContaining({ code: 'not-fits' }))
  })

  it('never passes the bound that it is given', () => {
    const source = inflateSource(memorySource(gzipSync(plain)), { mostBytes: 10_000 })
    expect(source.size).toBe(10_000)
    expect(source.notes).toEqual([{ code: 'inflate-cut', text: 'inflating stops after 10000 bytes' }])
  })

  it('keeps what comes out of a cut stream and says so where the data are wanted', () => {
    const packed = gzipSync(plain)
    const { source, file } = openBytes(packed.subarray(0, packed.length >> 1))
    expect(file.notes.map(({ code }) => code)).toEqual(['gzip-cut'])
    expect(() => readImage(source, hduAt(file, 0))).toThrow(
      /got the end of the file at byte \d+ \(gzip stream ends early/,
    )
    expect(readImage(source, hduAt(file, 0), { start: 0, count: 100 })).toEqual(Float64Array.from(values.slice(0, 100)))
  })

  it('notes a wrong check value and reads on', () => {
    const packed = gzipSync(plain)
    packed.writeUInt32LE(12345, packed.length - 8)
    const { source, file } = openBytes(packed)
    expect(file.notes.map(({ code }) => code)).toEqual(['gzip-check'])
    expect(readImage(source, hduAt(file, 0))).toEqual(Float64Array.from(values))
  })
})

describe.skipIf(!hasShared || !requireTool('uncompress'))('expandLzw (needs ../shared and uncompress)', () => {
  const files = ['suite_c/lzw', 'suite_j/testfile', 'suite_e/rp600245n00_im1', 'suite_e/test']
  it.each(files)('expands real/%s.fits.Z to the bytes that uncompress gives', (name) => {
    const path = sharedPath(`containers/real/${name}.fits.Z`)
    const { stdout } = spawnSync('uncompress', ['-c', path], { maxBuffer: 1 << 28 })
    expect(stdout.length).toBeGreaterThan(0)
    const own = inflate(new Uint8Array(readFileSync(path)))
    expect(Buffer.compare(own, stdout)).toBe(0)
  })
})
