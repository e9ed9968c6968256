import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { BANDS } from '../../src/tables/bands.ts'
import { CALIBRATION } from '../../src/tables/calibration.ts'
import { choleskyFactor } from '../../src/numeric/cholesky.ts'
import { decodeCalibration } from '../../src/typing/decodedCalibration.ts'
import { NEEDS_SHARED, hasShared } from '../support/shared.ts'
import { calibrationModel, measureStars } from '../support/typing/buildCalibration.ts'
import { calibrationFiles, fittedCalibration } from '../support/typing/calibrationFiles.ts'
import { zoneFigures } from '../support/typing/zoneFigures.ts'

describe('CALIBRATION', () => {
  it('knows every feature that is measured for a type', () => {
    expect(CALIBRATION.features).toEqual(BANDS.map(({ feature }) => feature))
  })

  it('states what it was fitted on, with references and a checksum', () => {
    expect(CALIBRATION.inputsSha256).toMatch(/^[0-9a-f]{64}$/)
    expect(CALIBRATION.inputsSha256.startsWith(CALIBRATION.digest)).toBe(true)
    expect(CALIBRATION.inputs.map(({ set }) => set)).toEqual(['atlas', 'averages', 'pickles'])
    for (const { stars, reference } of CALIBRATION.inputs) {
      expect(stars).toBeGreaterThan(50)
      expect(reference).toMatch(/(19|20)\d\d/)
    }
  })

  it('was not fitted on the stars kept for checking', () => {
    expect(JSON.stringify(CALIBRATION.inputs)).not.toMatch(/standards|CALSPEC/)
  })

  it('has a positive definite scatter in every zone', () => {
    const f = CALIBRATION.features.length
    for (const { covariance } of decodeCalibration(CALIBRATION).zones)
      expect(() => choleskyFactor(covariance, f)).not.toThrow()
  })

  it('holds mean spectra of three stars or more in bins of 8 Å or more', () => {
    expect(CALIBRATION.spectra.step).toBeGreaterThanOrEqual(8)
    for (const { stars } of CALIBRATION.spectra.rows) expect(stars).toBeGreaterThanOrEqual(3)
  })

  // The stars themselves are the reference; the committed figures must be what the fit gives, to the last digit.
  it.skipIf(!hasShared)(
    `is what the fit gives on the published stars (${NEEDS_SHARED})`,
    { timeout: 600_000 },
    async () => {
      const model = calibrationModel(measureStars())
      const files = await calibrationFiles(fittedCalibration(model, zoneFigures(model)))
      for (const [name, text] of Object.entries(files)) {
        const committed = readFileSync(fileURLToPath(new URL(`../../src/tables/${name}`, import.meta.url)), 'utf8')
        expect(committed === text, `${name} differs from what npm run calibrate gives`).toBe(true)
      }
    },
  )
})
