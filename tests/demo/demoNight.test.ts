import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { DEMO_STAMP, demoNight, demoStamp } from '../../src/demo/demoNight.ts'

const made = (clean: boolean): Map<string, Uint8Array> =>
  new Map([...demoNight({ clean })].map(({ path, bytes }) => [path, bytes]))
const digest = (files: Map<string, Uint8Array>): string => {
  const hash = createHash('sha256')
  for (const [path, bytes] of files) hash.update(path).update(bytes)
  return hash.digest('hex')
}

describe('demoNight', () => {
  const night = made(false)
  const clean = made(true)

  it('gives the same bytes every time', () => {
    expect(digest(made(false))).toBe(digest(night))
  })

  it('stays below 12 MB', () => {
    for (const files of [night, clean]) {
      expect([...files.values()].reduce((sum, bytes) => sum + bytes.length, 0)).toBeLessThan(12e6)
    }
  })

  it('ends with a stamp that tells the nights apart', () => {
    expect([...night.keys()].at(-1)).toBe(DEMO_STAMP)
    expect(new TextDecoder().decode(night.get(DEMO_STAMP))).toBe(demoStamp({ clean: false }))
    expect(demoStamp({ clean: false })).not.toBe(demoStamp({ clean: true }))
  })

  it('leaves the red arcs, the target never observed and the copy to one of the nights only', () => {
    const text = (bytes: Uint8Array): string => new TextDecoder('latin1').decode(bytes.subarray(0, 2880))
    const holding = (files: Map<string, Uint8Array>, pattern: RegExp): number =>
      [...files.values()].filter((bytes) => pattern.test(text(bytes))).length
    expect(holding(night, /LAMP {4}= 'NeHe/)).toBe(0)
    expect(holding(clean, /LAMP {4}= 'NeHe/)).toBeGreaterThan(2)
    expect(holding(night, /OBJECT {2}= 'Dorvath/)).toBe(0)
    expect(holding(clean, /OBJECT {2}= 'Dorvath/)).toBe(4)
    expect([...night.keys()].filter((path) => path.includes('copy'))).toHaveLength(1)
    expect([...clean.keys()].filter((path) => path.includes('copy'))).toHaveLength(0)
  })
})
