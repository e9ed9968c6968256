import { inAngstrom, type Look, type Recognised } from './look.ts'

/**
 * White dwarfs and hot subdwarfs, told by what the pressure of their gas does: the Balmer series breaks off early
 * (Inglis & Teller 1939), the lines have wide wings, and helium is far from the share it has in ordinary hot stars.
 */
export function compactStar(look: Look): Recognised | undefined {
  if (!isHot(look)) return undefined
  return ionisedHelium(look) ?? neutralHelium(look) ?? brokenSeries(look) ?? wingedHydrogen(look) ?? faintSeries(look)
}

/** No metals or bands of a star cooler than about F0, where they are covered. */
export function isHot(look: Look): boolean {
  const over = (name: 'CaK' | 'Mgb' | 'TiO6230', limit: number): boolean => {
    const found = look.strength(name)
    return found !== undefined && found.ew > limit && found.ew > 2 * found.error
  }
  return (
    !over('CaK', look.limit('hotCalcium')) &&
    !over('Mgb', look.limit('hotMagnesium')) &&
    !over('TiO6230', look.limit('hotTitanium'))
  )
}

function whiteDwarf(look: Look, text: string): Recognised {
  return { peculiarity: look.peculiarity('white dwarf', text), isOutside: true }
}

function hotSubdwarf(look: Look, text: string): Recognised {
  return { peculiarity: look.peculiarity('hot subdwarf', text), isOutside: true }
}

function ionisedHelium(look: Look): Recognised | undefined {
  const line = look.strength('HeII4686')
  const other = look.strength('HeII5411') ?? look.strength('HeII4542')
  const limit = look.limit('ionisedHelium')
  const sigma = look.limit('compactSigma')
  if (!line || !other || line.ew < limit || line.ew < sigma * line.error) return undefined
  if (other.ew < limit / 2 || other.ew < sigma * other.error) return undefined
  const wide = look.strength('HeII4686Wide')
  const wings = wide ? wide.ew / line.ew : 1
  const text = `He II 4686 of ${inAngstrom(line.ew)} (ordinary O stars stay below ${limit} Å)`
  return wings > look.limit('ionisedHeliumWings')
    ? whiteDwarf(look, `${text} with ${wings.toFixed(1)} times as much in its wings`)
    : hotSubdwarf(look, `${text} without wide wings`)
}

function neutralHelium(look: Look): Recognised | undefined {
  const hydrogen = look.strength('Hbeta') ?? look.strength('Hgamma')
  const sigma = look.limit('compactSigma')
  if (!hydrogen || hydrogen.ew > look.limit('heliumNoHydrogen')) return undefined
  const lines = (['HeI4026', 'HeI4471', 'HeI5876'] as const).flatMap((name) => {
    const found = look.strength(name)
    return found ? [found] : []
  })
  const strong = lines.filter(({ ew, error }) => ew > look.limit('neutralHelium') && ew > sigma * error)
  if (strong.length < 2) return undefined
  const wide = Math.max(look.strength('HeI4471Wide')?.ew ?? 0, look.strength('HeI5876Wide')?.ew ?? 0)
  const text = `He I lines of ${strong.map(({ ew }) => ew.toFixed(1)).join(' and ')} Å with ${inAngstrom(hydrogen.ew)} of hydrogen`
  return wide > look.limit('neutralHeliumWide')
    ? whiteDwarf(look, `${text}, ${inAngstrom(wide)} with the wings`)
    : hotSubdwarf(look, `${text}, without wide wings`)
}

/** Strength over central depth of the better of Hγ and Hβ with its wings [Å]: an effective width. */
function effectiveWidth(look: Look): number | undefined {
  for (const name of ['HgammaWide', 'HbetaWide', 'HalphaWide'] as const) {
    const wide = look.strength(name)
    const depth = look.depth(name)
    if (wide && depth !== undefined && depth > 0.05 && wide.ew > 2 * wide.error) return wide.ew / depth
  }
  return undefined
}

