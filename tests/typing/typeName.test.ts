import { describe, expect, it } from 'vitest'
import { TYPES_IN_USE, parseType, typeName } from '../../src/typing/typeName.ts'

describe('typeName', () => {
  // Type numbers are this program's own scale: O0 = 0, B0 = 10 … M0 = 60.
  it.each([
    [42, 'G2'],
    [12.4, 'B2.5'],
    [60, 'M0'],
    [9.6, 'O9.5'],
    [69.4, 'M9'],
    [0, 'O2'],
  ])('names %f as %s', (number, name) => expect(typeName(number)).toBe(name))

  it('names only types in use: A6, A8, K6, K8 and K9 never', () => {
    for (let x = 0; x < 70; x += 0.05) expect(['A6', 'A8', 'K6', 'K8', 'K9']).not.toContain(typeName(x))
  })

  it('is read back by parseType as the same number', () => {
    for (const type of TYPES_IN_USE) expect(parseType(typeName(type))?.typeNumber).toBeCloseTo(type, 10)
  })

  it('refuses what is no number', () => {
    expect(() => typeName(NaN)).toThrow('typeName requires a finite number, got NaN')
  })
})

describe('parseType', () => {
  // Ways of writing seen in catalogues; the numbers follow from the scale above and I = 1 … V = 5.
  it.each([
    ['G2V', 42, 5],
    ['K0 III', 50, 3],
    ['B2.5 Iab', 12.5, 1],
    ['F5 IV-V', 35, 4.5],
    ['A0Vn', 20, 5],
    ['O9.5V', 9.5, 5],
    ['M4', 64, undefined],
    ['K1-2 II/III', 51.5, 2.5],
    ['B9.5Ia+', 19.5, 1],
    ['M3.5 III e', 63.5, 3],
    ['O9.5V+B0.2V', 9.5, 5],
    ['gK3', 53, 3],
    ['dM2e', 62, 5],
    ['G8: III', 48, 3],
    ['A5', 25, undefined],
  ])('reads %s', (text, typeNumber, luminosity) => {
    const parsed = parseType(text)
    expect(parsed?.typeNumber).toBeCloseTo(typeNumber, 10)
    expect(parsed?.luminosity).toBe(luminosity)
    expect(parsed?.isOutside).toBe(false)
  })

  it.each([
    ['DA', 'white dwarf'],
    ['DA3.5', 'white dwarf'],
    ['sdB', 'hot subdwarf'],
    ['sdO5', 'hot subdwarf'],
    ['L3.5', 'brown dwarf'],
    ['C5,2', 'carbon'],
  ])('knows %s for a %s, which has no type number', (text, kind) => {
    expect(parseType(text)).toMatchObject({ isOutside: true, kind })
    expect(parseType(text)?.typeNumber).toBeUndefined()
  })

  it('gives a metal-weak subdwarf its type', () => {
    expect(parseType('sdF8')).toMatchObject({ typeNumber: 38, kind: 'metal-weak', isOutside: false })
  })

  it('keeps what follows the class', () => {
    expect(parseType('A0Vn')?.suffix).toBe('n')
    expect(parseType('B2Ve')?.suffix).toBe('e')
  })

  it('widens the error for a bare letter and for a range', () => {
    expect(parseType('K')?.typeError).toBe(3)
    expect(parseType('K0-4')?.typeError).toBe(2)
  })

  it.each(['', 'star', 'unknown', 'Arc lamp', '12', 'galaxy', 'Mars', 'Flat', 'Bias'])('knows %j for no type', (text) =>
    expect(parseType(text)).toBeUndefined(),
  )
})
