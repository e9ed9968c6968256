import type { DecodedCalibration } from './decodedCalibration.ts'
import type { BestCell } from './evidence.ts'
import type { FeatureVector, LikelihoodGrid } from './likelihood.ts'
import type { TypingInput } from './typingInput.ts'

/** What a criterion of peculiarity may look at. */
export interface PeculiarityCase {
  readonly input: TypingInput
  readonly calibration: DecodedCalibration
  readonly vector: FeatureVector
  readonly likelihood: LikelihoodGrid
  readonly best: BestCell
}
