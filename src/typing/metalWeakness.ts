import type { PeculiarityCase } from './peculiarityCase.ts'
import type { Peculiarity } from './types.ts'

/** Metals at least this far on the way to the published metal-weak means, in their units. */
const LEAST = 0.45
/** The star fits better so by at least this much in squared distance: fewer than 1 in 100 atlas stars reach it. */
const LEAST_GAIN = 3.5

/**
 * `metal-weak` where an F to K star's metal lines are weaker than its Balmer lines and bands allow: the features lie nearer
 * to published means of metal-weak stars than to those of ordinary stars of any type.
 */
export function metalWeakness({ calibration, likelihood, best }: PeculiarityCase): Peculiarity | undefined {
  const at = best.type * calibration.classes.length + best.luminosity
  const weakness = likelihood.weakness[at]
  const gain = likelihood.weaknessGain[at]
  // Supergiants scatter too much among themselves to be told metal-weak at this resolution.
  if (calibration.classes[best.luminosity] < 2 || weakness < LEAST || gain < LEAST_GAIN) return undefined
  return {
    word: 'metal-weak',
    text: `the metal lines lie ${weakness.toFixed(1)} times as far towards a star without metals as in published metal-weak stars (at least ${LEAST}); that fits better by ${gain.toFixed(1)} in squared distance (at least ${LEAST_GAIN})`,
    source: 'Pickles 1998, PASP 110, 863 (means of metal-weak stars); limits by cross-validation',
  }
}
