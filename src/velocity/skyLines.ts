import type { Spectrum } from '../spectrum/types.ts'
import type { SkyLine } from '../tables/types.ts'
import { fitEmissionLine } from './emissionLine.ts'
import type { EmissionLine } from './emissionLine.ts'

/** A night-sky line as found in the sky that the file carries. */
export interface FoundSkyLine extends EmissionLine {
  readonly line: SkyLine
}

/** A line is believed from this significance on, and when it lies no farther than this [Å] from where it should. */
const BELIEVED = { significance: 8, farthest: 6 } as const

/**
 * The night-sky lines in the sky component of a spectrum, or in the flux of a spectrum that is sky itself; empty for
 * any other, since what a subtraction leaves of a sky line has no place of its own.
 */
export function findSkyLines(spectrum: Spectrum, lines: readonly SkyLine[]): readonly FoundSkyLine[] {
  const sky = spectrum.role === 'sky' ? spectrum.flux : spectrum.sky
  if (sky === undefined) return []
  const { wavelength } = spectrum
  const found: FoundSkyLine[] = []
  for (const line of lines) {
    const step = stepAt(wavelength, line.wavelength)
    if (step === undefined) continue
    const first = fitEmissionLine(wavelength, sky, line.wavelength, Math.max(BELIEVED.farthest + 2, 6 * step))
    if (first === undefined) continue
    const fitted = fitEmissionLine(wavelength, sky, first.centre, Math.max(1.6 * first.fwhm, 4 * step)) ?? first
    const isNear = Math.abs(fitted.centre - line.wavelength) < Math.max(BELIEVED.farthest, fitted.fwhm)
    if (isNear && fitted.significance > BELIEVED.significance && fitted.fwhm > 1.2 * step)
      found.push({ ...fitted, line })
  }
  return found
}

/** Distance of samples [Å] about a wavelength; undefined where it is not covered with some room. */
function stepAt(wavelength: Float64Array, at: number): number | undefined {
  const last = wavelength.length - 1
  let i = 0
  let j = last
  while (j - i > 1) {
    const middle = (i + j) >> 1
    if (wavelength[middle] <= at) i = middle
    else j = middle
  }
  return i < 4 || j > last - 4 ? undefined : wavelength[j] - wavelength[i]
}
