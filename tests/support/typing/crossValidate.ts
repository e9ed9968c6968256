import type { Calibration } from '../../../src/tables/types.ts'
import type { TypingInput } from '../../../src/typing/typingInput.ts'
import { typeSpectrum } from '../../../src/typing/typeSpectrum.ts'
import type { TypePosterior } from '../../../src/typing/types.ts'
import {
  type CalibrationModel,
  type MeasuredStar,
  type ZoneFigures,
  buildCalibration,
  leftOutFor,
} from './buildCalibration.ts'

/** A star typed by a calibration that has never seen it. */
export interface Validated {
  readonly measured: MeasuredStar
  readonly calibration: Calibration
  readonly posterior: TypePosterior
}

/** Types every atlas star with a calibration from which it and its relatives were left out. */
export function* crossValidate(
  model: CalibrationModel,
  figures: (zone: number) => ZoneFigures,
  { inputs = ({ input }) => input }: { readonly inputs?: (measured: MeasuredStar) => TypingInput } = {},
): Generator<Validated> {
  const whole = buildCalibration(model, [], figures)
  for (const measured of model.stars) {
    if (measured.star.set !== 'atlas') continue
    const calibration = buildCalibration(model, leftOutFor(model, measured.star), figures, whole)
    yield { measured, calibration, posterior: typeSpectrum(inputs(measured), calibration) }
  }
}
