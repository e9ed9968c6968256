import type { Look, Recognised } from './look.ts'
import { inAngstrom } from './look.ts'

/** Light of two stars: hydrogen of a hot one beside Mg b or titanium oxide of a cool one. */
export function compositeLight(look: Look): Recognised | undefined {
  const hydrogen = look.strength('HgammaCore')
  const least = look.limit('compositeHydrogen')
  if (!hydrogen || hydrogen.ew < least || hydrogen.ew < 5 * hydrogen.error) return undefined
  for (const [name, label, limit] of [
    ['TiO6230', 'TiO at 6230 Å', look.limit('compositeTitanium')],
    ['Mgb', 'Mg b', look.limit('compositeMagnesium')],
  ] as const) {
    const cool = look.strength(name)
    if (!cool || cool.ew < limit || cool.ew < 4 * cool.error) continue
    return {
      peculiarity: look.peculiarity(
        'composite',
        `Hγ of ${inAngstrom(hydrogen.ew)} in its core (stars before F5, at least ${least} Å) beside ${inAngstrom(cool.ew)} of ${label} (at least ${limit} Å in cool stars only)`,
      ),
      isOutside: false,
    }
  }
  return undefined
}
