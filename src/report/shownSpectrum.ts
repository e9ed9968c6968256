import { median } from '../numeric/median.ts'
import type { Curves, SpectrumOutcome } from '../quality/types.ts'
import type { Exposure, TargetView } from './targetView.ts'
import { measurementsOf } from './targetView.ts'

/** An exposure shown beside another covers at least this share of its own range that the other does not. */
const NEW_SHARE = 0.3
/** Å about a join within which levels are compared. */
const JOIN = 150

/** What a target's figures show: one spectrum, or those of several arms side by side. */
export interface Shown {
  /** The best exposure; where others cover more, with their curves beside its own and all measurements. */
  readonly spectrum: SpectrumOutcome
  /** Exposures in order of wavelength, and the factor on each one's flux that makes it meet the best one. */
  readonly parts: readonly { readonly exposure: Exposure; readonly factor: number }[]
}

/** The best exposure and those that reach far beyond what is shown already, the best first. */
export function shownExposures({ exposures, best }: TargetView): readonly Exposure[] {
  const chosen: Exposure[] = []
  const covered: (readonly [number, number])[] = []
  const others = exposures.filter((_, i) => i !== best)
  const rank = { usable: 0, doubtful: 1, unusable: 2 } as const
  const quality = (e: Exposure): number => rank[e.night?.quality ?? e.spectrum.quality]
  for (const exposure of [exposures[best], ...others.sort((a, b) => quality(a) - quality(b))]) {
    const range = rangeOf(exposure)
    if (chosen.length === 0) {
      chosen.push(exposure)
      if (range) covered.push(range)
      continue
    }
    if (!range || quality(exposure) === 2) continue
    const steps = 100
    let fresh = 0
    for (let k = 0; k < steps; k++) {
      const x = range[0] + ((k + 0.5) / steps) * (range[1] - range[0])
      if (!covered.some(([from, to]) => x >= from && x <= to)) fresh++
    }
    if (fresh < NEW_SHARE * steps) continue
    chosen.push(exposure)
    covered.push(range)
  }
  return chosen
}

function rangeOf({ spectrum }: Exposure): readonly [number, number] | undefined {
  const rest = spectrum.curves?.restWavelength
  return rest && rest.length > 1 ? [rest[0], rest[rest.length - 1]] : undefined
}

/** The spectrum that page 1 draws: arms of one star are joined, each sample taken from the exposure chosen first. */
export function shownSpectrum(view: TargetView): Shown {
  const best = view.exposures[view.best]
  const chosen = shownExposures(view).filter((e) => e.spectrum.curves)
  if (chosen.length < 2) return { spectrum: best.spectrum, parts: [{ exposure: best, factor: 1 }] }
  const pieces = chosen.flatMap((exposure, rank) => cutPieces(exposure, chosen.slice(0, rank)))
  const inOrder = [...pieces].sort((a, b) => a.curves.restWavelength[0] - b.curves.restWavelength[0])
  const factors = new Map<Exposure, number>([[chosen[0], 1]])
  for (const exposure of chosen.slice(1)) factors.set(exposure, factorTo(chosen[0], exposure))
  const scaled = inOrder.map(({ exposure, curves }) => scaledBy(curves, factors.get(exposure) ?? 1))
  const parts = [...chosen]
    .sort((a, b) => (rangeOf(a)?.[0] ?? 0) - (rangeOf(b)?.[0] ?? 0))
    .map((exposure) => ({ exposure, factor: factors.get(exposure) ?? 1 }))
  return { spectrum: { ...best.spectrum, curves: joined(scaled), measurements: measurementsOf(view) }, parts }
}

