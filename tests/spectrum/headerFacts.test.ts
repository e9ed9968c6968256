import { describe, expect, it } from 'vitest'
import { headerOf } from '../../src/fits/header.ts'
import type { CardValue, Header } from '../../src/fits/types.ts'
import { readHeaderFacts } from '../../src/spectrum/headerFacts.ts'
import { geodetic } from '../../src/spectrum/site.ts'
import { mjdOf, parseDate } from '../../src/spectrum/time.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'
import { requirePython, runPython } from '../support/tools.ts'

/** A header of cards; a value may carry its comment. */
function header(cards: Readonly<Record<string, CardValue | readonly [CardValue, string]>>): Header {
  return headerOf(
    Object.entries(cards).map(([keyword, given], i) => {
      const [value, comment] = Array.isArray(given) ? (given as [CardValue, string]) : [given as CardValue, '']
      return { keyword, value, comment, byte: 80 * i }
    }),
  )
}

const read = (cards: Parameters<typeof header>[0]): ReturnType<typeof readHeaderFacts> =>
  readHeaderFacts([header(cards)], KEYWORDS)
const codes = (cards: Parameters<typeof header>[0]): readonly string[] => read(cards).notes.map((note) => note.code)

describe('parseDate', () => {
  it.each([
    // Worked with calendar arithmetic and confirmed with a reference library (2000-01-01T12 is MJD 51544.5 by definition).
    ['2000-01-01T12:00:00', 51544.5],
    ['1996-10-14T10:14:36.123', 50370.42680698],
    ['2024-03-15T03:27:41.5', 60384.14423032],
    ['2026-12-01', 61375],
    ['2000:01:01 12:00:00', 51544.5],
    ['2000/01/01', 51544],
    ['20000101', 51544],
    ['01/01/99', 51179],
    ['2000-01-01T12:00:00Z', 51544.5],
  ])('reads %s', (text, mjd) => {
    expect(parseDate(text)?.mjd).toBeCloseTo(mjd, 8)
  })

  it.each(['0000-00-00', '2001-02-29', '2001-13-01', '21:04:96', 'today', '', '2001-01-01T25:00:00'])(
    'knows that "%s" is no date',
    (text) => {
      expect(parseDate(text)).toBeUndefined()
    },
  )

  it.skipIf(!requirePython('astropy.time'))('agrees with the reference library on 200 dates', () => {
    const dates = Array.from({ length: 200 }, (_, i) => [1950 + (i % 150), 1 + (i % 12), 1 + ((i * 7) % 28)])
    const program = `
import json, sys
from astropy.time import Time
print(json.dumps([Time('%04d-%02d-%02d' % tuple(d), scale='utc').mjd for d in json.loads(sys.argv[1])]))
`
    const expected = JSON.parse(runPython(program, [JSON.stringify(dates)])) as number[]
    expect(dates.map(([year, month, day]) => mjdOf(year, month, day))).toEqual(expected)
  })
})

