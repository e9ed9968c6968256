import type { KindWindow } from '../../tables/types.ts'
import { inAngstrom, type Look, type Recognised } from './look.ts'
import type { Strength } from './strength.ts'

/** Emission of hydrogen in a star: Be, T Tauri, flare stars, Mira variables, supergiants with winds. */
export function stellarEmission(look: Look): Recognised | undefined {
  const alpha = look.strength('HalphaCore')
  const titanium = look.strength('TiO6230')
  const isCool = titanium !== undefined && titanium.ew > look.limit('compositeTitanium')
  const shines = (line: Strength | undefined, limit: number, sigma = look.limit('emissionSigma')): line is Strength =>
    line !== undefined && line.ew < limit && line.ew < -sigma * line.error
  const limit = look.limit('emissionHalpha')
  if (shines(alpha, limit)) return found(look, `Hα of ${inAngstrom(alpha.ew)} (emission below ${limit} Å)`)
  const beta = look.strength('HbetaCore')
  const least = look.limit(isCool ? 'emissionCool' : 'emissionHbeta')
  if (shines(beta, least)) return found(look, `Hβ of ${inAngstrom(beta.ew)} (emission below ${least} Å)`)
  // Between bands of TiO one peak says little; two at hydrogen's places do.
  const blue = isCool ? look.limit('emissionCoolBlue') : least
  const pair = look.limit('emissionPair')
  const lines = (
    [
      ['Hβ', beta, least],
      ['Hγ', look.strength('HgammaCore'), blue],
      ['Hδ', look.strength('HdeltaCore'), blue],
    ] as const
  ).flatMap(([name, line, most]) =>
    shines(line, most, pair) ? [`${name} of ${inAngstrom(line.ew)} (emission below ${most} Å)`] : [],
  )
  return lines.length >= 2 ? found(look, lines.join(' and ')) : undefined
}

function found(look: Look, text: string): Recognised {
  return { peculiarity: look.peculiarity('emission', text), isOutside: false }
}

/** Emission of thin gas: which lines at which redshift. */
export interface GasEmission {
  readonly redshift: number
  readonly lines: readonly KindWindow[]
  readonly text: string
}

const GAS: readonly KindWindow[] = ['OII3727', 'HbetaCore', 'OIII4959', 'OIII5007', 'HalphaNII', 'SII6725']
const FORBIDDEN: ReadonlySet<KindWindow> = new Set(['OII3727', 'OIII4959', 'OIII5007', 'SII6725'])

/** Emission lines of hydrogen and forbidden lines in one frame; undefined where they are too few or in no right ratio. */
export function gasEmission(look: Look): GasEmission | undefined {
  const sigma = look.limit('forbiddenSigma')
  const limit = look.limit('forbiddenStrength')
  const lines = GAS.filter((name) => {
    const line = look.strength(name)
    return line !== undefined && line.ew < limit && line.ew < -sigma * line.error
  })
  const forbidden = lines.filter((name) => FORBIDDEN.has(name))
  if (lines.length < look.limit('forbiddenLines') || forbidden.length < 1) return undefined
  if (lines.includes('OIII5007') && !hasOxygenRatio(look)) return undefined
  const redshift = look.sums.stretch - 1
  const text = `emission of ${lines.map((name) => `${NAMES[name] ?? name} ${(-(look.strength(name)?.ew ?? 0)).toFixed(0)} Å`).join(', ')}`
  return { redshift, lines, text }
}

const NAMES: Partial<Record<KindWindow, string>> = {
  OII3727: '[O II] 3727',
  HbetaCore: 'Hβ',
  OIII4959: '[O III] 4959',
  OIII5007: '[O III] 5007',
  HalphaNII: 'Hα + [N II]',
  SII6725: '[S II] 6725',
}

/** 5007/4959 is 3 in thin gas, by the ratio of transition probabilities. */
function hasOxygenRatio(look: Look): boolean {
  const strong = look.strength('OIII5007')
  const weak = look.strength('OIII4959')
  if (!strong || !weak) return true
  const limit = look.limit('forbiddenRatio')
  const room = 3 * Math.hypot(strong.error, 3 * weak.error)
  return Math.abs(3 * weak.ew - strong.ew) < Math.max(limit * Math.abs(strong.ew), room)
}
