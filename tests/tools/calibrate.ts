/**
 * Fits the calibration on the published stars in ../shared and writes it as literal data: `npm run calibrate`.
 * Needs nothing but the stars; gives the same bytes each time.
 */
import { writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { calibrationModel, measureStars } from '../support/typing/buildCalibration.ts'
import { calibrationFiles, fittedCalibration } from '../support/typing/calibrationFiles.ts'
import { zoneFigures } from '../support/typing/zoneFigures.ts'

const model = calibrationModel(measureStars())
const calibration = fittedCalibration(model, zoneFigures(model))
for (const [name, text] of Object.entries(await calibrationFiles(calibration))) {
  const path = fileURLToPath(new URL(`../../src/tables/${name}`, import.meta.url))
  writeFileSync(path, text)
  console.log(`${name}: ${text.length} bytes`)
}
