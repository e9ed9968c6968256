import type { Continuum } from '../continuum/types.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { VELOCITY_RULES } from '../findings/velocity.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { LinePattern } from '../tables/types.ts'
import { findRestFrame } from './findRestFrame.ts'
import type { RestFrame } from './types.ts'

/** Parts [Å] that hold enough lines of most types to have a velocity of their own. */
const PARTS: readonly (readonly [number, number])[] = [
  [3780, 4500],
  [4500, 5500],
  [5500, 6850],
]

/** Parts disagree from this many sigmas and this many km/s on; the second figure makes the spectrum doubtful. */
const LIMITS = { sigmas: 4, note: 80, doubt: 160 } as const

/** The velocity of one part of a spectrum. */
export interface PartVelocity {
  readonly range: readonly [number, number]
  readonly velocity: number
  readonly error: number
}

/** Velocities of parts of the spectrum, with the pattern that fits the whole; only those that can be trusted. */
export function partVelocities(
  spectrum: Spectrum,
  continuum: Continuum,
  frame: RestFrame,
  patterns: readonly LinePattern[],
): readonly PartVelocity[] {
  const pattern = patterns.find(({ name }) => name === frame.pattern)
  if (!frame.trusted || pattern === undefined) return []
  const found: PartVelocity[] = []
  for (const range of PARTS) {
    const covered = pattern.covered
      .map(([first, last]): [number, number] => [Math.max(first, range[0]), Math.min(last, range[1])])
      .filter(([first, last]) => first < last)
    if (covered.length === 0) continue
    const part = findRestFrame(spectrum, continuum, { patterns: [{ ...pattern, covered }] })
    if (part.trusted && part.error !== undefined) found.push({ range, velocity: part.velocity, error: part.error })
  }
  return found
}

/** A finding where two parts of a spectrum have velocities that differ by more than their errors allow. */
export function checkStretch(parts: readonly PartVelocity[]): readonly Finding[] {
  let worst: { readonly a: PartVelocity; readonly b: PartVelocity; readonly off: number } | undefined
  for (const a of parts)
    for (const b of parts) {
      const off = b.velocity - a.velocity
      if (off > LIMITS.sigmas * Math.hypot(a.error, b.error) && off > (worst?.off ?? LIMITS.note)) worst = { a, b, off }
    }
  if (worst === undefined) return []
  const { a, b, off } = worst
  const say = ({ range, velocity, error }: PartVelocity): string =>
    `${velocity.toFixed(0)} ± ${error.toFixed(0)} km/s from ${range[0]} to ${range[1]} Å`
  return [
    finding(VELOCITY_RULES, 'wavelength-scale-bent', `The velocity is ${say(a)} and ${say(b)}`, {
      value: off,
      limit: LIMITS.note,
      ...(off > LIMITS.doubt ? { level: 'doubt' as const } : {}),
    }),
  ]
}
