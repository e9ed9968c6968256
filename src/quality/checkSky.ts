import { firstNotBelow } from '../numeric/firstNotBelow.ts'
import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { median, robustSigma } from '../numeric/median.ts'
import { percent } from './figures.ts'
import { isMolecular } from './samples.ts'
import type { Limits, Samples, SpectrumInput } from './samples.ts'

/** Å, air: [O I] of the night sky (Osterbrock & Martel 1992); 5577 stands alone, 6300 may blend with OH. */
const SKY_LINES = [5577.339, 6300.304] as const
/** Å on either side whose scatter the line is compared with. */
const SURROUNDINGS = 120
/** Share of the level below which a residue is not worth a word. */
const FAINTEST = 0.04
/** Å, air: main parts of the oxygen bands with the levels beside them. */
const OXYGEN = [
  { name: 'B', band: [6867, 6890], sides: [6835, 6860, 6915, 6945] },
  { name: 'A', band: [7594, 7640], sides: [7555, 7585, 7710, 7745] },
] as const

/** Says whether lines of the night sky are left or taken out twice, and what the air's oxygen does. */
export function checkSky(input: SpectrumInput, samples: Samples, limit: Limits): readonly Finding[] {
  if (input.spectrum.frame === 'star') return []
  return [...SKY_LINES.flatMap((line) => checkLine(input, samples, line, limit)), ...checkOxygen(input, samples, limit)]
}

function checkLine(input: SpectrumInput, samples: Samples, line: number, limit: Limits): Finding[] {
  const { wavelength, residual, step } = samples
  const known = input.resolution && !input.resolution.isUpperLimit ? input.resolution.fwhm : 0
  const fwhm = Math.max(known, 2.2 * step)
  const first = firstNotBelow(wavelength, line - SURROUNDINGS)
  const last = firstNotBelow(wavelength, line + SURROUNDINGS)
  if (last - first < 40 || wavelength[first] > line - 4 * fwhm || wavelength[last - 1] < line + 4 * fwhm) return []
  // a file on the barycentre's scale has its sky lines shifted by up to 30 km/s
  const reach = 0.6 * fwhm + (input.spectrum.frame === 'topocentric' ? 0 : line * 1e-4)
  const [x, y] = [wavelength.subarray(first, last), residual.subarray(first, last)]
  let here = 0
  for (let i = 0; i < x.length; i++) {
    if (Math.abs(x[i] - line) > reach) continue
    const height = heightAt(x, y, i, fwhm)
    if (Math.abs(height) > Math.abs(here)) here = height
  }
  if (Math.abs(here) < FAINTEST) return []
  const beside: number[] = []
  for (let i = 0; i < x.length; i++) if (Math.abs(x[i] - line) > 2 * fwhm) beside.push(heightAt(x, y, i, fwhm))
  const scatter = robustSigma(beside)
  if (!(Math.abs(here) > limit('skySigma') * scatter)) return []
  const level = Math.abs(here) > limit('skyResidual') ? 'doubt' : 'note'
  const code = here > 0 ? 'sky-left' : 'sky-over-subtracted'
  const what = here > 0 ? 'stands above the star by' : 'was taken out too strongly, by'
  const text = `The sky line at ${line.toFixed(0)} Å ${what} ${percent(Math.abs(here))} of the level, ${(Math.abs(here) / scatter).toFixed(0)} times the scatter beside it`
  return [finding(QUALITY_RULES, code, text, { value: here, limit: limit('skyResidual'), level })]
}

/** Height of the Gaussian of width `fwhm` at sample i that fits best above the median around it. */
function heightAt(x: Float64Array, y: Float64Array, i: number, fwhm: number): number {
  let from = i
  while (from > 0 && x[from - 1] >= x[i] - 3 * fwhm) from--
  let to = i + 1
  while (to < x.length && x[to] <= x[i] + 3 * fwhm) to++
  const level = median(y.subarray(from, to))
  let cross = 0
  let square = 0
  for (let j = from; j < to; j++) {
    const away = Math.abs(x[j] - x[i])
    if (away > 1.5 * fwhm) continue
    const shape = Math.exp(-4 * Math.LN2 * (away / fwhm) ** 2)
    cross += shape * (y[j] - level)
    square += shape * shape
  }
  return cross / square
}

function checkOxygen(input: SpectrumInput, samples: Samples, limit: Limits): Finding[] {
  const molecular = isMolecular(input.type)
  const depths = OXYGEN.flatMap(({ name, band, sides }) => {
    const inside = meanFlux(samples, band[0], band[1])
    const [blue, red] = [meanFlux(samples, sides[0], sides[1]), meanFlux(samples, sides[2], sides[3])]
    return inside && blue && red
      ? [{ name, depth: 1 - inside.mean / ((blue.mean + red.mean) / 2), error: inside.error }]
      : []
  })
  const present = depths.filter(({ depth }) => depth > limit('telluricDepth'))
  const over = molecular
    ? []
    : depths.filter(({ depth, error }) => depth < -limit('telluricResidual') && depth < -5 * error)
  const words = (list: typeof depths): string =>
    list.map(({ name, depth }) => `${name} by ${percent(Math.abs(depth))}`).join(', ')
  const found: Finding[] = []
  if (present.length && !molecular) {
    const deepest = Math.max(...present.map(({ depth }) => depth))
    const text = `The oxygen bands of the air are not corrected: they take light (${words(present)})`
    found.push(finding(QUALITY_RULES, 'telluric-bands', text, { value: deepest, limit: limit('telluricDepth') }))
  }
  if (over.length) {
    const highest = Math.min(...over.map(({ depth }) => depth))
    const text = `The oxygen bands of the air were divided out too strongly: they stand above the level (${words(over)})`
    found.push(
      finding(QUALITY_RULES, 'telluric-over-corrected', text, { value: highest, limit: -limit('telluricResidual') }),
    )
  }
  return found
}

/** Mean of flux ÷ level between two wavelengths with its error; undefined where fewer than three samples fall. */
function meanFlux(
  { wavelength, residual, noise }: Samples,
  from: number,
  to: number,
): { readonly mean: number; readonly error: number } | undefined {
  const first = firstNotBelow(wavelength, from)
  const last = firstNotBelow(wavelength, to)
  if (last - first < 3) return undefined
  let sum = 0
  let variance = 0
  for (let i = first; i < last; i++) {
    sum += residual[i] + 1
    variance += (noise[i] || 0) ** 2
  }
  return { mean: sum / (last - first), error: Math.sqrt(variance) / (last - first) }
}
