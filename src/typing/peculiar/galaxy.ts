import type { Look, Recognised } from './look.ts'

/**
 * Galaxies by stars of unlike kind in one light: a break at 4000 Å as weak as a G star's beside titanium oxide as strong
 * as a late K giant's, with the G band and hydrogen that late K and M dwarfs lack.
 */
export function mixedPopulation(look: Look): Recognised | undefined {
  const titanium = look.strength('TiO6230')
  const band = look.strength('G4300')
  const hydrogen = look.strength('Hbeta')
  const magnesium = look.strength('Mgb')
  if (!titanium || !band || !hydrogen || !magnesium) return undefined
  const step = breakAt4000(look)
  if (step === undefined || step > look.limit('galaxyBreak')) return undefined
  if (titanium.ew < look.limit('galaxyTitanium') || titanium.ew < 4 * titanium.error) return undefined
  if (titanium.ew > look.limit('galaxyTitaniumMost')) return undefined
  if (!hasGammaBand(look, titanium.ew) || magnesium.ew < look.limit('galaxyMagnesium')) return undefined
  if (band.ew < look.limit('galaxyCH') || hydrogen.ew < look.limit('galaxyHydrogen')) return undefined
  return {
    peculiarity: look.peculiarity(
      'galaxy',
      `a break at 4000 Å of ${step.toFixed(1)}, as in G stars, beside ${titanium.ew.toFixed(1)} Å of TiO at 6230 Å, as in late K giants: stars of several kinds`,
    ),
    isOutside: true,
  }
}

/** The band that begins at 7054 Å takes its part as well; where it is not covered the other must be stronger. */
function hasGammaBand(look: Look, titanium: number): boolean {
  const band = look.mean(7126, 7160)
  const side = look.mean(7018, 7046)
  if (band.used < 0.8 || side.used < 0.8) return titanium > look.limit('galaxyTitaniumAlone')
  const error = Math.hypot(band.error, side.error) / side.mean
  return band.mean / side.mean + error < look.limit('galaxyGamma')
}

/** Dn4000: mean of 4000–4100 Å over that of 3850–3950 Å, each per unit of frequency; undefined where not covered. */
export function breakAt4000(look: Look): number | undefined {
  const red = look.mean(4000, 4100)
  const blue = look.mean(3850, 3950)
  if (red.used < 0.9 || blue.used < 0.9 || !(blue.mean > 0)) return undefined
  return (red.mean * 4050 ** 2) / (blue.mean * 3900 ** 2)
}
