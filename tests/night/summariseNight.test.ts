import { describe, expect, it } from 'vitest'
import type { NightSummary } from '../../src/night/types.ts'
import { plainName } from '../../src/night/targetName.ts'
import type { Outcome } from '../../src/quality/types.ts'
import type { HeaderFacts } from '../../src/spectrum/types.ts'
import {
  madeCalibrations,
  madeFrame,
  madeNight,
  madeSpectrum,
  MINUTE,
  NIGHT,
  said,
  SETUP,
  STARS,
  starFacts,
} from './madeOutcomes.ts'

const [A, B] = STARS

/** Header facts without some of them. */
function without(facts: HeaderFacts, ...left: readonly (keyof HeaderFacts)[]): HeaderFacts {
  return Object.fromEntries(Object.entries(facts).filter(([name]) => !(left as readonly string[]).includes(name)))
}

/** A night in which nothing is wrong: the three stars, their raw frames, a standard, all calibrations. */
function goodNight(): Outcome[] {
  return [
    ...madeCalibrations(),
    ...STARS.map((star, i) => madeSpectrum({ star, mjd: NIGHT + 10 * i * MINUTE })),
    ...STARS.map((star, i) =>
      madeFrame('science', starFacts(star, NIGHT + 10 * i * MINUTE), {
        statistics: { trace: { position: 90, fwhm: 3, peak: 500 } },
      }),
    ),
    madeFrame('standard', starFacts(A, NIGHT + 40 * MINUTE), {
      statistics: { trace: { position: 90, fwhm: 3, peak: 500 } },
    }),
  ]
}

/** All findings of a night, wherever they hang. */
function all(night: NightSummary) {
  return [
    ...night.findings,
    ...night.spectra.flatMap(({ findings }) => findings),
    ...night.targets.flatMap(({ findings }) => findings),
    ...night.cover.flatMap(({ findings }) => findings),
    ...night.drifts.flatMap(({ findings }) => findings),
    ...[...night.frameFindings.values()].flat(),
  ]
}

const target = (night: NightSummary, name: string) =>
  night.targets.find(({ target }) => plainName(target) === plainName(name))

describe('summariseNight', () => {
  it('finds nothing wrong in a good night', () => {
    const night = madeNight(goodNight())
    expect(all(night)).toEqual([])
    expect(night.counts).toEqual({ usable: 3, doubtful: 0, unusable: 0, unreadable: 0 })
    expect(night.notObserved).toEqual([])
    expect(night.observeAgain).toEqual([])
    expect(night.targets.map(({ target }) => target)).toEqual(['Made A', 'Made B', 'Made C'])
    expect(night.spectra.map(({ expectedProbability }) => expectedProbability)).toEqual([0.8, 0.8, 0.8])
    for (const { separationArcsec } of night.spectra) expect(separationArcsec).toBeLessThan(1e-6)
  })

  it('gives the log in order of time, files without a time last', () => {
    const timeless = without(starFacts(A, NIGHT), 'mjdStart', 'mjdMid')
    const night = madeNight([madeFrame('science', timeless, { file: 'none' }), ...goodNight().reverse()])
    const times = night.log.map(({ mjd }) => mjd)
    expect(times.slice(0, -1)).toEqual([...times.slice(0, -1)].sort((a, b) => (a ?? 0) - (b ?? 0)))
    expect(night.log.at(-1)?.file).toBe('none')
    expect(night.mjdFirst).toBeCloseTo(NIGHT - 300 * MINUTE, 8)
    expect(night.mjdLast).toBeCloseTo(NIGHT + 40 * MINUTE, 8)
  })

  it('answers for a night without any file and without a target list', () => {
    const empty = madeNight([], [])
    expect(empty).toMatchObject({ spectra: [], targets: [], log: [], cover: [], drifts: [], findings: [] })
    expect(empty.mjdFirst).toBeUndefined()
    const listless = madeNight([madeSpectrum()], [])
    expect(all(listless)).toEqual([])
    expect(listless.targets).toHaveLength(1)
    expect(listless.targets[0].observeAgain).toBe(false)
  })

  it('changes no outcome it is given', () => {
    const outcomes = goodNight()
    const before = structuredClone(outcomes)
    madeNight(outcomes)
    expect(outcomes).toEqual(before)
  })
})

