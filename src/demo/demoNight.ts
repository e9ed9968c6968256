import { BANDS } from '../tables/bands.ts'
import { CALIBRATION } from '../tables/calibration.ts'
import { DEMO_VERSION } from '../tables/demoNight.ts'
import type { DemoStep } from '../tables/demoNight.ts'
import { expectedLightOf } from './expectedLight.ts'
import { exposureFiles } from './exposure.ts'
import type { DemoFile } from './exposureFiles.ts'
import { schedule } from './schedule.ts'
import { targetList } from './targetList.ts'

export type { DemoFile } from './exposureFiles.ts'

/** Which demo night is made. */
export interface DemoOptions {
  /** True leaves the planted troubles out. */
  readonly clean: boolean
  /** Of the noise; the same seed gives the same bytes. */
  readonly seed?: number
}

/** Name of the file that says by which version a night was made. */
export const DEMO_STAMP = 'demo-stamp.txt'

/** Text of the stamp: a night whose stamp differs was made otherwise and is to be made anew. */
export function demoStamp({ clean, seed = 1 }: DemoOptions): string {
  const kind = clean ? 'clean' : 'with planted troubles'
  return `darkline demo night, version ${DEMO_VERSION}, calibration ${CALIBRATION.digest}, ${kind}, seed ${seed}\n`
}

const ABOUT = `An invented night, made by "darkline demo".

Observatory, telescope, instrument, observer and stars do not exist. The sky above the invented site is right: times,
positions and airmasses agree. Spectra are built from the program's own tables, so that typing them tests consistency,
not accuracy. raw/ holds 2-D frames, quicklook/ 1-D spectra, targets.csv the observer's list.
`

/** Steps that leave no file on the troubled night. */
const LEAVES_NOTHING: readonly DemoStep['trouble'][] = ['missing arc', 'not observed']

/** Every file of the invented night, one at a time, in a fixed order; the stamp comes last, when all is there. */
export function* demoNight(options: DemoOptions): Generator<DemoFile, void, undefined> {
  const encoder = new TextEncoder()
  yield { path: 'README.txt', bytes: encoder.encode(ABOUT) }
  yield { path: 'targets.csv', bytes: encoder.encode(targetList()) }
  const { clean, seed = 1 } = options
  const lightOf = expectedLightOf({ calibration: CALIBRATION, bands: BANDS })
  for (const exposure of schedule((step) => clean || !LEAVES_NOTHING.includes(step.trouble))) {
    yield* exposureFiles(exposure, { clean, seed, lightOf })
  }
  yield { path: DEMO_STAMP, bytes: encoder.encode(demoStamp(options)) }
}
