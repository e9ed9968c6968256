import type { Column, Hdu } from '../fits/types.ts'
import type { Refusal } from './axis.ts'
import { cellSpectra } from './cellSpectra.ts'
import { listedAxis } from './columnAxis.ts'
import { columnNumbers } from './columnCells.ts'
import { columnRoles, isNumeric } from './columnRoles.ts'
import type { RoledColumn } from './columnRoles.ts'
import { headersOf, placeWords, refused } from './container.ts'
import type { Container, HduAnswer } from './container.ts'
import { flagsOf, pickErrors } from './tablePlanes.ts'
import type { FoundSpectrum } from './found.ts'
import { fluxUnitCard } from './fluxUnit.ts'
import { fluxRank, plainName, planeRole } from './planeRole.ts'
import { isEvenlySampled } from './sampling.ts'
import type { Note } from '../findings/types.ts'

/** Fewest samples of a table of rows that is taken for a spectrum although its columns have no telling names. */
const FEWEST_UNNAMED = 16

/** The spectra of a table HDU: one sample a row, or one spectrum a row in cells that hold arrays. */
export function tableSpectra(container: Container, hdu: Hdu): HduAnswer {
  const roled = columnRoles(hdu.columns)
  const fluxes = fluxColumns(roled)
  const waves = roled.filter(({ role }) => role === 'wavelength' || role === 'log wavelength')
  if (hdu.rows === 0 && waves.length > 0) return refused(reason('empty-table', hdu, 'requires rows, got none', 8))
  if (hdu.rows === 0) return { spectra: [], refusals: [], notes: [] }
  const isCells = fluxes.some(({ column }) => column.repeat !== 1)
  if (isCells) return cellSpectra(container, hdu, { roled, fluxes: fluxes.filter(({ column }) => column.repeat !== 1) })
  if (waves.length > 0 && waves.every(({ column }) => column.repeat !== 1))
    return refused(reason('no-flux', hdu, 'requires a flux column of arrays beside its wavelengths, got none', 5))
  return rowSpectra(container, hdu, roled, fluxes)
}

/** The columns that hold a flux of the object, the best name first; several where all are alike. */
function fluxColumns(roled: readonly RoledColumn[]): readonly RoledColumn[] {
  const named = roled.filter(({ role }) => role === 'flux')
  if (named.length === 0) {
    const other = roled.filter(({ role }) => role === 'normalised')
    return other.length > 0
      ? other
      : roled.filter(({ role, column }) => role === 'sky' && planeRole(column.name) === 'sky')
  }
  const exact = named.filter(({ column }) => plainName(column.name) === 'flux')
  if (exact.length > 0) return exact.slice(0, 1)
  const best = Math.min(...named.map(({ column }) => fluxRank(column.name)))
  return named.filter(({ column }) => fluxRank(column.name) === best)
}

function reason(code: string, hdu: Hdu, text: string, weight: number): Refusal {
  return { code, message: `${hdu.name === '' ? 'table' : `table ${hdu.name}`} ${text}`, weight, hdu: hdu.index }
}

function rowSpectra(
  container: Container,
  hdu: Hdu,
  roled: readonly RoledColumn[],
  fluxes: readonly RoledColumn[],
): HduAnswer {
  const scalar = roled.filter(({ column }) => column.repeat === 1)
  const notes: Note[] = []
  let wave = pickWave(scalar)
  let chosen = fluxes.filter(({ column }) => column.repeat === 1 && column !== wave?.column)
  if (!wave && chosen.length === 0) {
    const guess = guessColumns(container, hdu)
    if (!guess)
      return refused(reason('no-wavelength-axis', hdu, 'requires columns of wavelength and flux, got none so named', 1))
    wave = { column: guess.wave, role: 'wavelength' }
    chosen = [{ column: guess.flux, role: 'flux' }]
    const names = `${guess.wave.name || 'column 1'} and ${guess.flux.name || 'column 2'}`
    notes.push({
      code: 'columns-guessed',
      text: `${names} are taken for wavelength and flux by their order and values`,
    })
  }
  if (!wave) return refused(reason('no-wavelength-axis', hdu, 'requires a wavelength column, got none so named', 3))
  if (chosen.length === 0) {
    const names = hdu.columns.map((column) => column.name).join(', ')
    const text = `requires a flux column beside ${wave.column.name}, got ${names}: no spectrum (a list of lines, a mask or a response curve)`
    return refused(reason('no-flux', hdu, text, 7))
  }
  return readRows(container, hdu, { scalar, wave, chosen, notes })
}

