import type { PosteriorFigures } from './posterior.ts'

const NAMES = ['I', 'II', 'III', 'IV', 'V'] as const
/** The class is named where dwarf, giant or supergiant has at least this probability. */
const NAMED = 0.5

/**
 * The luminosity class that the posterior names: the likeliest one of the likeliest group (I; II–III; IV–V); undefined
 * where no group reaches one half, since then the spectrum cannot tell.
 */
export function luminosityName({
  probDwarf,
  probGiant,
  probSupergiant,
  classProbability,
}: Pick<PosteriorFigures, 'probDwarf' | 'probGiant' | 'probSupergiant' | 'classProbability'>): string | undefined {
  const groups = [
    { probability: probSupergiant, members: [0] },
    { probability: probGiant, members: [1, 2] },
    { probability: probDwarf, members: [3, 4] },
  ].sort((a, b) => b.probability - a.probability)
  if (!(groups[0].probability >= NAMED)) return undefined
  const [member] = [...groups[0].members].sort((a, b) => classProbability[b] - classProbability[a])
  return NAMES[member]
}
