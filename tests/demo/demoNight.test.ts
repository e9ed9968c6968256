import { describe, expect, it } from 'vitest'
import { DEMO_STAMP, demoNight, demoStamp } from '../../src/demo/demoNight.ts'

/** Files up to the first quick-look spectra of several forms; what follows is made alike. */
const FIRST = 42

describe('demoNight', () => {
  it('gives the same bytes every time, and others with another seed', () => {
    const [one, two, other] = [1, 1, 2].map((seed) => demoNight({ clean: false, seed }))
    let differing = 0
    for (let i = 0; i < FIRST; i++) {
      const [a, b, c] = [one, two, other].map((night) => night.next().value)
      if (!a || !b || !c) throw new Error('the night ends too early')
      expect(b.path).toBe(a.path)
      expect(Buffer.compare(a.bytes, b.bytes), a.path).toBe(0)
      if (Buffer.compare(a.bytes, c.bytes) !== 0) differing++
    }
    // all but README.txt and targets.csv hold noise
    expect(differing).toBe(FIRST - 2)
  })

  it('begins with what it is and the list of targets', () => {
    const night = demoNight({ clean: true })
    const [about, list] = [night.next().value, night.next().value]
    const text = (file: typeof about): string => new TextDecoder().decode(file?.bytes)
    expect(text(about)).toContain('do not exist')
    expect(text(list).split('\n')[0]).toBe(
      'object,ra,dec,mag,pm_ra_mas,pm_dec_mas,epoch,expected_type,wanted_snr,priority,note',
    )
  })
})

describe('demoStamp', () => {
  it('tells nights apart that were made otherwise', () => {
    const stamps = [{ clean: false }, { clean: true }, { clean: false, seed: 7 }].map(demoStamp)
    expect(new Set(stamps).size).toBe(3)
    expect(demoStamp({ clean: false })).toBe(stamps[0])
    expect(DEMO_STAMP).toBe('demo-stamp.txt')
  })
})
