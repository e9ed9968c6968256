/**
 * Types every atlas star by a calibration that has not seen it, as it is and degraded on purpose, and prints accuracy and
 * coverage as a table: `npm run validate`. Takes minutes; needs ../shared. `--quick` leaves the degradations out.
 */
import { mkdirSync, writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { decodeCalibration } from '../../src/typing/decodedCalibration.ts'
import { CALIBRATION } from '../../src/tables/calibration.ts'
import { typeSpectrum } from '../../src/typing/typeSpectrum.ts'
import { buildCalibration, calibrationModel, leftOutFor, measureStars } from '../support/typing/buildCalibration.ts'
import { DEGRADATIONS } from '../support/typing/degrade.ts'
import { type Scored, scoreOf } from '../support/typing/score.ts'
import { inputOf, readStar } from '../support/typing/sharedStars.ts'
import { validationPages } from '../support/typing/validationPages.ts'
import { validationText } from '../support/typing/validationText.ts'
import { pageFonts } from '../../cli/pageFonts.ts'
import { encodePdf } from '../../src/report/pdf.ts'
import { makeTypeface } from '../../src/report/typeface.ts'

const chosen = process.argv.includes('--quick') ? DEGRADATIONS.slice(0, 1) : DEGRADATIONS
const model = calibrationModel(measureStars())
const zones = decodeCalibration(CALIBRATION).zones
const figures = (z: number) => ({ tempering: zones[z].tempering, fitQuantiles: zones[z].fitQuantiles })
const whole = buildCalibration(model, [], figures)
const results = chosen.map((): Scored[] => [])
model.stars.forEach(({ star }, seed) => {
  if (star.set !== 'atlas') return
  const calibration = buildCalibration(model, leftOutFor(model, star), figures, whole)
  const spectrum = readStar(star.file)
  chosen.forEach(({ degrade }, d) => {
    results[d].push({ star, posterior: typeSpectrum(inputOf(degrade(spectrum, seed + 1)).input, calibration) })
  })
})
const rows = chosen.map((degradation, d) => ({ degradation, scored: results[d], score: scoreOf(results[d]) }))
const text = validationText(rows)
console.log(text)
const folder = fileURLToPath(new URL('../../reports/', import.meta.url))
mkdirSync(folder, { recursive: true })
if (chosen.length > 1) writeFileSync(`${folder}validation.md`, text)
const drawing = validationPages(rows, makeTypeface(pageFonts()), CALIBRATION.digest)
writeFileSync(
  `${folder}validation.pdf`,
  await encodePdf(drawing, pageFonts(), { date: new Date(0), version: 'validation' }),
)
