import type { DecodedCalibration } from './decodedCalibration.ts'
import type { BestCell } from './evidence.ts'
import type { FeatureVector } from './likelihood.ts'
import type { TypingInput } from './typingInput.ts'
import type { Peculiarity } from './types.ts'

/** What a criterion of peculiarity may look at. */
export interface PeculiarityCase {
  readonly input: TypingInput
  readonly calibration: DecodedCalibration
  readonly vector: FeatureVector
  readonly best: BestCell
}

/** All that is peculiar about a typed star, each by its stated criterion. */
export function peculiarities(_star: PeculiarityCase): Peculiarity[] {
  return []
}
