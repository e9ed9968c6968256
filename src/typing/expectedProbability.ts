import { parseType } from './typeName.ts'
import type { TypePosterior } from './types.ts'

/** Subclasses that published types of one star scatter by (1 σ); design: neighbouring types scatter by half to one. */
const PUBLISHED_SCATTER = 0.8
/** Within how many of its own errors an expected type counts as met. */
const REACH = 2

/**
 * Probability (0 to 1) that the star's type lies within the expected type's own uncertainty, ± 2 σ of the writing and of the
 * scatter of published types, and within one luminosity class where one is given. Undefined where the expected text
 * is no type of the sequence O to M or the spectrum has no posterior.
 */
export function expectedProbability(posterior: TypePosterior, expectedType: string): number | undefined {
  const expected = parseType(expectedType)
  const { grid } = posterior
  if (!grid || expected?.typeNumber === undefined || expected.typeError === undefined) return undefined
  const reach = REACH * Math.hypot(expected.typeError, PUBLISHED_SCATTER)
  const { types, classes, probability } = grid
  let sum = 0
  for (let i = 0; i < types.length; i++) {
    if (Math.abs(types[i] - expected.typeNumber) > reach) continue
    for (let j = 0; j < classes.length; j++)
      if (expected.luminosity === undefined || Math.abs(classes[j] - Math.min(5, expected.luminosity)) <= 1)
        sum += probability[i * classes.length + j]
  }
  return Math.min(1, sum)
}