describe('the right star', () => {
  it('finds a telescope that pointed beside the star', () => {
    const night = madeNight([madeSpectrum({ star: A, facts: { dec: -30.1 } })], [A])
    expect(said(night.spectra[0].findings)).toContain('doubt position-off-target')
    expect(night.spectra[0].quality).toBe('doubtful')
    // 0.1° = 6′
    expect(night.spectra[0].findings[0].text).toContain('6′ from Made A')
    expect(target(night, 'Made A')).toMatchObject({ observeAgain: true })
  })

  it('finds names that were exchanged between two stars', () => {
    const night = madeNight(
      [
        madeSpectrum({ star: A, object: 'Made B' }),
        madeSpectrum({ star: B, object: 'made_a', mjd: NIGHT + 10 * MINUTE }),
      ],
      [A, B],
    )
    for (const { findings } of night.spectra)
      expect(said(findings)).toEqual(expect.arrayContaining(['doubt wrong-star', 'doubt names-swapped']))
    // the position decides whose spectrum it is
    expect(night.spectra.map(({ target }) => target)).toEqual(['Made A', 'Made B'])
  })

  it('finds two stars exchanged by their types where the positions are the commanded ones', () => {
    const night = madeNight(
      [madeSpectrum({ star: A, type: 'G2V' }), madeSpectrum({ star: B, type: 'A0V', mjd: NIGHT + 10 * MINUTE })],
      [A, B],
    )
    for (const { findings } of night.spectra)
      expect(said(findings)).toEqual(expect.arrayContaining(['doubt type-unlike-expected', 'doubt types-look-swapped']))
  })

  it('judges the type by its probability and asks to look again', () => {
    const night = madeNight([madeSpectrum({ star: A, type: 'M2III' })], [A])
    const [found] = night.spectra[0].findings
    expect(found).toMatchObject({ code: 'type-unlike-expected', level: 'doubt', value: 0.0001, limit: 0.003 })
    expect(found.text).toBe('The type found is M2III, the list expects A0V: its probability is below 0.001')
    expect(target(night, 'Made A')?.reason).toContain('the type found is not the one expected')
  })

  it('notes stars that are not on the list and names that are not those of the list', () => {
    const stranger = { object: 'Stranger', ra: 215, dec: -25 }
    const night = madeNight(
      [madeSpectrum({ star: stranger }), madeSpectrum({ star: A, object: 'A of my own', mjd: NIGHT + 10 * MINUTE })],
      [A],
    )
    expect(said(night.spectra[0].findings)).toEqual(['note not-on-target-list'])
    expect(said(night.spectra[1].findings)).toEqual(['note name-not-on-target-list'])
    expect(night.spectra[1].target).toBe('Made A')
  })

  it('finds one name given to two positions, and keeps the two stars apart', () => {
    const night = madeNight(
      [madeSpectrum({ star: A }), madeSpectrum({ star: { ...B, object: 'Made A' }, mjd: NIGHT + 10 * MINUTE })],
      [],
    )
    for (const { findings } of night.spectra) expect(said(findings)).toContain('doubt one-name-two-positions')
    expect(night.targets).toHaveLength(2)
  })
})

