import { photonEnergy } from '../numeric/hydrogen.ts'
import { airToVacuum } from '../spectrum/air.ts'
import type { SpectralLine } from '../tables/types.ts'
import type { FoundLine, LineCandidate } from './types.ts'

/** A line that was found, in the observed frame, before it has a name. */
export interface Detection {
  /** Å, air, observed frame. */
  readonly centre: number
  readonly centreErr: number
  readonly kind: 'absorption' | 'emission'
  readonly ew: number
  readonly ewErr: number
  readonly significance: number
  readonly fwhm: number
}

/** What a found line is named from. */
export interface NamingOptions {
  readonly lines: readonly SpectralLine[]
  readonly telluric: readonly { readonly species: string; readonly range: readonly [number, number] }[]
  /** 1 + v/c of the star. */
  readonly stretch: number
  /** Å, FWHM of the instrument. */
  readonly resolution: number
  /** Å, first and last of the data, observed frame. */
  readonly range: readonly [number, number]
}

/** Half of the lines of a blend pull its centre by about this share of the FWHM. */
const BLEND_SHIFT = 0.12
/** A candidate lies within this share of the line's width, or within three σ. */
const REACH = 0.6
/** Fewer candidates than this are kept, most plausible first. */
const MOST_CANDIDATES = 5
/** A name is given from this plausibility on. */
const NAMED = 0.1
/** A line this many times stronger than the others of its species make plausible is not (only) of that species. */
const STRONGER = 4

/** Found lines with their candidates and origin; see `findLines`. */
export function nameLines(detections: readonly Detection[], options: NamingOptions): FoundLine[] {
  const species = presentSpecies(detections, options)
  return detections.map((one) => {
    const candidates = candidatesOf(one, species, options)
    const best = candidates[0]
    const origin = originOf(one, best, options)
    const inStarFrame = origin === 'stellar' || origin === 'nebular'
    const shift = inStarFrame ? options.stretch : 1
    return {
      ...one,
      centre: one.centre / shift,
      centreErr: one.centreErr / shift,
      ew: one.ew / shift,
      ewErr: one.ewErr / shift,
      fwhm: one.fwhm / shift,
      origin,
      candidates: candidates.map(({ line: _, ...candidate }) => candidate),
    }
  })
}

/** Key of a species as seen in one way: 'Fe I absorption', 'H I emission'. */
function keyOf(line: SpectralLine, kind: Detection['kind']): string {
  return `${line.species} ${line.origin ?? 'stellar'} ${kind}`
}

function placeOf(line: SpectralLine, stretch: number): number {
  return line.wavelength * (line.origin === undefined || line.origin === 'nebular' ? stretch : 1)
}

function tolerance(one: Detection, resolution: number): number {
  return Math.hypot(one.centreErr, BLEND_SHIFT * Math.max(one.fwhm, resolution))
}

interface Presence {
  /** Share of the species' lines in the data that were found, weighted by strength. */
  readonly share: number
  /** Typical |W| ÷ strength of those found. */
  readonly scale: number
}

function presentSpecies(detections: readonly Detection[], { lines, stretch, resolution, range }: NamingOptions) {
  const sums = new Map<string, { found: number; all: number; scales: number[] }>()
  for (const line of lines) {
    const place = placeOf(line, stretch)
    if (place < range[0] || place > range[1]) continue
    const strength = line.strength ?? 0.5
    for (const kind of ['absorption', 'emission'] as const) {
      const key = keyOf(line, kind)
      const sum = sums.get(key) ?? { found: 0, all: 0, scales: [] }
      sum.all += strength
      const match = detections.find(
        (one) => one.kind === kind && Math.abs(one.centre - place) < 2.5 * tolerance(one, resolution),
      )
      if (match) {
        sum.found += strength
        sum.scales.push(Math.abs(match.ew) / strength)
      }
      sums.set(key, sum)
    }
  }
  const present = new Map<string, Presence>()
  for (const [key, { found, all, scales }] of sums) {
    scales.sort((a, b) => a - b)
    // Blends make a species look stronger than it is, never weaker: the lower quartile is the safer scale.
    present.set(key, { share: found / all, scale: scales[Math.floor((scales.length - 1) / 4)] ?? 0 })
  }
  return present
}

function candidatesOf(
  one: Detection,
  species: ReadonlyMap<string, Presence>,
  { lines, stretch, resolution }: NamingOptions,
) {
  const found: (LineCandidate & { readonly line: SpectralLine })[] = []
  const near = tolerance(one, resolution)
  for (const line of lines) {
    if ((line.origin === 'sky' || line.origin === 'nebular') && one.kind === 'absorption') continue
    if (line.origin === 'interstellar' && one.kind === 'emission') continue
    const offset = one.centre - placeOf(line, stretch)
    if (Math.abs(offset) > Math.max(3 * near, REACH * one.fwhm)) continue
    const { share, scale } = species.get(keyOf(line, one.kind)) ?? { share: 0, scale: 0 }
    const expected = scale * (line.strength ?? 0.5) * STRONGER
    const excess = expected > 0 ? Math.min(1, expected / Math.abs(one.ew)) : 0
    const plausibility = Math.exp(-0.5 * (offset / near) ** 2) * share * Math.sqrt(excess)
    found.push({
      line,
      species: line.species,
      wavelength: line.wavelength,
      photonEnergy: photonEnergy(airToVacuum(line.wavelength)),
      levels: line.levels,
      offsetSigma: offset / one.centreErr,
      plausibility,
    })
  }
  found.sort((a, b) => b.plausibility - a.plausibility)
  return found.slice(0, MOST_CANDIDATES)
}

function originOf(
  one: Detection,
  best: (LineCandidate & { readonly line: SpectralLine }) | undefined,
  { telluric }: NamingOptions,
): FoundLine['origin'] {
  const band = telluric.find(({ range }) => one.centre > range[0] && one.centre < range[1])
  const named = best !== undefined && best.plausibility >= NAMED
  if (one.kind === 'absorption' && band && (band.species === 'O2' || !named)) return 'telluric'
  if (!named) return 'unknown'
  return best.line.origin ?? 'stellar'
}
