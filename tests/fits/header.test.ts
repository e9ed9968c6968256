import { describe, expect, it } from 'vitest'
import { parseCard, parseNumber } from '../../src/fits/card.ts'
import { booleanValue, integerValue, numberValue, readHeader, textValue } from '../../src/fits/header.ts'
import { memorySource } from '../../src/fits/source.ts'
import type { CardValue, Header } from '../../src/fits/types.ts'

const card = (text: string): string => text.padEnd(80)

function headerOfText(cards: readonly string[]): ReturnType<typeof readHeader> {
  const text = [...cards, 'END'].map(card).join('')
  const bytes = new Uint8Array(Buffer.from(text.padEnd(Math.ceil(text.length / 2880) * 2880), 'latin1'))
  return readHeader(memorySource(bytes), 0, 0)
}

const header = (...cards: readonly string[]): Header => headerOfText(cards).header

describe('parseCard', () => {
  // FITS 4.0, sections 4.1 and 4.2 state each of these forms; the values are theirs or exact
  const cases: readonly (readonly [string, string, CardValue, string])[] = [
    ['fixed-format logical', 'SIMPLE  =                    T / file', true, 'file'],
    ['logical false', 'EXTEND  =                    F', false, ''],
    ['fixed-format integer', 'NAXIS1  =                 -300 / axis', -300, 'axis'],
    ['free-format number', 'GAIN    = 1.5/e-/ADU', 1.5, 'e-/ADU'],
    ['exponent of D', 'CRVAL1  = 3.8D+03', 3800, ''],
    ['lower-case exponents', 'CDELT1  = 1.25e-1', 0.125, ''],
    ['point without digits after', 'X       = 4.', 4, ''],
    ['point without digits before', 'X       = -.5', -0.5, ''],
    ['plus sign', 'X       = +7', 7, ''],
    ['integer beyond 2^53', 'BIG     = 9223372036854775807', 9223372036854775807n, ''],
    ['text with a doubled quote', "OBJECT  = 'Barnard''s star' / name", "Barnard's star", 'name'],
    ['text with blanks before it kept', "X       = '  a '", '  a', ''],
    ['slash inside text', "X       = 'a / b' / c", 'a / b', 'c'],
    ['empty text', "X       = ''", '', ''],
    ['undefined value', 'X       =                      / nothing', undefined, 'nothing'],
    ['complex number', 'X       = (1.5, -2) / c', { re: 1.5, im: -2 }, 'c'],
    ['comment', 'COMMENT = 3 is no value', undefined, '= 3 is no value'],
  ]
  it.each(cases)('reads %s', (_what, text, value, comment) => {
    const parsed = parseCard(card(text), 160)
    expect(parsed.card.value).toEqual(value)
    expect(parsed.card.comment).toBe(comment)
    expect(parsed.card.byte).toBe(160)
    expect(parsed.breach).toBeUndefined()
  })

  it('keeps the words of a HIERARCH keyword without the leading one', () => {
    const { card: parsed } = parseCard(card('HIERARCH ESO TEL AIRM START = 1.234 / Airmass at start'), 0)
    expect(parsed).toEqual({ keyword: 'ESO TEL AIRM START', value: 1.234, comment: 'Airmass at start', byte: 0 })
  })

  const breaches: readonly (readonly [string, string, string, CardValue])[] = [
    ['lower-case-keyword', 'crval1  = 5', 'CRVAL1', 5],
    ['unquoted-text', 'UTMIDDLE=12:30:01.5', 'UTMIDDLE', '12:30:01.5'],
    ['value-indicator', 'EXPTIME=300', 'EXPTIME', 300],
    ['unquoted-text', 'OBJECT  = HD 1234 / star', 'OBJECT', 'HD 1234'],
    ['unquoted-text', 'UT      = 12:30:01', 'UT', '12:30:01'],
    ['unclosed-text', "OBJECT  = 'HD 1234", 'OBJECT', 'HD 1234'],
    ['unquoted-text', 'X       = NaN', 'X', 'NaN'],
    ['unquoted-text', 'X       = 0x10', 'X', '0x10'],
  ]
  it.each(breaches)('names %s in "%s" and reads it all the same', (breach, text, keyword, value) => {
    const parsed = parseCard(card(text), 0)
    expect([parsed.card.keyword, parsed.card.value]).toEqual([keyword, value])
    expect(parsed.breach).toBe(breach)
  })
})