describe('targets', () => {
  it('adds up exposures in quadrature and asks for the time that is missing', () => {
    const night = madeNight(
      [madeSpectrum({ star: A, snr: 30 }), madeSpectrum({ star: A, snr: 30, mjd: NIGHT + 10 * MINUTE })],
      [A],
    )
    const summary = target(night, 'Made A')
    expect(summary?.snrReached).toBeCloseTo(30 * Math.SQRT2, 9)
    // S/N² grows with time: 600 s gave 1800, 6400 wanted: 600 (6400/1800 − 1) = 1533 s, rounded up to two digits
    expect(summary).toMatchObject({ observeAgain: true, exposureNeeded: 1600 })
    expect(summary?.reason).toBe('signal-to-noise 42.4 per Å reached, 80 wanted')
    expect(said(summary?.findings ?? [])).toEqual(['doubt signal-below-wanted'])
  })

  it('asks for a shorter exposure of a saturated star', () => {
    const fault = { level: 'fault', code: 'flat-topped', text: 'The top is cut off' } as const
    const night = madeNight([madeSpectrum({ star: A, spectrum: { quality: 'unusable', findings: [fault] } })], [A])
    expect(target(night, 'Made A')).toMatchObject({ observeAgain: true, exposureNeeded: 90 })
    expect(target(night, 'Made A')?.reason).toBe('no spectrum can be used: the top is cut off')
  })

  it('asks for the full time again of a star too faint to use', () => {
    const fault = { level: 'fault', code: 'too-faint', text: 'Nothing but noise' } as const
    const night = madeNight(
      [madeSpectrum({ star: A, snr: 2, spectrum: { quality: 'unusable', findings: [fault] } })],
      [A],
    )
    // 300 s gave 2: 300 (80/2)² s
    expect(target(night, 'Made A')?.exposureNeeded).toBe(480000)
  })

  it('lists a target never observed with the time its magnitude needs', () => {
    const night = madeNight([madeSpectrum({ star: A, snr: 80 })], [A, { ...B, mag: 12.5, wantedSnr: 40 }])
    expect(night.notObserved.map(({ object }) => object)).toEqual(['Made B'])
    // A: magnitude 10, 80 in 300 s. B: 2.5 magnitudes fainter is 10 times less light, a quarter of the S/N²: 750 s
    expect(night.observeAgain).toMatchObject([
      { target: 'Made B', exposureNeeded: 750, reason: 'listed but not observed' },
    ])
    expect(said(night.findings)).toEqual(['doubt never-observed'])
  })

  it('does not call a target with raw frames unobserved', () => {
    const night = madeNight([madeFrame('science', starFacts(A, NIGHT))], [A])
    expect(night.notObserved).toEqual([])
    expect(target(night, 'Made A')).toMatchObject({ observeAgain: false, spectra: [] })
    expect(said(target(night, 'Made A')?.findings ?? [])).toEqual(['note only-raw-frames'])
  })

  it('puts the most urgent first: by reason, then by priority', () => {
    const night = madeNight([madeSpectrum({ star: B, snr: 60 })], STARS)
    const again = night.observeAgain ?? []
    expect(again.map(({ target }) => target)).toEqual(['Made A', 'Made C', 'Made B'])
    for (const { urgency } of again) expect(urgency).toBeGreaterThan(0)
    expect([...again].sort((a, b) => b.urgency - a.urgency)).toEqual(again)
  })

  it('counts a file that is there twice once', () => {
    const first = madeSpectrum({ star: A, snr: 60 })
    const night = madeNight([first, { ...first, file: 'made/copy.fits' }], [A])
    expect(said(night.spectra[1].findings)).toEqual(['note duplicate-file'])
    expect(target(night, 'Made A')?.snrReached).toBe(60)
    const rewritten = madeNight([first, { ...first, file: 'made/other.fits', sha256: 'other' }], [A])
    expect(said(rewritten.spectra[1].findings)).toEqual(['note same-exposure-twice'])
    expect(target(rewritten, 'Made A')?.snrReached).toBe(60)
  })

  it('counts files that could not be read', () => {
    const broken: Outcome = {
      file: 'x.fits',
      size: 10,
      spectra: [],
      notes: [],
      error: { code: 'truncated-data', message: 'cut' },
    }
    expect(madeNight([broken, madeSpectrum()], []).counts).toEqual({
      usable: 1,
      doubtful: 0,
      unusable: 0,
      unreadable: 1,
    })
  })
})

