import { metalWeakness } from './metalWeakness.ts'
import type { PeculiarityCase } from './peculiarityCase.ts'
import type { Peculiarity } from './types.ts'

/** A criterion: the peculiarity with its figures where the star meets it. */
type Criterion = (star: PeculiarityCase) => Peculiarity | undefined

const CRITERIA: readonly Criterion[] = [metalWeakness]

/** All that is peculiar about a typed star, each by its stated criterion. */
export function peculiarities(star: PeculiarityCase): Peculiarity[] {
  return CRITERIA.flatMap((criterion) => criterion(star) ?? [])
}