/** The wavelength column among several: one with a unit, plain before logarithmic. */
function pickWave(scalar: readonly RoledColumn[]): RoledColumn | undefined {
  const waves = scalar.filter(({ role }) => role === 'wavelength' || role === 'log wavelength')
  return (
    waves.find(({ column, role }) => role === 'wavelength' && column.unit !== '') ??
    waves.find(({ role }) => role === 'wavelength') ??
    waves[0]
  )
}

function readRows(
  container: Container,
  hdu: Hdu,
  given: { scalar: readonly RoledColumn[]; wave: RoledColumn; chosen: readonly RoledColumn[]; notes: readonly Note[] },
): HduAnswer {
  const { source, file } = container
  const { scalar, wave, chosen } = given
  const read = (column: Column): Float64Array => columnNumbers(source, hdu, column)
  const answer = listedAxis(read(wave.column), {
    name: `column ${wave.column.name || wave.column.index + 1}`,
    unit: wave.column.unit,
    role: wave.role ?? 'wavelength',
    keyword: `TUNIT${wave.column.index + 1}`,
  })
  if ('refusal' in answer) return refused({ ...answer.refusal, hdu: hdu.index })
  const { axis } = answer
  const headers = headersOf(file, hdu)
  const isSure = chosen.some(({ column }) => planeRole(column.name) === 'flux' && fluxRank(column.name) === 0)
  if (!isSure && !isEvenlySampled(axis.wavelength)) {
    const text = `requires wavelengths that follow each other like samples, got ${hdu.rows} scattered ones: a list of lines`
    return refused(reason('no-flux', hdu, text, 6))
  }
  const skyColumn = scalar.find(({ role, column }) => role === 'sky' && !chosen.some((flux) => flux.column === column))
  const flags = flagsOf(
    scalar.map(({ column }) => column),
    hdu.header,
  )
  const spectra = chosen.slice(0, container.most).map(({ column, role }, i): FoundSpectrum => {
    const errors = pickErrors(scalar, column)
    const many = chosen.length > 1
    return {
      hdu: hdu.index,
      ...(many ? { row: i } : {}),
      axis,
      label: { name: wave.column.name, ucd: wave.column.ucd, utype: wave.column.utype },
      flux: read(column),
      fluxUnit: column.unit || fluxUnitCard(headers),
      ...(role === 'normalised' ? { isNormalised: true } : {}),
      ...(role === 'sky' ? { role: 'sky' as const } : {}),
      ...(errors ? { uncertainty: { values: read(errors.column), kind: errors.kind } } : {}),
      ...(flags
        ? { flags: { values: read(flags.column), isBad: flags.isBad, words: `flags in ${flags.column.name}` } }
        : {}),
      ...(skyColumn && role !== 'sky' ? { sky: read(skyColumn.column) } : {}),
      headers,
      convention: `${placeWords(hdu)}, one sample a row, ${axis.words}, flux in ${column.name || `column ${column.index + 1}`}`,
      ...(many ? { part: column.name } : {}),
      notes: many
        ? [
            ...given.notes,
            {
              code: 'many-flux-columns',
              text: `${chosen.length} flux columns share one wavelength column; this is ${column.name}`,
            },
          ]
        : given.notes,
    }
  })
  return { spectra, refusals: [], notes: [] }
}

/** Two columns of numbers whose names say nothing: wavelength and flux by their order, if the values agree. */
function guessColumns({ source }: Container, hdu: Hdu): { readonly wave: Column; readonly flux: Column } | undefined {
  const numeric = hdu.columns.filter((column) => isNumeric(column) && column.repeat === 1)
  const isNameless = (column: Column): boolean => /^(col(umn)?|c|field|x|y|_)?_?\d*$/.test(plainName(column.name))
  if (numeric.length < 2 || numeric.length !== hdu.columns.length || hdu.rows < FEWEST_UNNAMED) return undefined
  if (!isNameless(numeric[0]) || !isNameless(numeric[1]) || !/^[EDF]$/.test(numeric[0].letter)) return undefined
  const values = columnNumbers(source, hdu, numeric[0])
  if (!isEvenlySampled(values)) return undefined
  return { wave: numeric[0], flux: numeric[1] }
}
