import { describe, expect, it } from 'vitest'
import { joinOrders } from '../../src/spectrum/joinOrders.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'

/** An invented spectrum of samples 1 Å apart with one flux level. */
function spectrum(first: number, last: number, given: Partial<Spectrum> & { level?: number } = {}): Spectrum {
  const { level = 1, ...rest } = given
  const n = last - first + 1
  const wavelength = Float64Array.from({ length: n }, (_, i) => first + i)
  return {
    wavelength,
    flux: new Float64Array(n).fill(level),
    usable: new Uint8Array(n).fill(1),
    hdu: 0,
    medium: 'air',
    mediumHow: 'declared',
    frame: 'unknown',
    fluxUnit: '',
    fluxKind: 'unknown',
    uncertainty: 'none',
    convention: 'invented',
    role: 'star',
    facts: { object: 'HD 1' },
    asStored: { samples: n, medium: 'air', first, last, fluxFirst: level, fluxLast: level, nonfinite: 0 },
    notes: [],
    ...rest,
  }
}

const isRising = (values: Float64Array): boolean => values.every((value, i) => i === 0 || value > values[i - 1])

describe('joinOrders', () => {
  it('joins rows that overlap into one rising spectrum without a sample lost outside the overlaps', () => {
    const orders = [
      spectrum(5000, 5100, { row: 2 }),
      spectrum(4900, 5010, { row: 1 }),
      spectrum(4800, 4910, { row: 0 }),
    ]
    const [joined, ...rest] = joinOrders(orders)
    expect(rest).toHaveLength(0)
    expect(isRising(joined.wavelength)).toBe(true)
    // Every whole Å from 4800 to 5100 once.
    expect(joined.wavelength).toHaveLength(301)
    expect(joined.row).toBeUndefined()
    expect(joined.joinedFrom).toEqual([
      { hdu: 0, row: 0 },
      { hdu: 0, row: 1 },
      { hdu: 0, row: 2 },
    ])
    expect(joined.notes.map((note) => note.code)).toEqual(['joined'])
  })

  it('joins arms in different extensions star by star', () => {
    const arm = (hdu: number, first: number, last: number): readonly Spectrum[] => [
      spectrum(first, last, { hdu, row: 0, level: 1 }),
      spectrum(first, last, { hdu, row: 1, level: 2 }),
    ]
    const joined = joinOrders([...arm(1, 3600, 5800), ...arm(2, 5700, 7600)])
    expect(joined.map(({ flux }) => flux[0])).toEqual([1, 2])
    expect(joined.map(({ joinedFrom }) => joinedFrom?.length)).toEqual([2, 2])
  })

  it('changes from one to the other where the signals cross', () => {
    // The left falls from 2 to 0 and the right rises from 0 to 2 over 5000 to 5100: equal at 5050.
    const left = spectrum(4900, 5100)
    const right = spectrum(5000, 5200)
    const fall = { ...left, flux: left.wavelength.map((w) => (w < 5000 ? 2 : (5100 - w) / 50)) }
    const rise = { ...right, row: 1, flux: right.wavelength.map((w) => (w > 5100 ? 2 : (w - 5000) / 50)) }
    const [joined] = joinOrders([{ ...fall, row: 0 }, rise])
    for (let i = 0; i < joined.wavelength.length; i++) {
      const w = joined.wavelength[i]
      // The cut is found to a sixteenth of the overlap, 6 Å.
      if (Math.abs(w - 5050) > 7) expect(joined.flux[i]).toBe(w < 5050 ? fall.flux[i] : rise.flux[w - 5000])
    }
  })

  it('does not rescale levels, and says how far they differ', () => {
    const [joined] = joinOrders([
      spectrum(4800, 4910, { row: 0, level: 1 }),
      spectrum(4900, 5010, { row: 1, level: 3 }),
    ])
    expect(new Set(joined.flux)).toEqual(new Set([1, 3]))
    expect(joined.notes.map((note) => note.code)).toEqual(['joined', 'join-step'])
    expect(joined.notes[1].text).toMatch(/factor 3\.00/)
  })

  it('keeps σ where one part has it, NaN elsewhere', () => {
    const left = { ...spectrum(4800, 4900, { row: 0 }), sigma: new Float64Array(101).fill(0.1) }
    const [joined] = joinOrders([left, spectrum(4901, 5000, { row: 1 })])
    expect(joined.sigma?.[0]).toBe(0.1)
    expect(joined.sigma?.[150]).toBeNaN()
  })

  it.each([
    ['stars that cover the same range', [spectrum(4000, 5000, { row: 0 }), spectrum(4000, 5000, { row: 1 })]],
    ['fibres that are shifted a little', [spectrum(4000, 5000, { row: 0 }), spectrum(4010, 5010, { row: 1 })]],
    [
      'different objects',
      [spectrum(4000, 4100, { row: 0 }), spectrum(4090, 4200, { row: 1, facts: { object: 'HD 2' } })],
    ],
    ['ranges far apart', [spectrum(4000, 4100, { row: 0 }), spectrum(6000, 6100, { row: 1 })]],
    ['sky beside a star', [spectrum(4000, 4100, { row: 0 }), spectrum(4090, 4200, { row: 1, role: 'sky' })]],
    [
      'a flux beside its normalised copy',
      [spectrum(4000, 4100), spectrum(4001, 4101, { hdu: 4, fluxKind: 'normalised' })],
    ],
    ['one spectrum', [spectrum(4000, 4100)]],
    ['none', []],
  ])('leaves %s apart', (_name, spectra) => {
    expect(joinOrders(spectra)).toEqual(spectra)
  })
})