/** The stretches of an exposure that lie outside those chosen before it. */
function cutPieces(exposure: Exposure, before: readonly Exposure[]): { exposure: Exposure; curves: Curves }[] {
  const { curves } = exposure.spectrum
  if (!curves) return []
  const ranges = before.flatMap((e) => rangeOf(e) ?? [])
  const spans = Array.from({ length: ranges.length / 2 }, (_, i) => [ranges[2 * i], ranges[2 * i + 1]])
  const isFree = (x: number): boolean => !spans.some(([from, to]) => x >= from && x <= to)
  const pieces: { exposure: Exposure; curves: Curves }[] = []
  const rest = curves.restWavelength
  for (let i = 0; i < rest.length;) {
    let j = i
    while (j < rest.length && isFree(rest[j])) j++
    if (j > i + 1) pieces.push({ exposure, curves: slice(curves, i, j) })
    i = Math.max(j, i) + 1
  }
  return pieces
}

const slice = (c: Curves, from: number, to: number): Curves => ({
  wavelength: c.wavelength.subarray(from, to),
  flux: c.flux.subarray(from, to),
  continuum: c.continuum.subarray(from, to),
  restWavelength: c.restWavelength.subarray(from, to),
  normalised: c.normalised.subarray(from, to),
  ...(c.expected ? { expected: c.expected.subarray(from, to) } : {}),
})

const scaledBy = (c: Curves, factor: number): Curves =>
  factor === 1 ? c : { ...c, flux: c.flux.map((v) => v * factor), continuum: c.continuum.map((v) => v * factor) }

/** Factor that makes the continuum of `other` meet that of `best` where they overlap, else at their nearest ends. */
function factorTo(best: Exposure, other: Exposure): number {
  const [a, b] = [rangeOf(best), rangeOf(other)]
  if (!a || !b) return 1
  const overlap: readonly [number, number] = [Math.max(a[0], b[0]), Math.min(a[1], b[1])]
  const isApart = overlap[1] - overlap[0] < 10
  // the side of the best one where the other goes on
  const edge = b[1] - a[1] > a[0] - b[0] ? a[1] : a[0]
  const middle = isApart ? (b[0] > a[1] ? [a[1], b[0]] : [a[0], b[1]]) : undefined
  const level = (e: Exposure, from: number, to: number): number => {
    const curves = e.spectrum.curves
    const values = curves
      ? [...curves.continuum].filter(
          (v, i) => v > 0 && curves.restWavelength[i] >= from && curves.restWavelength[i] <= to,
        )
      : []
    return values.length ? median(values) : NaN
  }
  const factor = middle
    ? level(best, middle[0] - JOIN, middle[0] + JOIN) / level(other, middle[1] - JOIN, middle[1] + JOIN)
    : level(best, edge - JOIN, edge + JOIN) / level(other, Math.max(a[0], edge - JOIN), Math.min(a[1], edge + JOIN))
  return factor > 0 && Number.isFinite(factor) ? factor : 1
}

/** Curves one after the other, the pen lifted between them. */
function joined(pieces: readonly Curves[]): Curves {
  const sizes = pieces.map((p) => p.wavelength.length)
  const n = sizes.reduce((sum, size) => sum + size + 1, -1)
  const hasExpected = pieces.some((p) => p.expected)
  const result = {
    wavelength: new Float64Array(n),
    restWavelength: new Float64Array(n),
    flux: new Float32Array(n).fill(NaN),
    continuum: new Float32Array(n).fill(NaN),
    normalised: new Float32Array(n).fill(NaN),
    ...(hasExpected ? { expected: new Float32Array(n).fill(NaN) } : {}),
  }
  let at = 0
  pieces.forEach((piece, k) => {
    result.wavelength.set(piece.wavelength, at)
    result.restWavelength.set(piece.restWavelength, at)
    result.flux.set(piece.flux, at)
    result.continuum.set(piece.continuum, at)
    result.normalised.set(piece.normalised, at)
    if (piece.expected) result.expected?.set(piece.expected, at)
    at += sizes[k]
    if (at >= n) return
    result.wavelength[at] = piece.wavelength[sizes[k] - 1]
    result.restWavelength[at] = piece.restWavelength[sizes[k] - 1]
    at++
  })
  return result
}
