import type { Continuum } from '../continuum/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { SpectralLine } from '../tables/types.ts'
import type { RestFrame } from '../velocity/types.ts'
import { type FittedProfile, type ProfileFit, type ProfileStart, fitProfiles } from './fitProfiles.ts'
import { type Integral, integrateLine } from './integrateLine.ts'
import { type Pixels, pixelsOf, windowMean } from './pixels.ts'
import type { Measurement } from './types.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** Which lines are measured, and at what resolution. */
export interface LineOptions {
  readonly lines: readonly SpectralLine[]
  /** Å, FWHM of the instrument; three samples where it is not known. */
  readonly resolution?: number
  /** Both unless given. */
  readonly methods?: readonly ('integration' | 'profile')[]
}

/** Half of a line's window, in FWHM, where the table gives none: holds 99.96 % of a Gaussian. */
const WINDOW = 1.5
/** Lines closer than this many FWHM are one feature; see facts on blends in DEVELOPERS.md. */
const BLEND = 1
/** Lines closer than this many FWHM are fitted together. */
const JOINT = 2.5
const COVERED = 0.98
const USED = 0.7

/** A line with its place in the observed frame, and those it cannot be told from. */
interface Placed {
  readonly line: SpectralLine
  readonly centre: number
  readonly stretch: number
  readonly window: readonly [number, number]
  readonly fwhm: number
  /** Lines of the list within one FWHM. */
  readonly same: readonly SpectralLine[]
}

/**
 * Equivalent widths of lines by both methods: direct integration against the continuum, and fitted profiles. Two
 * measurements a line (one where a single method is asked for), in the order of the list. Lines closer than one FWHM are
 * one feature with status `blend`; lines whose profiles overlap are fitted together (`joint fit`).
 */
export function measureLines(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  { lines, resolution, methods = ['integration', 'profile'] }: LineOptions,
): Measurement[] {
  const pixels = pixelsOf(spectrum, continuum)
  const placed = placeLines(lines, pixels, 1 + frame.velocity / SPEED_OF_LIGHT, resolution)
  const integrals = placed.map(({ window }) => integrateLine(pixels, window[0], window[1]))
  const fits = methods.includes('profile') ? fitGroups(pixels, placed, integrals) : undefined
  const measurements: Measurement[] = []
  placed.forEach((one, k) => {
    if (methods.includes('integration')) measurements.push(fromIntegral(one, integrals[k]))
    if (fits) measurements.push(fromFit(one, integrals[k], fits[k]))
  })
  return measurements
}

function placeLines(lines: readonly SpectralLine[], pixels: Pixels, stretch: number, resolution?: number): Placed[] {
  const { wavelength } = pixels
  const n = wavelength.length
  const fwhm = resolution ?? (n > 1 ? (3 * (wavelength[n - 1] - wavelength[0])) / (n - 1) : 1)
  return lines.map((line) => {
    const own = line.origin && line.origin !== 'nebular' ? 1 : stretch
    const centre = line.wavelength * own
    const half = WINDOW * fwhm
    const window: readonly [number, number] = line.window
      ? [line.window[0] * own, line.window[1] * own]
      : [centre - half, centre + half]
    const same = lines.filter((other) => other !== line && Math.abs(other.wavelength - line.wavelength) < BLEND * fwhm)
    return { line, centre, stretch: own, window, fwhm, same }
  })
}

interface GroupFit {
  readonly fit: FittedProfile
  readonly together: number
}

/** Fits each run of overlapping lines at once; a blend is fitted as one line, at its first member. */
function fitGroups(
  pixels: Pixels,
  placed: readonly Placed[],
  integrals: readonly Integral[],
): (GroupFit | undefined)[] {
  const order = placed
    .map((_, k) => k)
    .filter((k) => integrals[k].covered > COVERED && integrals[k].used > USED && isFirstOfBlend(placed[k], placed))
    .sort((a, b) => placed[a].centre - placed[b].centre)
  const fits = new Array<GroupFit | undefined>(placed.length).fill(undefined)
  for (let from = 0; from < order.length;) {
    let to = from + 1
    while (
      to < order.length &&
      placed[order[to]].centre - placed[order[to - 1]].centre < JOINT * placed[order[to]].fwhm
    )
      to++
    const members = order.slice(from, to)
    const span = [
      Math.min(...members.map((k) => placed[k].window[0])),
      Math.max(...members.map((k) => placed[k].window[1])),
    ] as const
    const result = fitMembers(
      pixels,
      span,
      members.map((k) => ({ one: placed[k], area: integrals[k].area })),
    )
    members.forEach((k, j) => {
      if (result) fits[k] = { fit: result.lines[j], together: members.length }
    })
    from = to
  }
  return fits
}

/** A line whose core is weaker than this many σ has its depth alone fitted, at the place and width expected. */
const FREE_FIT = 5

/** km/s: lines are not taken to be broader than this by themselves (the fastest rotators have half of it). */
const BROADEST = 700

