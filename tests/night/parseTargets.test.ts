import { describe, expect, it } from 'vitest'
import { parseTargets } from '../../src/night/parseTargets.ts'
import { said } from './madeOutcomes.ts'

describe('parseTargets', () => {
  it('reads every column, with absent cells absent', () => {
    const text = `object,ra,dec,mag,pm_ra_mas,pm_dec_mas,epoch,expected_type,wanted_snr,priority,note
HD 1,10.5,-20.25,7.5,-12,3.5,2015.5,K0III,80,1,"bright, double"
HD 2,,,,,,,,,,
`
    expect(parseTargets(text, 'list.csv')).toEqual({
      targets: [
        {
          object: 'HD 1',
          ra: 10.5,
          dec: -20.25,
          mag: 7.5,
          pmRa: -12,
          pmDec: 3.5,
          epoch: 2015.5,
          expectedType: 'K0III',
          wantedSnr: 80,
          priority: 1,
          note: 'bright, double',
        },
        { object: 'HD 2' },
      ],
      findings: [],
    })
  })

  it('reads sexagesimal positions, right ascension in hours', () => {
    const rows = ['12:30:36,-05:15:00', '12 30 36,-05 15 00', '12h30m36s,-5d15m00s', '187.65,-5.25'].map(
      (cells, i) => `s${i},${cells}`,
    )
    const { targets, findings } = parseTargets(`object,ra,dec\n${rows.join('\n')}`, 'list')
    expect(findings).toEqual([])
    for (const { ra, dec } of targets) {
      // 12 h 30 m 36 s = 12.51 h = 187.65°
      expect(ra).toBeCloseTo(187.65, 10)
      expect(dec).toBeCloseTo(-5.25, 10)
    }
  })

  it('keeps the sign of a declination between 0 and −1 degree', () => {
    expect(parseTargets('object,dec\nx,-00:30:00', 'list').targets[0].dec).toBe(-0.5)
  })

  it('names line, column and value of a cell that breaks its rule, and keeps the rest of the row', () => {
    const { targets, findings } = parseTargets(
      'object,ra,dec,wanted_snr\nHD 1,400,-20,80\nHD 2,10,12:75:00,many\n',
      'list.csv',
    )
    expect(targets).toEqual([
      { object: 'HD 1', dec: -20, wantedSnr: 80 },
      { object: 'HD 2', ra: 10 },
    ])
    expect(findings.map(({ text }) => text)).toEqual([
      "list.csv, line 2, column 6: ra requires degrees from 0 to 360 or hours as hh:mm:ss, got '400'",
      "list.csv, line 3, column 9: dec requires degrees from -90 to 90 or dd:mm:ss, got '12:75:00'",
      "list.csv, line 3, column 18: wanted_snr requires a number above 0, got 'many'",
    ])
  })

  it('leaves out a row without a name, and says so', () => {
    const { targets, findings } = parseTargets('object,ra\n,10\nHD 2,20', 'list')
    expect(targets).toHaveLength(1)
    expect(said(findings)).toEqual(['doubt target-list-cell'])
  })

  it('takes semicolons and tabs, a byte-order mark, comments, quotes over line ends and Windows line ends', () => {
    expect(parseTargets('\uFEFF# my list\r\nobject;mag\r\n"HD ""1""\r\nB";7\r\n', 'list').targets).toEqual([
      { object: 'HD "1"\r\nB', mag: 7 },
    ])
    expect(parseTargets('object\tmag\nHD 1\t7', 'list').targets).toEqual([{ object: 'HD 1', mag: 7 }])
  })

  it('notes unknown columns and names listed twice', () => {
    const { findings } = parseTargets('object,colour\nHD 1,red\nhd_1,blue', 'list')
    expect(said(findings)).toEqual(['note target-list-column', 'note target-listed-twice'])
  })

  it('refuses a list without the column object', () => {
    expect(() => parseTargets('name,ra\nx,1', 'list')).toThrow('target list requires a column object, got name, ra')
    expect(() => parseTargets('', 'list')).toThrow('target list requires a column object, got nothing')
  })

  it('keeps an expected type it does not know, and says so', () => {
    const { targets, findings } = parseTargets('object,expected_type\nAlpha,ZZ top\nBeta,G2V\nGamma,DA\n', 'list.csv')
    expect(targets.map((t) => t.expectedType)).toEqual(['ZZ top', 'G2V', 'DA'])
    expect(findings.map((f) => f.code)).toEqual(['expected-type-unknown'])
    expect(findings[0].text).toContain("list.csv, line 2, column 7: 'ZZ top'")
  })
})
