import type { Exposure } from './exposures.ts'
import type { LogEntry } from './types.ts'

/** The observing log, in order of time; files without a time come last, in their order. */
export function observingLog(exposures: readonly Exposure[]): readonly LogEntry[] {
  return [...exposures]
    .sort((a, b) => (a.mjd ?? Infinity) - (b.mjd ?? Infinity) || a.outcome - b.outcome || 0)
    .map(({ file, mjd, kind, facts, setup }) => ({
      file,
      ...(mjd === undefined ? {} : { mjd }),
      kind,
      object: facts.object ?? '',
      ...(facts.exposure === undefined ? {} : { exposure: facts.exposure }),
      ...(facts.airmass === undefined ? {} : { airmass: facts.airmass }),
      setup,
    }))
}
