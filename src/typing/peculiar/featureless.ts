import type { Look, Recognised } from './look.ts'

/** Lines of which every ordinary star of some letter shows at least one. */
const LINES = [
  'HalphaCore',
  'HbetaCore',
  'HgammaCore',
  'CaK',
  'HeI4471',
  'HeI5876',
  'HeII4686',
  'G4300',
  'Mgb',
  'NaD',
] as const
const FEWEST = 7

/**
 * White dwarfs without lines (DC): light bluer than an F star's in which not one line stands out though weak ones would.
 * Only flux densities tell the colour; a lamp or a flat field is redder.
 */
export function featurelessDwarf(look: Look): Recognised | undefined {
  if (!isBlue(look)) return undefined
  const limit = look.limit('featurelessLine')
  let covered = 0
  for (const name of LINES) {
    const line = look.strength(name)
    if (!line) continue
    covered++
    if (Math.abs(line.ew) > limit || 2 * line.error > limit) return undefined
  }
  if (covered < FEWEST) return undefined
  return {
    peculiarity: look.peculiarity(
      'white dwarf',
      `light bluer than an F star's without any line: none of ${covered} takes more than ${limit} Å`,
    ),
    isOutside: true,
  }
}

/** True for flux densities that fall to the red as those of stars hotter than about 6600 K; what is reddened counts as red. */
export function isBlue(look: Look): boolean {
  const blue = look.mean(4170, 4240)
  const red = look.mean(6380, 6450)
  return look.isFluxDensity && blue.used > 0.8 && red.used > 0.8 && blue.mean > look.limit('blueColour') * red.mean
}
