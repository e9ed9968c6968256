import type { Hdu } from '../fits/types.ts'
import { cellSpectra } from './cellSpectra.ts'
import { columnRoles, isStep } from './columnRoles.ts'
import type { RoledColumn } from './columnRoles.ts'
import { refused } from './container.ts'
import type { Container, HduAnswer } from './container.ts'
import { fluxRank, plainName, planeRole } from './planeRole.ts'
import { rowSpectra, tableRefusal } from './rowSpectra.ts'

/** Fewest rows for which a table with a scalar wavelength and arrays of fluxes holds one sample a row. */
const FEWEST_ROWS = 10

/** The spectra of a table HDU: one sample a row, or one spectrum a row in cells that hold arrays. */
export function tableSpectra(container: Container, hdu: Hdu): HduAnswer {
  const roled = columnRoles(hdu.columns)
  const fluxes = fluxColumns(roled)
  const waves = roled.filter(({ role }) => role === 'wavelength' || role === 'log wavelength')
  if (hdu.rows === 0 && waves.length > 0) return refused(tableRefusal('empty-table', hdu, 'requires rows, got none', 8))
  if (hdu.rows === 0) return { spectra: [], refusals: [], notes: [] }
  const arrays = fluxes.filter(({ column }) => column.repeat !== 1)
  const isScalar = waves.some(({ column }) => column.repeat === 1) && !hdu.columns.some(isStep)
  const isAcross = isScalar && hdu.rows >= FEWEST_ROWS && !waves.some(({ column }) => column.repeat !== 1)
  if (arrays.length > 0 && !(isAcross && arrays.every(({ column }) => column.repeat > 1)))
    return cellSpectra(container, hdu, { roled, fluxes: arrays })
  if (waves.length > 0 && waves.every(({ column }) => column.repeat !== 1))
    return refused(tableRefusal('no-flux', hdu, 'requires a flux column of arrays beside its wavelengths, got none', 5))
  return rowSpectra(container, hdu, roled, fluxes)
}

/** The columns that hold a flux of the object, the best name first; several where all are alike. */
function fluxColumns(roled: readonly RoledColumn[]): readonly RoledColumn[] {
  const named = roled.filter(({ role }) => role === 'flux')
  if (named.length === 0) {
    const other = roled.filter(({ role }) => role === 'normalised')
    if (other.length > 0) return other
    return roled.filter(({ role, column }) => role === 'sky' && planeRole(column.name) === 'sky')
  }
  const exact = named.filter(({ column }) => plainName(column.name) === 'flux')
  if (exact.length > 0) return exact.slice(0, 1)
  const best = Math.min(...named.map(({ column }) => fluxRank(column.name)))
  return named.filter(({ column }) => fluxRank(column.name) === best)
}
