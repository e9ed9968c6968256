import type { Continuum } from '../continuum/types.ts'
import type { Finding } from '../findings/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import type { LinePattern } from '../tables/types.ts'
import { checkStretch, partVelocities } from './checkStretch.ts'
import { findRestFrame, type RestFrameOptions } from './findRestFrame.ts'
import { straightenScale } from './straightenScale.ts'
import type { RestFrame } from './types.ts'

/** A spectrum with its rest frame, on a scale made straight where the star's own lines show it bent. */
export interface AlignedStar {
  /** The spectrum given, or a copy with other wavelengths and the same samples. */
  readonly spectrum: Spectrum
  readonly frame: RestFrame
  /** What the parts of the spectrum say of the scale as the file has it. */
  readonly findings: readonly Finding[]
}

/**
 * The rest frame of a spectrum. Where its parts demand velocities that differ by more than their errors (an arm on
 * another zero point, a wrong dispersion), the scale is made straight by the star's own lines and the frame found
 * again; that is kept only if the pattern of lines then fits better.
 */
export function alignStar(
  spectrum: Spectrum,
  continuum: Continuum,
  options: RestFrameOptions & { readonly patterns: readonly LinePattern[] },
): AlignedStar {
  const frame = findRestFrame(spectrum, continuum, options)
  const findings = checkStretch(partVelocities(spectrum, continuum, frame, options.patterns))
  if (findings.length === 0) return { spectrum, frame, findings }
  const straight = straightenScale(spectrum, continuum, frame, options.patterns)
  const again = straight && findRestFrame(straight, continuum, options)
  if (!straight || !again?.trusted || (again.peak ?? 0) <= (frame.peak ?? 0)) return { spectrum, frame, findings }
  return { spectrum: straight, frame: again, findings }
}
