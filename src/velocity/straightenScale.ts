import type { Continuum } from '../continuum/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { LinePattern } from '../tables/types.ts'
import { findRestFrame } from './findRestFrame.ts'
import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'
import type { RestFrame } from './types.ts'

/** Windows [Å] whose velocity is found: their middles are this far apart, and they reach this far on either side. */
const WINDOW = { every: 200, half: 200 } as const

/** Worst error of a window that is used [km/s]. */
const WORST_ERROR = 80

/** A window that is off both its neighbours by more than this [km/s] and by three sigmas is left out. */
const ALONE = 100

/** Velocity at the middle of a window [Å]. */
export interface LocalVelocity {
  readonly at: number
  readonly velocity: number
  readonly error: number
}

/** Velocities along a spectrum against the pattern that fits the whole; lone outliers are left out. */
export function localVelocities(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  patterns: readonly LinePattern[],
): readonly LocalVelocity[] {
  const pattern = patterns.find(({ name }) => name === frame.pattern)
  if (!frame.trusted || pattern === undefined) return []
  const { wavelength } = spectrum
  const found: LocalVelocity[] = []
  const first = Math.ceil(wavelength[0] / WINDOW.every) * WINDOW.every
  for (let at = first; at < wavelength[wavelength.length - 1]; at += WINDOW.every) {
    const covered = pattern.covered
      .map(([from, to]): [number, number] => [Math.max(from, at - WINDOW.half), Math.min(to, at + WINDOW.half)])
      .filter(([from, to]) => from < to)
    if (covered.length === 0) continue
    const { trusted, velocity, error } = findRestFrame(spectrum, continuum, { patterns: [{ ...pattern, covered }] })
    if (trusted && error !== undefined && error < WORST_ERROR) found.push({ at, velocity, error })
  }
  return found.filter((one, i) => !isAlone(found[i - 1], one, found[i + 1]))
}

function isAlone(left: LocalVelocity | undefined, one: LocalVelocity, right: LocalVelocity | undefined): boolean {
  const isOff = (other: LocalVelocity | undefined): boolean =>
    other === undefined ||
    Math.abs(one.velocity - other.velocity) > Math.max(ALONE, 3 * Math.hypot(one.error, other.error))
  return isOff(left) && isOff(right)
}

/**
 * The spectrum with its wavelengths moved so that every part has the velocity of the whole: a scale that is bent, or
 * off in one arm, made straight again by the star's own lines. Between the middles of windows the correction is
 * linear; a step in the scale stays blurred over 200 Å. For spectra whose parts were found to disagree; undefined
 * where fewer than three windows have a velocity.
 */
export function straightenScale(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  patterns: readonly LinePattern[],
): Spectrum | undefined {
  const local = localVelocities(spectrum, continuum, frame, patterns)
  if (local.length < 3) return undefined
  let k = 0
  const wavelength = spectrum.wavelength.map((at) => {
    while (k < local.length - 2 && local[k + 1].at < at) k++
    const [left, right] = [local[k], local[k + 1]]
    const share = Math.min(1, Math.max(0, (at - left.at) / (right.at - left.at)))
    const velocity = left.velocity + share * (right.velocity - left.velocity)
    return (at * (1 + frame.velocity / SPEED_OF_LIGHT)) / (1 + velocity / SPEED_OF_LIGHT)
  })
  const text = `The wavelength scale was made straight by the star's own lines, at ${local.length} places`
  return { ...spectrum, wavelength, notes: [...spectrum.notes, { code: 'scale-straightened', text }] }
}