/** All parameters free for lines that stand out; where that fails, the widths fixed, then the places too. */
function fitMembers(
  pixels: Pixels,
  span: readonly [number, number],
  members: readonly { readonly one: Placed; readonly area: number }[],
): ProfileFit | undefined {
  const outlook = members.map(({ one, area }) => {
    const core = windowMean(pixels, one.centre - one.fwhm / 2, one.centre + one.fwhm / 2)
    const depth = 1 - core.mean
    const broad = one.line.profile === 'voigt'
    const width = one.window[1] - one.window[0]
    return {
      centre: one.centre,
      shape: one.line.profile ?? ('gaussian' as const),
      fwhm: broad && area * depth > 0 ? Math.min(width / 2, Math.max(one.fwhm, (0.75 * area) / depth)) : one.fwhm,
      reach: Math.max(one.fwhm, 2),
      widest: broad ? width : Math.hypot(one.fwhm, (one.centre * BROADEST) / SPEED_OF_LIGHT),
      weak: Math.abs(depth) < FREE_FIT * Math.sqrt(core.variance),
    }
  })
  for (const free of ['all', 'centre', 'depth'] as const) {
    const starts = outlook.map((one): ProfileStart => ({ ...one, free: one.weak ? 'depth' : free }))
    const result = fitProfiles(pixels, span, starts)
    if (result) return result
  }
  return undefined
}

/** Of lines within one FWHM, the first in the list stands for all. */
function isFirstOfBlend({ line, same }: Placed, placed: readonly Placed[]): boolean {
  const at = placed.findIndex((other) => other.line === line)
  return same.every((other) => placed.findIndex((one) => one.line === other) > at)
}

function base({ line }: Placed, method: string) {
  const { feature, species, wavelength } = line
  return { feature, species, wavelengthRest: wavelength, unit: 'Å', method } as const
}

function failure(
  { window, stretch }: Placed,
  { covered, used }: Integral,
): Pick<Measurement, 'status' | 'reason'> | undefined {
  const range = `${(window[0] / stretch).toFixed(1)}–${(window[1] / stretch).toFixed(1)} Å`
  if (covered < COVERED)
    return { status: 'uncovered', reason: `window ${range} lies outside the data by ${percent(1 - covered)}` }
  if (used < USED) return { status: 'masked', reason: `window ${range} has ${percent(used)} usable samples` }
  return undefined
}

/** Status by size against error, and by what lies within one FWHM. */
function judged(one: Placed, ew: number, ewErr: number): Pick<Measurement, 'status' | 'reason' | 'limit3sigma'> {
  if (Math.abs(ew) < 3 * ewErr)
    return { status: 'absent', reason: 'weaker than three standard errors', limit3sigma: 3 * ewErr }
  if (one.same.length)
    return { status: 'blend', reason: `within one FWHM of ${one.same.map((line) => line.feature).join(', ')}` }
  return { status: 'measured' }
}

function fromIntegral(one: Placed, integral: Integral): Measurement {
  const failed = failure(one, integral)
  if (failed) return { ...base(one, 'integration'), ...failed }
  const { stretch } = one
  const ew = integral.area / stretch
  const ewErrNoise = integral.errNoise / stretch
  const ewErrContinuum = integral.errContinuum / stretch
  const ewErr = Math.hypot(ewErrNoise, ewErrContinuum)
  const found = { ...base(one, 'integration'), ew, ewErrNoise, ewErrContinuum, ewErr, ...judged(one, ew, ewErr) }
  return found.status === 'absent'
    ? found
    : { ...found, centre: integral.centroid / stretch, centreErr: integral.centroidErr / stretch }
}

function fromFit(one: Placed, integral: Integral, result: GroupFit | undefined): Measurement {
  const method = result && result.together > 1 ? 'joint fit' : (one.line.profile ?? 'gaussian')
  const failed = failure(one, integral)
  if (failed) return { ...base(one, method), ...failed }
  if (!result)
    return one.same.length
      ? {
          ...base(one, method),
          status: 'blend',
          reason: `measured as part of ${one.same.map((line) => line.feature).join(', ')}`,
        }
      : {
          ...base(one, method),
          status: 'absent',
          reason: 'no profile fits the data',
          limit3sigma: (3 * integral.errNoise) / one.stretch,
        }
  const { fit } = result
  const { stretch } = one
  const ew = fit.area / stretch
  const ewErrNoise = fit.errNoise / stretch
  const ewErrContinuum = fit.errContinuum / stretch
  const ewErr = Math.hypot(ewErrNoise, ewErrContinuum)
  const found = {
    ...base(one, method),
    ew,
    ewErrNoise,
    ewErrContinuum,
    ewErr,
    ...judged(one, ew, ewErr),
    depth: fit.depth,
  }
  return {
    ...found,
    ...(fit.free === 'depth' ? {} : { centre: fit.centre / stretch, centreErr: fit.centreErr / stretch }),
    ...(fit.free === 'all' ? { fwhm: fit.fwhm / stretch } : {}),
  }
}

function percent(share: number): string {
  return `${Math.round(100 * share)} %`
}
