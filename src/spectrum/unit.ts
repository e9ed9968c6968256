import { SPEED_OF_LIGHT } from '../numeric/speedOfLight.ts'

/** What a spectral unit measures. */
export type SpectralQuantity = 'wavelength' | 'frequency' | 'wavenumber' | 'energy' | 'velocity'

/** A unit of a spectral axis: value × scale is in Å, Hz, cm⁻¹, eV or km/s. */
export interface SpectralUnit {
  readonly quantity: SpectralQuantity
  readonly scale: number
  /** Set when the axis holds logarithms of the quantity in that unit. */
  readonly log?: 'log10' | 'ln'
}

const EXACT: readonly (readonly [RegExp, SpectralQuantity, number])[] = [
  [/^0\.1_?nm$/i, 'wavelength', 1],
  [/^(a|ang|angs|angstr|angstroms?|ångströms?|ångstroms?|angströms?|å|aa)$/i, 'wavelength', 1],
  [/^(nm|nanomet(er|re)s?|millimicrons?)$/i, 'wavelength', 10],
  [/^(um|µm|μm|micron|microns|micrometers?|micrometres?|mum)$/i, 'wavelength', 1e4],
  [/^(mm|millimet(er|re)s?)$/, 'wavelength', 1e7],
  [/^(cm|centimet(er|re)s?)$/i, 'wavelength', 1e8],
  [/^(pm)$/, 'wavelength', 0.01],
  [/^(m|met(er|re)s?)$/i, 'wavelength', 1e10],
  [/^(cm-1|cm\^-1|cm\*\*-1|cm\*\*\(-1\)|cm\^\(-1\)|1\/cm|\/cm|kaysers?|inverse_?cm)$/i, 'wavenumber', 1],
  [/^(m-1|m\^-1|m\*\*-1|m\*\*\(-1\)|1\/m|\/m)$/, 'wavenumber', 0.01],
  [/^(um-1|um\^-1|um\*\*-1|1\/um|micron-1)$/i, 'wavenumber', 1e4],
  [/^(hz|hertz)$/i, 'frequency', 1],
  [/^khz$/i, 'frequency', 1e3],
  [/^mhz$/i, 'frequency', 1e6],
  [/^ghz$/i, 'frequency', 1e9],
  [/^thz$/i, 'frequency', 1e12],
  [/^(ev|electron_?volts?)$/i, 'energy', 1],
  [/^kev$/i, 'energy', 1e3],
  [/^MeV$/, 'energy', 1e6],
  [/^(j|joules?)$/i, 'energy', 1 / 1.602176634e-19],
  [/^(erg|ergs)$/i, 'energy', 1e-7 / 1.602176634e-19],
  [/^(km\/s|km_?s-1|km_?s\^-1|km_?s\*\*-1|km\/sec|kms|kms-1)$/i, 'velocity', 1],
  [/^(m\/s|m_?s-1|m_?s\^-1|m_?s\*\*-1|m\/sec|ms-1)$/i, 'velocity', 1e-3],
  [/^(cm\/s|cm_?s-1)$/i, 'velocity', 1e-5],
]

/**
 * The spectral unit a text means, in the spellings that files hold ('Angstroms', '0.1nm', 'um', 'log10(Angstrom)',
 * 'cm-1' ...); undefined when the text names no spectral unit ('deg', 'pixel', '').
 */
export function spectralUnit(text: string): SpectralUnit | undefined {
  const trimmed = text
    .trim()
    .replace(/^[[(](.*)[\])]$/, '$1')
    .trim()
  const logarithm = /^(?:(log10|log|dex|ln)\s*[ ([]\s*(.+?)\s*[)\]]?)$/i.exec(trimmed)
  if (logarithm) {
    const inner = spectralUnit(logarithm[2])
    return inner && { ...inner, log: logarithm[1].toLowerCase() === 'ln' ? 'ln' : 'log10' }
  }
  const factor = /^(10(?:\*\*|\^)\(?([+-]?\d+)\)?|1e([+-]?\d+))[ *.]?(.+)$/i.exec(trimmed)
  if (factor) {
    const inner = spectralUnit(factor[4])
    return inner && { ...inner, scale: inner.scale * 10 ** Number(factor[2] ?? factor[3]) }
  }
  const plain = trimmed.replace(/\s+/g, '_')
  // MHz and mHz, MeV and meV differ by their case only; no optical file means the small ones.
  const row = EXACT.find(([pattern]) => pattern.test(plain))
  return row && { quantity: row[1], scale: row[2] }
}

/**
 * Ranges for which a wavelength unit is taken when a file names none: least and most value, and the least that the
 * highest value must reach [that unit]. As Å a range must reach 3000, since the air is opaque below: what ends sooner
 * is in nm.
 */
const PLAUSIBLE: readonly (readonly [string, number, number, number])[] = [
  ['Angstrom', 900, 300_000, 3000],
  ['nm', 90, 6_000, 0],
  ['um', 0.09, 30, 0],
  ['m', 0.9e-7, 3e-5, 0],
]

/** The wavelength unit that values from `low` to `high` can stand for, the likeliest first; undefined when none fits. */
export function guessedWavelengthUnit(low: number, high: number): string | undefined {
  return PLAUSIBLE.find(([, least, most, reach]) => low >= least && high <= most && high >= reach)?.[0]
}

/** Planck constant × speed of light [eV Å], from the exact SI values. */
export const HC_EV_ANGSTROM = (6.62607015e-34 * 299792458 * 1e10) / 1.602176634e-19

/**
 * Wavelength [Å, vacuum for frequency, wavenumber and energy] of a value in a spectral unit.
 *
 * @throws RangeError for a velocity, which needs a rest wavelength
 */
export function toAngstrom(value: number, unit: SpectralUnit): number {
  const plain = unit.log === 'log10' ? 10 ** value : unit.log === 'ln' ? Math.exp(value) : value
  const scaled = plain * unit.scale
  if (unit.quantity === 'wavelength') return scaled
  if (unit.quantity === 'frequency') return (SPEED_OF_LIGHT * 1e13) / scaled
  if (unit.quantity === 'wavenumber') return 1e8 / scaled
  if (unit.quantity === 'energy') return HC_EV_ANGSTROM / scaled
  throw new RangeError('toAngstrom requires a unit of wavelength, frequency, wavenumber or energy, got velocity')
}
