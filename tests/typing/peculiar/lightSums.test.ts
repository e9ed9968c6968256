import { describe, expect, it } from 'vitest'
import type { Continuum } from '../../../src/continuum/types.ts'
import { madeSpectrum } from '../../../src/demo/madeSpectrum.ts'
import { FINE_SAMPLES } from '../../../src/demo/grid.ts'
import type { Spectrum } from '../../../src/spectrum/types.ts'
import { atRedshift, meanLight, sumLight } from '../../../src/typing/peculiar/lightSums.ts'
import { strengthOf } from '../../../src/typing/peculiar/strength.ts'
import { withoutSpikes } from '../../../src/typing/peculiar/withoutSpikes.ts'

const flat = madeSpectrum(new Float64Array(FINE_SAMPLES).fill(1), { first: 4000, last: 4400, step: 2 })
const withFlux = (of: (wavelength: number, i: number) => number): Spectrum => ({
  ...flat,
  flux: flat.wavelength.map((x, i) => of(x, i)),
})
const noise = (sigma: number): Continuum => ({
  level: flat.flux.map(() => 1),
  error: flat.flux.map(() => 0),
  isPseudo: false,
  supported: 1,
  noise: flat.flux.map(() => sigma),
  noiseFrom: 'measured',
})

describe('meanLight', () => {
  it('is exact for a slope, with parts of samples counted as parts', () => {
    // the mean of a straight line over whole samples is its value in the middle
    const sums = sumLight(
      withFlux((x) => x),
      noise(0),
      0,
    )
    expect(meanLight(sums, 4099, 4201).mean).toBeCloseTo(4150, 9)
    expect(meanLight(sums, 4099, 4100).used).toBeCloseTo(1, 12)
  })

  it('has the error of independent samples', () => {
    // 51 samples of 2 Å: σ / √51
    const found = meanLight(
      sumLight(
        withFlux(() => 1),
        noise(0.1),
        0,
      ),
      4099,
      4201,
    )
    expect(found.error).toBeCloseTo(0.1 / Math.sqrt(51), 12)
  })

  it('says how much of a window lies in the data', () => {
    const sums = sumLight(
      withFlux(() => 1),
      noise(0),
      0,
    )
    expect(meanLight(sums, 3800, 3900)).toMatchObject({ used: 0 })
    expect(meanLight(sums, 3949, 4049).used).toBeCloseTo(0.5, 12)
  })
})

describe('strengthOf', () => {
  const windows = { band: [4141, 4161], blue: [4101, 4121], red: [4181, 4201] } as const
  // a box that takes half of the light over 10 Å has W = 5 Å by definition
  const box = withFlux((x) => (x > 4145 && x < 4157 && x !== 4156 ? 0.5 : 1))

  it('is the width of light taken', () => {
    expect(strengthOf(sumLight(box, noise(0), 0), windows)?.ew).toBeCloseTo(5, 9)
  })

  it('follows the windows to a redshift', () => {
    const moved = { ...box, wavelength: box.wavelength.map((x) => x * 1.01) }
    expect(strengthOf(atRedshift(sumLight(moved, noise(0), 0), 0.01), windows)?.ew).toBeCloseTo(5, 9)
  })

  it('is not measured where a window is not covered', () => {
    expect(strengthOf(sumLight(box, noise(0), 0), { ...windows, red: [4390, 4430] })).toBeUndefined()
  })
})

describe('withoutSpikes', () => {
  it('takes a single high sample out of use and leaves a line of two samples FWHM alone', () => {
    const spiked = withFlux((_, i) => (i === 80 ? 3 : 1))
    const kept = withFlux((x) => 1 + 2 * Math.exp(-4 * Math.LN2 * ((x - 4160) / 4) ** 2))
    expect([...withoutSpikes(spiked, noise(0.02)).usable].indexOf(0)).toBe(80)
    expect(withoutSpikes(kept, noise(0.02))).toBe(kept)
  })
})