describe('parseNumber', () => {
  it.each(['', '.', '-', 'E5', '1-2', '1.2.3x', '0x1', 'Infinity', '1 2', '--1', '1E'])('refuses "%s"', (text) => {
    expect(parseNumber(text)).toBeUndefined()
  })
})

describe('readHeader', () => {
  it('joins continued text, also where the pieces are empty', () => {
    const read = header("LONG    = 'one &' / first", "CONTINUE  '&'", "CONTINUE  'two' / second", 'NEXT    = 1')
    expect(textValue(read, 'LONG')).toBe('one two')
    expect(read.get('LONG')?.comment).toBe('first second')
    expect(read.cards.map(({ keyword }) => keyword)).toEqual(['LONG', 'NEXT'])
  })

  it('leaves an ampersand at the end of text alone where nothing continues it', () => {
    expect(textValue(header("X       = 'A &'", 'Y       = 1'), 'X')).toBe('A &')
  })

  it('gives the first of two cards with one keyword and notes the other value', () => {
    const { header: read, notes } = headerOfText(['CRVAL1  = 3800.25', 'CRVAL1  = 1.0', 'CRPIX1  = 1', 'CRPIX1  = 1'])
    expect(numberValue(read, 'CRVAL1')).toBe(3800.25)
    expect(notes).toEqual([
      { code: 'duplicate-keyword', text: 'CRVAL1 is given twice (3800.25, then 1 at byte 80); the first is used' },
    ])
  })

  it('keeps bytes outside ASCII as question marks and NUL as a blank, each noted once', () => {
    const { header: read, notes } = headerOfText(["OBJECT  = 'caf\u00e9\u00e9'", "OBSERVER= 'A\0B'"])
    expect([textValue(read, 'OBJECT'), textValue(read, 'OBSERVER')]).toEqual(['caf??', 'A B'])
    expect(notes.map(({ code }) => code)).toEqual(['non-ascii-header', 'nul-in-header'])
  })

  it('says where a header ends that has no END', () => {
    const source = memorySource(new Uint8Array(2880 * 2).fill(32))
    expect(() => readHeader(source, 0, 0)).toThrow(
      expect.objectContaining({ code: 'truncated-header', where: { hdu: 0, byte: 5760 } }),
    )
  })

  it('gives up on a header of more cards than any file holds', () => {
    const source = { size: 1e12, read: (_offset: number, length: number) => new Uint8Array(length).fill(32) }
    expect(() => readHeader(source, 0, 0)).toThrow(expect.objectContaining({ code: 'header-without-end' }))
  })

  it('reads a header that goes on over many blocks', () => {
    const cards = Array.from({ length: 1000 }, (_, i) => `KEY${i}`.padEnd(8) + `= ${i}`)
    const { header: read, size } = headerOfText(cards)
    expect(size).toBe(Math.ceil((1001 * 80) / 2880) * 2880)
    expect([read.cards.length, integerValue(read, 'KEY999')]).toEqual([1000, 999])
  })
})

describe('values by keyword', () => {
  const read = header(
    "TEXT    = '12.5 '",
    'NUMBER  = 3.0',
    'HALF    = 0.5',
    'BIG     = 9223372036854775807',
    'FLAG    = T',
    "X       = '5 km'",
  )
  it('takes a number between quotes for a number, text that only begins like one for none', () => {
    expect(['TEXT', 'NUMBER', 'BIG', 'FLAG', 'X', 'NONE'].map((keyword) => numberValue(read, keyword))).toEqual([
      12.5,
      3,
      2 ** 63,
      undefined,
      undefined,
      undefined,
    ])
  })
  it('takes 3.0 for an integer, 0.5 and what a double cannot hold for none', () => {
    expect(['NUMBER', 'HALF', 'BIG'].map((keyword) => integerValue(read, keyword))).toEqual([3, undefined, undefined])
  })
  it('never takes numbers and text for logicals', () => {
    expect(['FLAG', 'NUMBER', 'TEXT'].map((keyword) => booleanValue(read, keyword))).toEqual([
      true,
      undefined,
      undefined,
    ])
  })
  it('gives text as written', () => {
    expect(['TEXT', 'NUMBER'].map((keyword) => textValue(read, keyword))).toEqual(['12.5', undefined])
  })
})
