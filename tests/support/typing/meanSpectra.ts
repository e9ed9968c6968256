import type { Continuum } from '../../../src/continuum/types.ts'
import type { Spectrum } from '../../../src/spectrum/types.ts'
import type { CalibrationSpectra } from '../../../src/tables/types.ts'
import type { RestFrame } from '../../../src/velocity/types.ts'
import type { MeasuredStar } from './buildCalibration.ts'
import { SPEED_OF_LIGHT } from '../../../src/numeric/speedOfLight.ts'

/** Å: bins of the mean spectra; wide enough that no spectrum of the sources could be made again from them. */
const STEP = 10
const FIRST = 3805
const BINS = 520
/** Flux over continuum in bins at rest; NaN where a bin is not covered. */
export function normalisedBins(spectrum: Spectrum, continuum: Continuum, frame: RestFrame): Float64Array {
  const sum = new Float64Array(BINS)
  const count = new Float64Array(BINS)
  const { wavelength, flux, usable } = spectrum
  for (let i = 0; i < wavelength.length; i++) {
    const bin = Math.floor((wavelength[i] / (1 + frame.velocity / SPEED_OF_LIGHT) - FIRST + STEP / 2) / STEP)
    if (bin < 0 || bin >= BINS || !usable[i] || !(continuum.level[i] > 0)) continue
    sum[bin] += flux[i] / continuum.level[i]
    count[bin]++
  }
  return sum.map((value, i) => (count[i] ? value / count[i] : NaN))
}

/** Subclasses about a type from which stars are averaged, and fewest of them. */
const REACH = 1.5
const FEWEST = 3

/** Mean normalised spectra for every second type and the classes I, III and V that have three stars or more. */
export function meanSpectra(stars: readonly MeasuredStar[]): CalibrationSpectra {
  const rows: CalibrationSpectra['rows'][number][] = []
  for (const luminosity of [1, 3, 5])
    for (let type = 4; type <= 68; type += 2) {
      const members = stars.filter(
        ({ star }) =>
          Math.abs(star.typeNumber - type) <= REACH &&
          groupOf(star.luminosity) === luminosity &&
          star.metals === 'solar',
      )
      if (members.length < FEWEST) continue
      const values = Array.from({ length: BINS }, (_, bin) => {
        const known = members.map(({ bins }) => bins[bin]).filter((value) => Number.isFinite(value))
        if (known.length < FEWEST) return -1
        return Math.max(0, Math.round((1000 * known.reduce((sum, value) => sum + value, 0)) / known.length))
      })
      rows.push({ type, luminosity, stars: members.length, values })
    }
  return { first: FIRST, step: STEP, rows }
}

function groupOf(luminosity: number | undefined): number {
  if (luminosity === undefined || luminosity > 3.5) return 5
  return luminosity > 1.5 ? 3 : 1
}