describe('readHeaderFacts', () => {
  it('takes the first keyword of the table that has a value, the first header before the later', () => {
    const { facts } = readHeaderFacts(
      [header({ OBJECT: 'HD 1' }), header({ OBJECT: 'HD 2', OBSERVER: 'A. Nonym' })],
      KEYWORDS,
    )
    expect(facts.object).toBe('HD 1')
    expect(facts.observer).toBe('A. Nonym')
  })

  it('passes over words that name no object', () => {
    expect(read({ OBJECT: 'RED_SCIENCE_BLUE', 'ESO OBS TARG NAME': 'SMC-X-1' }).facts.object).toBe('SMC-X-1')
    expect(read({ OBJECT: 'unknown', TARGNAME: 'GJ 436' }).facts.object).toBe('GJ 436')
    expect(read({ OBJECT: '' }).facts.object).toBeUndefined()
  })

  it.each([
    // Vega, 18h 36m 56.34s +38° 47' 01.3" (ICRS, Hipparcos; from memory): 279.23475°, 38.78369°.
    ['sexagesimal text', { RA: '18:36:56.34', DEC: '+38:47:01.3' }],
    ['sexagesimal text with blanks', { RA: '18 36 56.34', DEC: '+38 47 01.3' }],
    ['degrees', { RA: 279.23475, DEC: 38.78369 }],
    ['degrees as text', { RA: '279.23475', DEC: '38.78369' }],
    ['hours by the comment', { RA: [18.61565, 'hours'] as const, DEC: 38.78369 }],
    ['hours that the comment repeats', { RA: [18.61565, '18:36:56.34 RA'] as const, DEC: 38.78369 }],
    [
      'radians by the comment',
      { RA: [4.873565, 'RA in radians'] as const, DEC: [0.6769031, 'Dec in radians'] as const },
    ],
    ['packed digits', { 'ESO TEL TARG ALPHA': 183656.34, 'ESO TEL TARG DELTA': 384701.3 }],
  ])('reads a position in %s', (_name, cards) => {
    const { facts } = read(cards)
    expect(facts.ra).toBeCloseTo(279.23475, 4)
    expect(facts.dec).toBeCloseTo(38.78369, 4)
  })

  it('keeps the sign of a declination between 0 and −1 degree', () => {
    expect(read({ RA: '10:00:00', DEC: '-00:30:00' }).facts.dec).toBe(-0.5)
  })

  it('leaves impossible values out and notes each', () => {
    const { facts, notes } = read({ RA: 10, DEC: 120, AIRMASS: 99.9, EXPTIME: -1, 'DATE-OBS': '0000-00-00', GAIN: 0 })
    expect(facts).toEqual({})
    expect(notes.map((note) => note.text)).toEqual([
      'DEC is 120, which is no declination; it is left out',
      'EXPTIME is -1, which is no exposure from 0 to 864000; it is left out',
      "DATE-OBS is '0000-00-00', which is no date; it is left out",
      'AIRMASS is 99.9, which is no airmass from 1 to 40; it is left out',
      'GAIN is 0, which is no gain from 0.001 to 1000; it is left out',
    ])
  })

  it('passes from an impossible value to the next synonym', () => {
    expect(read({ AIRMASS: 0, 'ESO TEL AIRM START': 1.2, 'ESO TEL AIRM END': 1.4 }).facts.airmass).toBeCloseTo(1.3, 12)
  })

  it('takes a position of two zeros for a placeholder', () => {
    expect(read({ RA: 0, DEC: 0 }).facts.ra).toBeUndefined()
    expect(codes({ RA: '00:00:00', DEC: '00:00:00' })).toContain('placeholder-position')
  })

  it('puts the middle of the exposure half its length after the start', () => {
    const { facts } = read({ 'DATE-OBS': '2000-01-01T12:00:00', EXPTIME: 1728 })
    // 1728 s are 0.02 day.
    expect(facts.mjdMid).toBeCloseTo(51544.51, 10)
  })

  it('joins a date with the time of another card', () => {
    expect(read({ 'DATE-OBS': '2000-01-01', UT: '12:00:00', EXPTIME: 0 }).facts.mjdStart).toBeCloseTo(51544.5, 10)
    expect(read({ UTDATE: '2000:01:01', UTSTART: '12:00:00', UTEND: '12:20:00' }).facts).toMatchObject({
      dateObs: '2000-01-01T12:00:00',
      mjdMid: expect.closeTo(51544.5 + 10 / 1440, 8) as number,
    })
  })

  it('does not take a date without time, nor a whole MJD, for the start', () => {
    expect(read({ 'DATE-OBS': '2000-01-01', MJD: 51544, EXPTIME: 100 }).facts.mjdMid).toBeUndefined()
  })

  it('uses the date and notes it when another card gives another time', () => {
    // The header of the IVOA Spectrum Data Model 1.2 example: DATE-OBS and TMID are 175 days apart.
    const { facts, notes } = read({ 'DATE-OBS': '2004-06-03T21:18:17', TMID: 52984.31 })
    expect(facts.mjdStart).toBeCloseTo(53159.8877, 4)
    expect(notes.map((note) => note.code)).toEqual(['times-disagree'])
  })

  it('judges the sign of a longitude by the telescope, whatever its comment says', () => {
    const cards = {
      TELESCOP: 'Liverpool Telescope',
      LATITUDE: 28.7624,
      LONGITUD: [-17.8792, '[degrees West]'] as const,
    }
    expect(read(cards).facts.site?.longitude).toBe(-17.8792)
    expect(codes(cards)).toEqual(['longitude-judged'])
    expect(read({ ...cards, LONGITUD: 17.8792 }).facts.site?.longitude).toBe(-17.8792)
  })

  it('turns a western longitude when only its comment says so', () => {
    expect(read({ SITELAT: 40, SITELONG: [100, 'degrees west'] }).facts.site?.longitude).toBe(-100)
    expect(read({ SITELAT: 40, SITELONG: [100, 'degrees, east positive'] }).facts.site?.longitude).toBe(100)
  })

  it('knows where a named telescope stands, and says that it does', () => {
    const { facts, notes } = read({ TELESCOP: 'ESO-NTT' })
    expect(facts.site).toMatchObject({ longitude: -70.73, latitude: -29.26, name: 'La Silla' })
    expect(notes.map((note) => note.code)).toEqual(['site-guessed'])
  })

  it('counts only lamps that are on', () => {
    expect(read({ LAMP1TYP: 'Xe', LAMP1SET: true, LAMP2TYP: 'W', LAMP2SET: false }).facts.lamp).toBe('Xe')
    expect(read({ LAMPNAMA: 'He', LAMPSTAA: 'off', LAMPNAMB: 'Ar', LAMPSTAB: 'on' }).facts.lamp).toBe('Ar')
  })

  it('gives binning as 2x1 in all its forms', () => {
    for (const cards of [
      { CCDSUM: '2 1' },
      { BINNING: '2x1' },
      { XBINNING: 2, YBINNING: 1 },
      { 'ESO DET WIN1 BINX': 2 },
    ])
      expect(read(cards).facts.binning).toBe('2x1')
  })

  it('joins all words about the kind of frame', () => {
    expect(read({ IMAGETYP: 'WAVE', 'ESO DPR CATG': 'CALIB', 'ESO DPR TYPE': 'WAVE' }).facts.frameWords).toBe(
      'WAVE; CALIB',
    )
  })

  it('says nothing of an empty header', () => {
    expect(read({})).toEqual({ facts: {}, notes: [] })
  })
})

