import type { KindCriteria } from '../../tables/types.ts'
import { breakAt4000 } from './galaxy.ts'
import { atRedshift } from './lightSums.ts'
import { lookAt, type Look } from './look.ts'

/** Redshift step that the search goes by: less than half of the narrowest window. */
const STEP = 0.001
/** A line counts above so many standard errors. */
const SIGMA = 4

/**
 * The redshift at which the absorption of old stars stands at its places, all of it that is covered: Ca II K and H below a
 * break at 4000 Å, the G band, Mg b, Na D; undefined where nothing fits.
 *
 * @param from  redshift to begin at, beyond what stars of the Galaxy have
 */
export function absorptionRedshift(look: Look, criteria: KindCriteria, from: number): number | undefined {
  const titanium = look.strength('TiO6230')
  if (titanium && titanium.ew > look.limit('galaxyCool')) return undefined
  let best = 0
  let found: number | undefined
  for (let redshift = from; redshift < look.limit('redshiftMaximum'); redshift += STEP) {
    const strength = oldStars(lookAt(atRedshift(look.sums, redshift), look, criteria))
    if (strength > best) {
      best = strength
      found = redshift
    }
  }
  return found
}

/** Å of absorption in all lines together; 0 where one that is covered is missing, or too few are covered. */
function oldStars(there: Look): number {
  let total = 0
  let covered = 0
  for (const name of ['CaKGalaxy', 'CaHGalaxy', 'G4300', 'Mgb', 'NaD'] as const) {
    const line = there.strength(name)
    if (!line) continue
    if (line.ew < there.limit('galaxyLine') || line.ew < SIGMA * line.error) return 0
    covered++
    total += line.ew
  }
  const step = breakAt4000(there)
  return covered < 4 || step === undefined || step < there.limit('galaxyLeastBreak') ? 0 : total
}
