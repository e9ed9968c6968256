import type { Continuum } from '../continuum/types.ts'
import { medianInPlace } from '../numeric/select.ts'
import { FWHM_PER_SIGMA } from '../numeric/smoothToFwhm.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { SpectralLine } from '../tables/types.ts'
import type { RestFrame } from '../velocity/types.ts'
import { fitProfiles } from './fitProfiles.ts'
import { type Detection, type NamingOptions, nameLines } from './identify.ts'
import { type Pixels, firstPixelAbove, pixelsOf } from './pixels.ts'
import type { FoundLine } from './types.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** What lines are looked for with: names to give, bands of the air, the resolution. */
export interface FindOptions {
  /** Lines that a found one may be. */
  readonly lines: readonly SpectralLine[]
  readonly telluric?: NamingOptions['telluric']
  /** Å, FWHM of the instrument; three samples where it is not known. */
  readonly resolution?: number
  /** σ of a line's depth in the data, seen through the instrument's profile; 4 when not given. */
  readonly threshold?: number
}

/** With white noise, one false line in about five spectra of 4,000 samples. */
const THRESHOLD = 4
/** No more lines than this are fitted at once; a longer run is cut at its shallowest gap. */
const LARGEST_GROUP = 5
/** Lines nearer than this many FWHM are fitted together. */
const TOGETHER = 2

/**
 * Every significant absorption and emission line, found without being told where to look, with the lines it may be. A
 * line is a local extremum of the depth seen through the instrument's profile (matched filter), at least `threshold` σ
 * from the continuum; neighbours are fitted together by Gaussians. Lines closer than one FWHM are one. In order of
 * wavelength.
 */
export function findLines(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  { lines, telluric = [], resolution, threshold = THRESHOLD }: FindOptions,
): FoundLine[] {
  const n = spectrum.wavelength.length
  if (n < 5) return []
  const pixels = pixelsOf(spectrum, continuum)
  const range = [spectrum.wavelength[0], spectrum.wavelength[n - 1]] as const
  const fwhm = resolution ?? (3 * (range[1] - range[0])) / (n - 1)
  const settled = settleLevel(pixels, fwhm)
  const first = findPeaks(settled, fwhm, threshold)
  const strong = measurePeaks(settled, first, fwhm)
  const hidden = findPeaks(withoutLines(settled, strong), fwhm, threshold).filter(
    (peak) =>
      first.every((other) => Math.abs(other.centre - peak.centre) >= HIDDEN * fwhm) &&
      strong.every((line) => !isWing(peak, line, fwhm)),
  )
  const peaks = hidden.length ? [...first, ...hidden].sort((a, b) => a.centre - b.centre) : first
  const detections = measurePeaks(settled, peaks, fwhm)
  return nameLines(detections, {
    lines,
    telluric,
    stretch: 1 + frame.velocity / SPEED_OF_LIGHT,
    resolution: fwhm,
    range,
  })
}

/** A line hidden in the flank of another must lie this many FWHM from it. */
const HIDDEN = 0.8
/** Width of the stretches whose median depth settles the level, in FWHM. */
const STRETCH = 40
/** The level is settled within this many of its own standard errors. */
const SETTLED = 2

/**
 * The pixels with the level moved, within its error, to the median of the flux nearby: what most samples have is no
 * line, whatever the continuum says.
 */
function settleLevel(pixels: Pixels, fwhm: number): Pixels {
  const { wavelength, flux, levelError } = pixels
  const n = flux.length
  const blocks = Math.max(1, Math.round((wavelength[n - 1] - wavelength[0]) / (STRETCH * fwhm)))
  const size = n / blocks
  const shift = new Float64Array(blocks)
  const buffer = new Float64Array(Math.ceil(size) + 1)
  for (let b = 0; b < blocks; b++) {
    let count = 0
    const end = Math.floor((b + 1) * size)
    for (let i = Math.floor(b * size); i < end; i++) if (flux[i] === flux[i]) buffer[count++] = 1 - flux[i]
    const most = SETTLED * levelError[Math.floor((b + 0.5) * size)]
    const middle = medianInPlace(buffer, count)
    shift[b] = middle === middle ? Math.max(-most, Math.min(most, middle)) : 0
  }
  const moved = flux.map((value, i) => {
    const at = Math.min(blocks - 1, Math.max(0, (i + 0.5) / size - 0.5))
    const b = Math.min(Math.floor(at), Math.max(0, blocks - 2))
    return value + shift[b] + (at - b) * ((shift[b + 1] ?? shift[b]) - shift[b])
  })
  return { ...pixels, flux: moved }
}

/** True where what is left belongs to the wings of a broad line, which no Gaussian follows. */
function isWing(peak: Peak, line: Detection, fwhm: number): boolean {
  if (line.fwhm < 1.5 * fwhm || Math.abs(peak.centre - line.centre) > 3 * line.fwhm) return false
  return Math.abs(peak.depth) < (WING * Math.abs(line.ew)) / line.fwhm
}

/** Part of a broad line's depth that its wings may hold beyond a Gaussian. */
const WING = 0.15

/** The pixels with the lines found taken out, their noise and the error of the fits kept. */
function withoutLines(pixels: Pixels, lines: readonly Detection[]): Pixels {
  const flux = pixels.flux.slice()
  const noise = pixels.noise.slice()
  for (const { centre, ew, ewErr, fwhm } of lines) {
    const sigma = fwhm / FWHM_PER_SIGMA
    const peak = ew / (sigma * Math.sqrt(2 * Math.PI))
    for (
      let i = firstPixelAbove(pixels, centre - 4 * sigma);
      i < flux.length && pixels.lower[i] < centre + 4 * sigma;
      i++
    ) {
      const shape = Math.exp(-0.5 * ((pixels.wavelength[i] - centre) / sigma) ** 2)
      flux[i] += peak * shape
      noise[i] = Math.hypot(noise[i], Math.abs((peak * ewErr) / ew) * shape, MISFIT * peak * shape)
    }
  }
  return { ...pixels, flux, noise }
}

