import { figure, refuse, wavelengthFault } from './axis.ts'
import type { AxisAnswer } from './axis.ts'
import type { PlaneRole } from './planeRole.ts'
import type { Note } from '../findings/types.ts'
import { guessedWavelengthUnit, spectralUnit, toAngstrom } from './unit.ts'
import type { SpectralUnit } from './unit.ts'

/**
 * The wavelengths that listed values stand for (a column, a cell, an image row, an extension), or why they are none.
 *
 * @param name     of the column, row or extension
 * @param unit     as the file writes it, '' when it gives none
 * @param keyword  card that gives the unit, for messages
 */
export function listedAxis(
  values: Float64Array,
  { name, unit, role, keyword }: { name: string; unit: string; role: PlaneRole; keyword: string },
): AxisAnswer {
  const notes: Note[] = []
  let found: SpectralUnit | undefined = spectralUnit(unit)
  if (!found && unit !== '' && !/^(none|unitless|dimensionless|-|wavelength|lambda|log\w*)$/i.test(unit.trim()))
    return refuse(
      'unit-unknown',
      `${keyword} requires a unit of wavelength, frequency, wavenumber or energy, got '${unit}'`,
      9,
      keyword,
    )
  if (found?.quantity === 'velocity')
    return refuse(
      'no-rest-wavelength',
      `${keyword} requires a unit of wavelength, got velocities without a rest wavelength`,
      7,
      keyword,
    )
  const [low, high] = finiteEnds(values)
  if (low > high) return refuse('no-finite-wavelength', `${name} requires at least one finite wavelength, got none`, 9)
  const log =
    found?.log ??
    (role === 'log wavelength' ? (/^ln/i.test(name) ? 'ln' : 'log10') : undefined) ??
    (low >= 3 && high <= 5 && (!found || (found.quantity === 'wavelength' && found.scale === 1)) ? 'log10' : undefined)
  if (log && !found?.log && role !== 'log wavelength')
    notes.push({
      code: 'log-guessed',
      text: `the values ${figure(low)} to ${figure(high)} of ${name} are taken for log10 of wavelengths`,
    })
  const ends = [low, high].map((value) => (log === 'log10' ? 10 ** value : log === 'ln' ? Math.exp(value) : value))
  if (!found) {
    const guess = guessedWavelengthUnit(ends[0], ends[1])
    if (guess === undefined) {
      const rule = `${name} requires a unit, or values that can be wavelengths in one`
      return refuse('unit-unknown', `${rule}, got no unit and ${figure(ends[0])} to ${figure(ends[1])}`, 4)
    }
    found = spectralUnit(guess) as SpectralUnit
    notes.push({
      code: 'unit-guessed',
      text: `${name} has no unit; the values ${figure(ends[0])} to ${figure(ends[1])} are taken for ${guess}`,
    })
  }
  const plain: SpectralUnit = log ? { ...found, log } : found
  const wavelength = values.map((value) => {
    const angstrom = toAngstrom(value, plain)
    // Zeros are the custom for cells that are not filled.
    return value === 0 && !log ? NaN : angstrom
  })
  const fault = wavelengthFault(wavelength, name)
  if (fault) return fault
  const isInverse = found.quantity !== 'wavelength'
  return {
    axis: {
      wavelength,
      ...(isInverse ? { medium: 'vacuum', mediumFrom: `${found.quantity} in ${name}` } : {}),
      words: `${log ? `${log === 'ln' ? 'natural logarithms' : 'log10'} of ` : ''}${found.quantity}s in ${name}`
        .replace('energys', 'energies')
        .replace('frequencys', 'frequencies'),
      notes,
    },
  }
}

function finiteEnds(values: Float64Array): readonly [number, number] {
  let low = Infinity
  let high = -Infinity
  for (const value of values) {
    if (!Number.isFinite(value) || value === 0) continue
    if (value < low) low = value
    if (value > high) high = value
  }
  return [low, high]
}
