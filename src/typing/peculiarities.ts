import type { DecodedCalibration } from './decodedCalibration.ts'
import type { BestCell } from './evidence.ts'
import type { FeatureVector, LikelihoodGrid } from './likelihood.ts'
import { metalWeakness } from './metalWeakness.ts'
import type { TypingInput } from './typingInput.ts'
import type { Peculiarity } from './types.ts'

/** What a criterion of peculiarity may look at. */
export interface PeculiarityCase {
  readonly input: TypingInput
  readonly calibration: DecodedCalibration
  readonly vector: FeatureVector
  readonly likelihood: LikelihoodGrid
  readonly best: BestCell
}

/** A criterion: the peculiarity with its figures where the star meets it. */
type Criterion = (star: PeculiarityCase) => Peculiarity | undefined

const CRITERIA: readonly Criterion[] = [metalWeakness]

/** All that is peculiar about a typed star, each by its stated criterion. */
export function peculiarities(star: PeculiarityCase): Peculiarity[] {
  return CRITERIA.flatMap((criterion) => criterion(star) ?? [])
}
