import { isBlue } from './featureless.ts'
import type { Look, Recognised } from './look.ts'

/** Windows [Å] on either side of the heads of C₂'s Swan bands, which fade to the blue. */
const HEADS = [
  { head: 4737, blue: [4702, 4734], red: [4743, 4762] },
  { head: 5165, blue: [5122, 5160], red: [5200, 5222] },
  { head: 5635, blue: [5598, 5632], red: [5642, 5668] },
] as const

/** Carbon stars: the light drops bluewards of every head of C₂ covered, at least two; titanium oxide fades the other way. */
export function carbonStar(look: Look): Recognised | undefined {
  const limit = look.limit('carbonStep')
  const sigma = look.limit('carbonSigma')
  let covered = 0
  const drops: string[] = []
  if (hasTitanium(look)) return undefined
  for (const { head, blue, red } of HEADS) {
    const left = look.mean(blue[0], blue[1])
    const right = look.mean(red[0], red[1])
    if (left.used < 0.85 || right.used < 0.85 || !(right.mean > sigma * right.error)) continue
    covered++
    const drop = 1 - left.mean / right.mean
    const error = Math.hypot(left.error, right.error) / right.mean
    if (drop > limit && drop > sigma * error) drops.push(`${Math.round(100 * drop)} % at ${head} Å`)
  }
  if (drops.length < 2 || drops.length < covered) return undefined
  const text = `the light drops bluewards of the heads of C2 by ${drops.join(', ')}`
  // Carbon stars are cool; in light this blue the bands are those of a white dwarf (DQ).
  return isBlue(look)
    ? { peculiarity: look.peculiarity('white dwarf', `${text}, in light bluer than an F star's`), isOutside: true }
    : { peculiarity: look.peculiarity('carbon', text), isOutside: false }
}

function hasTitanium(look: Look): boolean {
  const band = look.mean(7056, 7100)
  const side = look.mean(7020, 7048)
  if (band.used < 0.8 || side.used < 0.8) return (look.strength('TiO6230')?.ew ?? 0) > look.limit('gasCool')
  return 1 - band.mean / side.mean > look.limit('carbonTitanium')
}
