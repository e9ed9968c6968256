import type { PosteriorFigures } from './posterior.ts'

const NAMES = ['I', 'II', 'III', 'IV', 'V'] as const
/** The class is named where dwarf, giant or supergiant has at least this probability. */
const NAMED = 0.5

/**
 * The luminosity class that the posterior names: its median over I to V, as the type is the median over types; undefined
 * where neither supergiant (I), giant (II–III) nor dwarf (IV–V) reaches one half, since then the spectrum cannot tell. Between a
 * giant and a dwarf about equally likely stands IV.
 */
export function luminosityName({
  probDwarf,
  probGiant,
  probSupergiant,
  classProbability,
}: Pick<PosteriorFigures, 'probDwarf' | 'probGiant' | 'probSupergiant' | 'classProbability'>): string | undefined {
  if (!(Math.max(probDwarf, probGiant, probSupergiant) >= NAMED)) return undefined
  let sum = 0
  for (let j = 0; j < classProbability.length; j++) {
    sum += classProbability[j]
    if (sum >= 0.5) return NAMES[j]
  }
  return undefined
}
