import { format } from 'prettier'
import type { Calibration } from '../../../src/tables/types.ts'
import { type CalibrationModel, type ZoneFigures, buildCalibration } from './buildCalibration.ts'

const STYLE = { parser: 'typescript', semi: false, singleQuote: true, printWidth: 120 } as const

/** The calibration fitted on every star of the model. */
export function fittedCalibration(model: CalibrationModel, figures: readonly ZoneFigures[]): Calibration {
  return buildCalibration(model, [], (zone) => figures[zone])
}

/** The files of `src/tables/` that hold a calibration, by name, as they are committed. */
export async function calibrationFiles(calibration: Calibration): Promise<Readonly<Record<string, string>>> {
  const { spectra, mean, zones, ...rest } = calibration
  const head = (what: string): string => `/** ${what} Written by \`npm run calibrate\`; not edited by hand. */\n`
  const sources = calibration.inputs.map(({ set, stars, reference }) => `${stars} of ${set} (${reference})`).join('; ')
  const files = {
    'calibration.ts':
      `import { CALIBRATION_MEANS } from './calibrationMeans.ts'\nimport { CALIBRATION_SPECTRA } from './calibrationSpectra.ts'\n` +
      `import { CALIBRATION_ZONES } from './calibrationZones.ts'\nimport type { Calibration } from './types.ts'\n\n` +
      head(`Expected features over type and class and their scatter. Fitted on ${sources}.`) +
      `export const CALIBRATION: Calibration = {${JSON.stringify(rest).slice(1, -1)},mean:CALIBRATION_MEANS,zones:CALIBRATION_ZONES,spectra:CALIBRATION_SPECTRA}`,
    'calibrationMeans.ts':
      `import type { Calibration } from './types.ts'\n\n` +
      head(
        'Expected features of every cell of the grid of type (outermost) and class, in thousandths of their scale.',
      ) +
      `export const CALIBRATION_MEANS: Calibration['mean'] = ${JSON.stringify(mean)}`,
    'calibrationZones.ts':
      `import type { Calibration } from './types.ts'\n\n` +
      head('Scatter of the features by zones of type.') +
      `export const CALIBRATION_ZONES: Calibration['zones'] = ${JSON.stringify(zones)}`,
    'calibrationSpectra.ts':
      `import type { Calibration } from './types.ts'\n\n` +
      head('Mean normalised spectra of three or more stars of a type, in thousandths of the continuum.') +
      `export const CALIBRATION_SPECTRA: Calibration['spectra'] = ${JSON.stringify(spectra)}`,
  }
  const formatted = await Promise.all(
    Object.entries(files).map(async ([name, text]) => [name, await format(text, STYLE)] as const),
  )
  return Object.fromEntries(formatted)
}