describe('clock and sky', () => {
  it('finds times that are local instead of UTC by the airmasses', () => {
    const night = madeNight(
      STARS.map((star, i) => {
        const made = starFacts(star, NIGHT + 20 * i * MINUTE)
        // the clock of the headers is 4 h behind
        const facts = {
          ...without(made, 'hourAngle'),
          mjdMid: (made.mjdMid ?? 0) - 4 / 24,
          mjdStart: (made.mjdStart ?? 0) - 4 / 24,
        }
        return madeFrame('science', facts)
      }),
      [],
    )
    expect(night.findings).toMatchObject([{ code: 'time-zone-slip', level: 'doubt', value: 4 }])
    // once the slip is known, airmasses agree
    expect([...night.frameFindings.values()].flat()).toEqual([])
  })

  it('finds a wrong airmass, with the one that time, place and position give', () => {
    const night = madeNight([madeSpectrum({ facts: { airmass: 1.9 } })], [])
    const [found] = night.spectra[0].findings
    expect(found).toMatchObject({ code: 'airmass-differs', level: 'doubt' })
    expect(found.text).toMatch(/^The header gives an airmass of 1\.90, time, place and position give 1\.\d\d$/)
  })

  it('finds the Sun up, twilight, a star below the horizon and one that stands low', () => {
    const at = (mjd: number, star = A) => {
      const facts = without(starFacts(star, mjd), 'airmass', 'hourAngle')
      return said([...madeNight([madeFrame('science', facts)], []).frameFindings.values()].flat())
    }
    // about 13:00 local time
    expect(at(NIGHT + 14 / 24)).toContain('doubt sun-up')
    // the Sun sets near 21:50 UTC at that place in May
    expect(at(NIGHT - 4.7 / 24, { object: 'x', ra: 150, dec: -30 })).toContain('note twilight')
    expect(at(NIGHT, { object: 'x', ra: 40, dec: 10 })).toEqual(['doubt below-horizon'])
    expect(at(NIGHT, { object: 'x', ra: 290, dec: -30 })).toContain('note high-airmass')
  })

  it('finds a file whose time breaks the order of its number', () => {
    const frames = Array.from({ length: 12 }, (_, i) => {
      const mjd = NIGHT + 6 * i * MINUTE - (i === 7 ? 2 / 24 : 0)
      const facts = without(starFacts(A, mjd), 'site')
      return madeFrame('science', facts, { file: `night/x${String(i + 20).padStart(4, '0')}.fits` })
    })
    const night = madeNight(frames, [])
    expect([...night.frameFindings.keys()]).toContain(7)
    expect(said(night.frameFindings.get(7) ?? [])).toEqual(['doubt clock-out-of-order'])
    // it should come 6 min after number 26 and comes 114 min before
    expect(night.frameFindings.get(7)?.[0].text).toBe(
      'By its number the file comes after x0026.fits, by its time 1.90 h before it',
    )
    expect([...night.frameFindings.values()].flat()).toHaveLength(1)
  })

  it('finds exposures of one detector that overlap', () => {
    const first = without(starFacts(A, NIGHT), 'site')
    const second = without(starFacts(B, NIGHT + 2 * MINUTE), 'site')
    const night = madeNight([madeFrame('science', first), madeFrame('science', second)], [])
    // both last 300 s and begin 120 s apart
    expect(night.frameFindings.get(1)).toMatchObject([
      { code: 'exposures-overlap', value: expect.closeTo(180, 0) as number },
    ])
  })

  it('notes files of another night', () => {
    const night = madeNight([...goodNight(), madeFrame('flat', { ...SETUP, mjdStart: NIGHT + 6 })])
    expect(said([...night.frameFindings.values()].flat())).toEqual(['note another-night'])
  })
})

describe('drifts', () => {
  it('finds a jump of the wavelength zero point and names the time', () => {
    const spectra = Array.from({ length: 10 }, (_, i) =>
      madeSpectrum({
        star: STARS[i % 3],
        mjd: NIGHT + 10 * i * MINUTE,
        spectrum: { zeroPoint: { offset: (i < 6 ? 2 : 62) + (i % 3), error: 4, from: 'sky lines' } },
      }),
    )
    const night = madeNight(spectra)
    const drift = night.drifts.find(({ quantity }) => quantity === 'wavelength zero point')
    expect(drift?.findings).toMatchObject([{ code: 'zero-point-jump', level: 'doubt' }])
    // number 6 was taken 60 min after 03:00
    expect(drift?.findings[0].text).toContain('between 03:50 (Made C) and 04:00 (Made A) UTC')
  })

  it('finds a common velocity of the stars of a night', () => {
    const spectra = Array.from({ length: 12 }, (_, i) =>
      madeSpectrum({
        star: { object: `Star ${i}`, ra: 200 + i, dec: -30 },
        mjd: NIGHT + 10 * i * MINUTE,
        spectrum: {
          barycentricVelocity: -83 + 12 * ((i % 5) - 2),
          restFrame: { velocity: -83, error: 4, trusted: true, how: 'cross-correlation' },
        },
      }),
    )
    const [found] = madeNight(spectra, []).findings
    expect(found).toMatchObject({ code: 'common-wavelength-offset', level: 'doubt' })
    expect(found.text).toContain('the difference between air and vacuum')
  })
})
