import { cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import type { FluxKind } from './types.ts'

/** Words that mean a flux per unit of wavelength, frequency or photon, per area and time. */
const DENSITY = /erg|flam|fnu|photlam|photnu|jy|jansky|w\.?m|w\/m|watt|mag|w\*?\*?\s*m|stmag|abmag/i
const COUNTS =
  /^(?:10\*\*\d+)?\s*(counts?|cts|adu|dn|electrons?|e-|photons?|data numbers?|fn)\b|^(counts?|adu|electrons?|e-?)\s*\/|count|adu/i

/** What a flux unit says of the values: 'flux density', 'counts', 'normalised', or 'unknown' for '' and other words. */
export function fluxKindOf(unit: string): FluxKind {
  const text = unit.trim()
  if (/normali|relative|unitless|dimensionless|^1$|continuum/i.test(text))
    return /relative/i.test(text) ? 'unknown' : 'normalised'
  if (COUNTS.test(text)) return 'counts'
  return DENSITY.test(text) ? 'flux density' : 'unknown'
}

/** True for a unit that a flux may have, as against one of length, time or angle. */
export function isFluxUnit(unit: string): boolean {
  return fluxKindOf(unit) === 'flux density' || fluxKindOf(unit) === 'counts'
}

/** Unit of the flux, from BUNIT and its like. */
export function fluxUnitCard(headers: Headers): string {
  for (const keyword of ['BUNIT', 'FLUXUNIT', 'FLXUNIT', 'DATAUNIT']) {
    const text = cardText([headers[0]], keyword) ?? cardText(headers, keyword)
    if (text !== undefined) return text
  }
  return ''
}