function brokenSeries(look: Look): Recognised | undefined {
  const gamma = look.strength('Hgamma')
  const ninth = look.strength('H9')
  const sigma = look.limit('compactSigma')
  if (!gamma || !ninth || gamma.ew < look.limit('seriesHydrogen') || gamma.ew < sigma * gamma.error) return undefined
  const limit = look.limit('seriesEnd')
  const short = limit * gamma.ew - ninth.ew
  if (short < 3 * Math.hypot(limit * gamma.error, ninth.error)) return undefined
  const width = effectiveWidth(look)
  const eighth = look.strength('H8')
  const text = `the Balmer series breaks off: H9 has ${share(ninth.ew, gamma.ew)} of Hγ's ${inAngstrom(gamma.ew)} (ordinary hot stars at least ${Math.round(100 * limit)} %)`
  const isWide =
    (width !== undefined && width > look.limit('seriesWidth')) ||
    (eighth !== undefined && eighth.ew + 2 * eighth.error < look.limit('seriesFirst') * gamma.ew)
  if (!isWide && (look.fwhm > look.limit('seriesEndFwhm') || hasWind(look))) return undefined
  return isWide
    ? whiteDwarf(look, `${text}, and the lines have wide wings or H8 is missing too`)
    : hotSubdwarf(look, `${text}, its lines being narrower than a white dwarf's`)
}

/** Emission fills hydrogen lines of supergiants; subdwarfs have none. */
function hasWind(look: Look): boolean {
  const alpha = look.strength('HalphaCore')
  return alpha !== undefined && alpha.ew < look.limit('emissionHalpha')
}

function wingedHydrogen(look: Look): Recognised | undefined {
  const sigma = look.limit('compactSigma')
  for (const [name, core] of [
    ['HgammaWide', 'Hgamma'],
    ['HbetaWide', 'Hbeta'],
    ['HalphaWide', 'Halpha'],
  ] as const) {
    const wide = look.strength(name)
    const line = look.strength(core)
    const depth = look.depth(name)
    if (!wide || !line || depth === undefined || !(depth > 0.1)) continue
    if (line.ew < look.limit('wingedHydrogen') || line.ew < sigma * line.error || wide.ew < sigma * wide.error) continue
    const width = wide.ew / depth
    // A coarse profile makes lines shallower by about its own width, in quadrature.
    if (width > Math.hypot(look.limit('winged'), look.fwhm) || wide.ew > look.limit('strongHydrogen'))
      return whiteDwarf(
        look,
        `a hydrogen line of ${inAngstrom(wide.ew)} is ${width.toFixed(0)} Å wide for its depth (ordinary stars up to ${look.limit('winged')} Å)`,
      )
  }
  return undefined
}

function faintSeries(look: Look): Recognised | undefined {
  if (look.fwhm > look.limit('seriesEndFwhm') || hasWind(look)) return undefined
  const gamma = look.strength('Hgamma')
  const tenth = look.strength('H10')
  const eleventh = look.strength('H11')
  if (!gamma || !tenth || !eleventh || gamma.ew < look.limit('seriesHydrogen')) return undefined
  if (gamma.ew > look.limit('seriesFaintHydrogen')) return undefined
  const limit = look.limit(look.fwhm > look.limit('seriesFaintFwhm') ? 'seriesFaintCoarse' : 'seriesFaint')
  const short = limit * gamma.ew - tenth.ew - eleventh.ew
  if (short < 3 * Math.hypot(limit * gamma.error, tenth.error, eleventh.error)) return undefined
  return hotSubdwarf(
    look,
    `H10 and H11 together have ${share(tenth.ew + eleventh.ew, gamma.ew)} of Hγ's ${inAngstrom(gamma.ew)} (ordinary hot stars at least ${Math.round(100 * limit)} %): the series ends early`,
  )
}

function share(part: number, whole: number): string {
  return `${Math.max(0, Math.round((100 * part) / whole))} %`
}
