import type { Note } from '../findings/types.ts'
import { medianInPlace } from '../numeric/select.ts'
import type { Spectrum } from './types.ts'

/** Powers of ten of the middle flux within which squares, weights and the single precision of pages hold. */
const POWERS = [-30, 25] as const
/** A sample this many times the middle flux is no light: no detector counts so far. */
const ABSURD = 1e9

/**
 * The spectrum with fluxes that can be squared and summed: where the median of |flux| lies outside 1e-30 to 1e25, all is
 * divided by a power of ten, and the unit says so; samples a thousand million times above that median are taken for
 * missing. Both are said in a note. The spectrum itself where neither is needed, as nearly always.
 */
export function moderateFlux(spectrum: Spectrum): Spectrum {
  const { flux, usable } = spectrum
  const size = new Float64Array(flux.length)
  let count = 0
  let largest = 0
  for (let i = 0; i < flux.length; i++) {
    const value = Math.abs(flux[i])
    if (!usable[i] || !(value > 0 && value < Infinity)) continue
    size[count++] = value
    if (value > largest) largest = value
  }
  if (count === 0) return spectrum
  const middle = medianInPlace(size, count)
  const power = Math.floor(Math.log10(middle))
  const isModerate = power >= POWERS[0] && power <= POWERS[1]
  if (isModerate && !(largest / middle > ABSURD)) return spectrum
  const notes: Note[] = []
  const kept = usable.slice()
  let absurd = 0
  for (let i = 0; i < flux.length; i++) {
    if (!kept[i] || !(Math.abs(flux[i]) / middle > ABSURD)) continue
    kept[i] = 0
    absurd++
  }
  if (absurd)
    notes.push({
      code: 'absurd-flux',
      text: `${absurd} samples are taken for missing: they lie over ${ABSURD} times above the median flux, the largest is ${largest.toPrecision(3)}`,
    })
  if (isModerate) return { ...spectrum, usable: kept, notes: [...spectrum.notes, ...notes] }
  notes.push({
    code: 'flux-scaled',
    text: `fluxes are divided by 1e${power}: their median is ${middle.toPrecision(3)}, too far from 1 to reckon with`,
  })
  // In two steps: 1e-320 has no reciprocal.
  const [half, rest] = [10 ** Math.trunc(power / 2), 10 ** (power - Math.trunc(power / 2))]
  const scaled = (values: Float64Array): Float64Array => values.map((value) => value / half / rest)
  return {
    ...spectrum,
    flux: scaled(flux),
    usable: kept,
    ...(spectrum.sigma ? { sigma: scaled(spectrum.sigma) } : {}),
    ...(spectrum.sky ? { sky: scaled(spectrum.sky) } : {}),
    fluxUnit: `10**${power} ${spectrum.fluxUnit}`.trim(),
    notes: [...spectrum.notes, ...notes],
  }
}