describe('geodetic', () => {
  it.skipIf(!requirePython('astropy.coordinates'))('agrees with the reference library to 1 mm and 1e-9 degree', () => {
    const places = [
      [-70.73, -29.26, 2400],
      [-155.47, 19.82, 4200],
      [149.07, -31.28, 1164],
      [0, 51.48, 46],
    ]
    const program = `
import json, sys
from astropy.coordinates import EarthLocation
out = []
for lon, lat, height in json.loads(sys.argv[1]):
    place = EarthLocation.from_geodetic(lon, lat, height, ellipsoid='GRS80')
    out.append([place.x.value, place.y.value, place.z.value])
print(json.dumps(out))
`
    const found = JSON.parse(runPython(program, [JSON.stringify(places)])) as number[][]
    found.forEach(([x, y, z], i) => {
      const site = geodetic(x, y, z)
      expect(Math.abs((site?.longitude ?? NaN) - places[i][0])).toBeLessThan(1e-9)
      expect(Math.abs((site?.latitude ?? NaN) - places[i][1])).toBeLessThan(1e-9)
      expect(Math.abs((site?.height ?? NaN) - places[i][2])).toBeLessThan(1e-3)
    })
  })

  it('is undefined far from the ground', () => {
    expect(geodetic(1, 2, 3)).toBeUndefined()
  })
})
