import type { FeatureWindows, KindCriteria, KindLimit, KindWindow } from '../../tables/types.ts'
import type { Peculiarity, PeculiarWord } from '../types.ts'
import { type LightSums, type MeanLight, meanLight } from './lightSums.ts'
import { depthAt, type Strength, strengthOf } from './strength.ts'

/** A spectrum as the criteria look at it: strengths by name in one frame, and the limits in force. */
export interface Look {
  readonly sums: LightSums
  /** Å, FWHM of the profile or, where it was told from stellar lines, an upper limit to it. */
  readonly fwhm: number
  /** The light is a flux density per Å, so that it has a colour. */
  readonly isFluxDensity: boolean
  /** Å in absorption; undefined where not covered. */
  readonly strength: (name: KindWindow) => Strength | undefined
  /** Central depth within ±3 Å, positive in absorption. */
  readonly depth: (name: KindWindow) => number | undefined
  readonly mean: (lo: number, hi: number) => MeanLight
  readonly limit: (name: KindLimit) => number
  readonly peculiarity: (word: PeculiarWord, text: string) => Peculiarity
}

/** What a criterion found: the word and whether the object is no ordinary O to M star at all. */
export interface Recognised {
  readonly peculiarity: Peculiarity
  readonly isOutside: boolean
}

/** Half of the range [Å] that a central depth is measured in: about one resolution element. */
const CORE = 3

/** The spectrum behind `sums` through the windows and limits of `criteria`; strengths are measured once, when asked. */
export function lookAt(
  sums: LightSums,
  { fwhm, isFluxDensity }: Pick<Look, 'fwhm' | 'isFluxDensity'>,
  { windows, limits, sources }: KindCriteria,
): Look {
  const known = new Map<KindWindow, Strength | undefined>()
  return {
    sums,
    fwhm,
    isFluxDensity,
    strength: (name) => {
      if (!known.has(name)) known.set(name, strengthOf(sums, windows[name]))
      return known.get(name)
    },
    depth: (name) => depthOf(sums, windows[name]),
    mean: (lo, hi) => meanLight(sums, lo, hi),
    limit: (name) => limits[name].value,
    peculiarity: (word, text) => ({ word, text, source: sources[word] }),
  }
}

function depthOf(sums: LightSums, windows: FeatureWindows): number | undefined {
  return depthAt(sums, windows, windows.wavelength, CORE)
}

/** A strength in Å for a sentence. */
export function inAngstrom(ew: number): string {
  return `${ew.toFixed(1)} Å`
}
