import type { Continuum } from '../../continuum/types.ts'
import type { Spectrum } from '../../spectrum/types.ts'
import { SPEED_OF_LIGHT } from '../../numeric/speedOfLight.ts'

/** Running sums of a spectrum's usable light, so that the mean over any window costs the same however wide it is. */
export interface LightSums {
  /** shape (n + 1) [Å]: edges of the samples. */
  readonly edges: Float64Array
  /** shape (n + 1): ∫ flux dλ up to each edge, over usable samples. */
  readonly light: Float64Array
  /** shape (n + 1): (∫ noise dλ)² summed over samples. */
  readonly variance: Float64Array
  /** shape (n + 1) [Å]: width of the usable samples. */
  readonly width: Float64Array
  /** Observed ÷ rest wavelength of the frame that windows are given in. */
  readonly stretch: number
}

/** Mean light in a window: [flux unit], its 1 σ of noise, the share of the window that is usable. */
export interface MeanLight {
  readonly mean: number
  readonly error: number
  readonly used: number
}

/** A step this many times its neighbour's is a gap, not a wide sample. */
const GAP = 2.5

/** Sums of a spectrum's light in the frame of a velocity [km/s]. */
export function sumLight({ wavelength, flux, usable }: Spectrum, { noise }: Continuum, velocity: number): LightSums {
  const n = wavelength.length
  const edges = new Float64Array(n + 1)
  const light = new Float64Array(n + 1)
  const variance = new Float64Array(n + 1)
  const width = new Float64Array(n + 1)
  edges[0] = wavelength[0] - 0.5 * (wavelength[1] - wavelength[0])
  for (let i = 0; i < n; i++) {
    const after = i + 1 < n ? wavelength[i + 1] - wavelength[i] : wavelength[i] - wavelength[i - 1]
    const before = i > 0 ? wavelength[i] - wavelength[i - 1] : after
    edges[i + 1] = wavelength[i] + 0.5 * after
    const whole = edges[i + 1] - edges[i]
    const isGap = after > GAP * before || before > GAP * after
    const isUsed = usable[i] === 1 && Number.isFinite(flux[i])
    const step = isUsed ? (isGap ? Math.min(whole, before, after) : whole) : 0
    light[i + 1] = light[i] + (isUsed ? flux[i] * step : 0)
    variance[i + 1] = variance[i] + (isUsed && noise[i] > 0 ? (noise[i] * step) ** 2 : 0)
    width[i + 1] = width[i] + step
  }
  return { edges, light, variance, width, stretch: 1 + velocity / SPEED_OF_LIGHT }
}

/** Mean light over [lo, hi] Å at rest; NaN with `used` 0 where nothing is usable. */
export function meanLight({ edges, light, variance, width, stretch }: LightSums, lo: number, hi: number): MeanLight {
  const a = placeOf(edges, lo * stretch)
  const b = placeOf(edges, hi * stretch)
  const used = between(width, a, b)
  return {
    mean: between(light, a, b) / used,
    error: Math.sqrt(Math.max(0, between(variance, a, b))) / used,
    used: used / ((hi - lo) * stretch),
  }
}

/** Fractional index of a wavelength among the edges, held at the ends. */
function placeOf(edges: Float64Array, wavelength: number): number {
  let low = 0
  let high = edges.length - 1
  if (wavelength <= edges[low]) return low
  if (wavelength >= edges[high]) return high
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (edges[middle] <= wavelength) low = middle
    else high = middle
  }
  return low + (wavelength - edges[low]) / (edges[high] - edges[low])
}

function between(sums: Float64Array, a: number, b: number): number {
  return valueAt(sums, b) - valueAt(sums, a)
}

function valueAt(sums: Float64Array, place: number): number {
  const i = Math.floor(place)
  return i + 1 < sums.length ? sums[i] + (place - i) * (sums[i + 1] - sums[i]) : sums[i]
}

/** The same sums, with windows in the frame of a redshift. */
export function atRedshift(sums: LightSums, redshift: number): LightSums {
  return { ...sums, stretch: 1 + redshift }
}
