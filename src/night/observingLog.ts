import type { Exposure } from './exposures.ts'
import type { LogEntry } from './types.ts'

/** The observing log, in order of time; files without a time come last, in their order. `doubted`: Outcomes whose clock is. */
export function observingLog(exposures: readonly Exposure[], doubted: ReadonlySet<number>): readonly LogEntry[] {
  return [...exposures]
    .sort((a, b) => (a.mjd ?? Infinity) - (b.mjd ?? Infinity) || a.outcome - b.outcome || 0)
    .map(({ outcome, file, mjd, kind, facts, setup }) => ({
      file,
      ...(mjd === undefined ? {} : { mjd }),
      ...(doubted.has(outcome) ? { isTimeDoubtful: true as const } : {}),
      kind,
      object: facts.object ?? '',
      ...(facts.exposure === undefined ? {} : { exposure: facts.exposure }),
      ...(facts.airmass === undefined ? {} : { airmass: facts.airmass }),
      setup,
    }))
}
