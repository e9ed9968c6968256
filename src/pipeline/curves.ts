import type { Continuum } from '../continuum/types.ts'
import type { Curves } from '../quality/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { ExpectedSpectrum } from '../typing/expected.ts'
import type { RestFrame } from '../velocity/types.ts'
import { levelMatched } from './levelMatched.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** Points a page can show across its width; each bin keeps its lowest and highest sample, so that no line is lost. */
const MOST_POINTS = 1800

/** Curves for pages: thinned by keeping the extremes of equal runs of samples. NaN where there is no usable value. */
export function thinnedCurves(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  expected?: Pick<ExpectedSpectrum, 'wavelength' | 'normalised'>,
): Curves {
  const kept = extremes(spectrum)
  const n = kept.length
  const wavelength = new Float64Array(n)
  const restWavelength = new Float64Array(n)
  const flux = new Float32Array(n)
  const level = new Float32Array(n)
  const normalised = new Float32Array(n)
  const shift = 1 + frame.velocity / SPEED_OF_LIGHT
  for (let j = 0; j < n; j++) {
    const i = kept[j]
    wavelength[j] = spectrum.wavelength[i]
    restWavelength[j] = spectrum.wavelength[i] / shift
    flux[j] = spectrum.usable[i] ? spectrum.flux[i] : NaN
    level[j] = continuum.level[i]
    normalised[j] = continuum.level[i] > 0 ? flux[j] / continuum.level[i] : NaN
  }
  return {
    wavelength,
    restWavelength,
    flux,
    continuum: level,
    normalised,
    ...(expected ? { expected: expectedCurve(restWavelength, normalised, expected) } : {}),
  }
}

/** An expected spectrum at the samples of a measured one, its level matched to it. */
export function expectedCurve(
  restWavelength: Float64Array,
  normalised: Float32Array,
  expected: Pick<ExpectedSpectrum, 'wavelength' | 'normalised'>,
): Float32Array {
  const values = Float32Array.from(restWavelength, (x) => interpolated(expected, x))
  return levelMatched(restWavelength, normalised, values)
}

/** Indices that keep the lowest and highest usable sample of each of MOST_POINTS / 2 runs, and both ends. */
function extremes({ flux, usable }: Spectrum): number[] {
  const n = flux.length
  if (n <= MOST_POINTS) return Array.from({ length: n }, (_, i) => i)
  const kept: number[] = []
  const runs = MOST_POINTS / 2
  for (let run = 0; run < runs; run++) {
    const [from, to] = [Math.floor((run * n) / runs), Math.floor(((run + 1) * n) / runs)]
    let low = -1
    let high = -1
    for (let i = from; i < to; i++) {
      if (!usable[i] || !Number.isFinite(flux[i])) continue
      if (low < 0 || flux[i] < flux[low]) low = i
      if (high < 0 || flux[i] > flux[high]) high = i
    }
    if (low < 0) kept.push(from)
    else kept.push(...(low === high ? [low] : [Math.min(low, high), Math.max(low, high)]))
  }
  return kept
}

function interpolated(
  { wavelength, normalised }: { readonly wavelength: ArrayLike<number>; readonly normalised: ArrayLike<number> },
  x: number,
): number {
  const n = wavelength.length
  if (n < 2 || x < wavelength[0] || x > wavelength[n - 1]) return NaN
  let [low, high] = [0, n - 1]
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (wavelength[middle] <= x) low = middle
    else high = middle
  }
  const part = (x - wavelength[low]) / (wavelength[high] - wavelength[low])
  return normalised[low] + part * (normalised[high] - normalised[low])
}