/** Part of a line's depth that a Gaussian may leave behind. */
const MISFIT = 0.05

interface Peak {
  /** Å, observed frame. */
  readonly centre: number
  /** Matched-filter depth, positive in absorption, and its σ. */
  readonly depth: number
  readonly depthErr: number
  readonly significance: number
}

/** Part of the level's error that is left after it has been settled. */
const LEVEL = 0.5

/** Depth through the instrument's profile at every sample, and its error; NaN where fewer than half of it is usable. */
function matchedDepth({ wavelength, flux, noise, levelError }: Pixels, fwhm: number) {
  const n = flux.length
  const sigma = fwhm / FWHM_PER_SIGMA
  const depth = new Float64Array(n).fill(NaN)
  const error = new Float64Array(n).fill(NaN)
  for (let i = 0; i < n; i++) {
    let top = 0
    let bottom = 0
    let used = 0
    let all = 0
    for (let step = -1; step <= 1; step += 2)
      for (let j = step < 0 ? i : i + 1; j >= 0 && j < n; j += step) {
        const t = (wavelength[j] - wavelength[i]) / sigma
        if (t * t > 9) break
        const weight = Math.exp(-0.5 * t * t)
        all += weight
        if (!(flux[j] === flux[j])) continue
        const precision = weight / (noise[j] * noise[j])
        top += precision * (1 - flux[j])
        bottom += precision * weight
        used += weight
      }
    if (used < 0.5 * all || !(bottom > 0)) continue
    depth[i] = top / bottom
    error[i] = Math.hypot(1 / Math.sqrt(bottom), LEVEL * levelError[i])
  }
  return { depth, error }
}

/** Local extrema of the matched depth over the threshold, none closer than one FWHM to a stronger one of its kind. */
function findPeaks(pixels: Pixels, fwhm: number, threshold: number): Peak[] {
  const { wavelength } = pixels
  const { depth, error } = matchedDepth(pixels, fwhm)
  const found: Peak[] = []
  for (let i = 1; i + 1 < depth.length; i++) {
    const sign = depth[i] > 0 ? 1 : -1
    const size = sign * depth[i]
    if (!(size > threshold * error[i])) continue
    const before = sign * depth[i - 1]
    const after = sign * depth[i + 1]
    if (!(size >= before && size > after)) continue
    const bend = before - 2 * size + after
    const shift = bend < 0 ? (0.5 * (before - after)) / bend : 0
    const step = shift > 0 ? wavelength[i + 1] - wavelength[i] : wavelength[i] - wavelength[i - 1]
    found.push({
      centre: wavelength[i] + shift * step,
      depth: depth[i],
      depthErr: error[i],
      significance: size / error[i],
    })
  }
  const kept: Peak[] = []
  for (const peak of [...found].sort((a, b) => b.significance - a.significance))
    if (kept.every((other) => Math.abs(other.centre - peak.centre) >= fwhm || other.depth * peak.depth < 0))
      kept.push(peak)
  return kept.sort((a, b) => a.centre - b.centre)
}

function measurePeaks(pixels: Pixels, peaks: readonly Peak[], fwhm: number): Detection[] {
  const detections: Detection[] = []
  for (let from = 0; from < peaks.length;) {
    let to = from + 1
    while (to < peaks.length && to - from < LARGEST_GROUP && peaks[to].centre - peaks[to - 1].centre < TOGETHER * fwhm)
      to++
    detections.push(...measureGroup(pixels, peaks.slice(from, to), fwhm))
    from = to
  }
  return detections
}

/** Gaussians fitted to neighbouring peaks; where that fails, the matched filter's own depth at the instrument's width. */
function measureGroup(pixels: Pixels, group: readonly Peak[], fwhm: number): Detection[] {
  const span = [group[0].centre - 1.5 * fwhm, group[group.length - 1].centre + 1.5 * fwhm] as const
  const outlook = { shape: 'gaussian', fwhm: 1.1 * fwhm, reach: 0.8 * fwhm, widest: 8 * fwhm } as const
  for (const free of ['all', 'centre'] as const) {
    const result = fitProfiles(
      pixels,
      span,
      group.map(({ centre }) => ({ ...outlook, centre, free })),
    )
    const sound = result?.lines.every((line, k) => line.area * group[k].depth > 0 && line.centreErr < fwhm)
    if (!result || !sound) continue
    return result.lines.map((line, k) => ({
      centre: line.centre,
      centreErr: line.centreErr,
      kind: line.area > 0 ? 'absorption' : 'emission',
      ew: line.area,
      ewErr: Math.hypot(line.errNoise, line.errContinuum),
      significance: group[k].significance,
      fwhm: line.fwhm,
    }))
  }
  const area = Math.sqrt(2 * Math.PI) * (fwhm / FWHM_PER_SIGMA)
  return group.map(({ centre, depth, depthErr, significance }) => ({
    centre,
    // Cayrel 1988, eq. 6, in the same spirit: a centre is good to the width over the significance.
    centreErr: fwhm / FWHM_PER_SIGMA / significance,
    kind: depth > 0 ? 'absorption' : 'emission',
    ew: depth * area,
    ewErr: depthErr * area,
    significance,
    fwhm,
  }))
}
