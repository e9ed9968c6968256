import { DEMO_DATE, DEMO_OVERHEAD, DEMO_PLAN, DEMO_STANDARDS, DEMO_TARGETS } from '../tables/demoNight.ts'
import type { DemoStar, DemoStep } from '../tables/demoNight.ts'

/** One exposure of the demo night with its number and true time. */
export interface DemoExposure {
  readonly step: DemoStep
  /** Place in the whole plan, whether or not other steps happen: seeds the noise. */
  readonly place: number
  /** From 1, in the order taken. */
  readonly number: number
  /** MJD (UTC) at which the shutter truly opened. */
  readonly mjdStart: number
  readonly star?: DemoStar
}

const SECONDS_A_DAY = 86400
const UNIX_EPOCH_MJD = 40587

/** MJD at 0 h UTC of the calendar day on which the night began. */
export const DEMO_MJD = Date.parse(`${DEMO_DATE}T00:00:00Z`) / 1000 / SECONDS_A_DAY + UNIX_EPOCH_MJD

/** A time as FITS writes it, to a tenth of a second: '2026-05-16T23:06:00.0'. */
export function isoTime(mjd: number): string {
  const tenths = Math.round((mjd - UNIX_EPOCH_MJD) * SECONDS_A_DAY * 10)
  return new Date(tenths * 100).toISOString().slice(0, 21)
}

/** The star of that name among the targets and standards. */
export function starNamed(name: string): DemoStar {
  const star = [...DEMO_TARGETS, ...DEMO_STANDARDS].find((candidate) => candidate.name === name)
  if (!star) throw new RangeError(`star requires a name of the demo night, got ${name}`)
  return star
}

/** Hours from 0 h UTC of the night's date; times before noon are of the next day. */
function hoursOf(at: string): number {
  const [hours, minutes] = at.split(':').map(Number)
  return hours + minutes / 60 + (hours < 12 ? 24 : 0)
}

/**
 * Every exposure of the night in order of time. A step that does not happen still takes its time, so that the clean
 * and the troubled night agree in all else; it is left out of the list, and the numbers run on without a gap.
 *
 * @param happens  false for the steps that leave no file
 */
export function schedule(happens: (step: DemoStep) => boolean): readonly DemoExposure[] {
  const exposures: DemoExposure[] = []
  let seconds = 0
  let previous: DemoStep | undefined
  let place = 0
  for (const step of DEMO_PLAN) {
    if (step.at !== undefined) seconds = Math.max(seconds, hoursOf(step.at) * 3600)
    if (previous && previous.setup !== step.setup) seconds += DEMO_OVERHEAD.grating
    if (step.star !== undefined && step.star !== previous?.star) seconds += DEMO_OVERHEAD.pointing
    const star = step.star === undefined ? undefined : starNamed(step.star)
    for (let i = 0; i < (step.count ?? 1); i++) {
      const mjdStart = DEMO_MJD + seconds / SECONDS_A_DAY
      if (happens(step)) {
        exposures.push({ step, place, number: exposures.length + 1, mjdStart, ...(star ? { star } : {}) })
      }
      place++
      seconds += step.exposure + DEMO_OVERHEAD.readout
    }
    previous = step
  }
  return exposures
}
