import type { Column, Hdu } from '../fits/types.ts'
import type { Axis, Refusal } from './axis.ts'
import { listedAxis } from './columnAxis.ts'
import { columnNumbers } from './columnCells.ts'
import { isNumeric } from './columnRoles.ts'
import type { RoledColumn } from './columnRoles.ts'
import { companionAxis } from './companion.ts'
import { headersOf, placeWords, refused, room } from './container.ts'
import type { Container, HduAnswer } from './container.ts'
import { fluxUnitCard } from './fluxUnit.ts'
import type { FoundSpectrum } from './found.ts'
import { headerAxis } from './headerAxis.ts'
import type { WavelengthLabel } from './medium.ts'
import { fluxRank, plainName, planeRole } from './planeRole.ts'
import { isEvenlySampled } from './sampling.ts'
import { flagsOf, pickErrors } from './tablePlanes.ts'
import type { Note } from '../findings/types.ts'

/** Fewest samples of a table of rows that is taken for a spectrum although its columns have no telling names. */
const FEWEST_UNNAMED = 16

/** What a table of one sample a row is read with. */
interface RowTable {
  readonly scalar: readonly RoledColumn[]
  readonly fluxes: readonly RoledColumn[]
  readonly axis: Axis
  readonly label?: WavelengthLabel
  readonly notes: readonly Note[]
}

/** The spectra of a table with one sample a row: one for every flux column. */
export function rowSpectra(
  container: Container,
  hdu: Hdu,
  roled: readonly RoledColumn[],
  fluxes: readonly RoledColumn[],
): HduAnswer {
  const scalar = roled.filter(({ column }) => column.repeat === 1)
  const wave = pickWave(scalar)
  const chosen = sameFamily(
    fluxes.filter(({ column }) => column !== wave?.column),
    wave,
  )
  if (chosen.length === 0 && wave) return refused(noFlux(hdu, wave.column))
  if (chosen.length === 0) {
    const guess = guessColumns(container, hdu)
    return guess
      ? guessedRows(container, hdu, scalar, guess)
      : refused(
          tableRefusal('no-wavelength-axis', hdu, 'requires columns of wavelength and flux, got none so named', 1),
        )
  }
  const answer = wave ? waveAxis(container, hdu, wave.column, wave) : outerAxis(container, hdu)
  if ('refusal' in answer) return refused({ ...answer.refusal, hdu: answer.refusal.hdu ?? hdu.index })
  const isSure = chosen.some(({ column }) => planeRole(column.name) === 'flux' && fluxRank(column.name) === 0)
  if (!isSure && !isEvenlySampled(answer.axis.wavelength)) {
    const text = `requires wavelengths that follow each other like samples, got ${hdu.rows} scattered ones: a list of lines`
    return refused(tableRefusal('no-flux', hdu, text, 6))
  }
  const { axis, label } = answer
  return readRows(container, hdu, { scalar, fluxes: chosen, axis, ...(label ? { label } : {}), notes: [] })
}

/** A reason why a table holds no spectrum. */
export function tableRefusal(code: string, hdu: Hdu, text: string, weight: number): Refusal {
  return { code, message: `${hdu.name === '' ? 'table' : `table ${hdu.name}`} ${text}`, weight, hdu: hdu.index }
}

function noFlux(hdu: Hdu, wave: Column): Refusal {
  const names = hdu.columns.map((column) => column.name).join(', ')
  const text = `requires a flux column beside ${wave.name}, got ${names}: no spectrum (a list of lines, a mask or a response curve)`
  return tableRefusal('no-flux', hdu, text, 7)
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

/** Of fluxes that were extracted in two ways (OPT_..., BOX_...), those that bear the name of the wavelengths. */
function sameFamily(fluxes: readonly RoledColumn[], wave: RoledColumn | undefined): readonly RoledColumn[] {
  const stem = wave && /^([a-z0-9]+)_/.exec(plainName(wave.column.name))?.[1]
  const own = stem === undefined ? [] : fluxes.filter(({ column }) => plainName(column.name).startsWith(`${stem}_`))
  return own.length > 0 ? own : fluxes
}

type RowsAxis = { readonly axis: Axis; readonly label?: WavelengthLabel } | { readonly refusal: Refusal }

function waveAxis(container: Container, hdu: Hdu, column: Column, { role }: RoledColumn): RowsAxis {
  const answer = listedAxis(columnNumbers(container.source, hdu, column), {
    name: `column ${column.name || column.index + 1}`,
    unit: column.unit,
    role: role ?? 'wavelength',
    keyword: `TUNIT${column.index + 1}`,
  })
  return 'refusal' in answer
    ? answer
    : { ...answer, label: { name: column.name, ucd: column.ucd, utype: column.utype } }
}

/** Wavelengths of a table that has none itself: another extension, the companion file, or the table's own cards. */
function outerAxis(container: Container, hdu: Hdu): RowsAxis {
  const companion = companionAxis(container, hdu, hdu.rows, 0)
  if (companion) return companion
  if (hdu.header.get('CRVAL1') ?? hdu.header.get('COEFF0')) return headerAxis([hdu.header], 1, hdu.rows)
  return { refusal: tableRefusal('no-wavelength-axis', hdu, 'requires a wavelength column, got none so named', 3) }
}

function guessedRows(
  container: Container,
  hdu: Hdu,
  scalar: readonly RoledColumn[],
  { wave, flux }: { readonly wave: Column; readonly flux: Column },
): HduAnswer {
  const answer = waveAxis(container, hdu, wave, { column: wave, role: 'wavelength' })
  if ('refusal' in answer) return refused({ ...answer.refusal, hdu: hdu.index })
  const names = `${wave.name || 'column 1'} and ${flux.name || 'column 2'}`
  const notes = [
    { code: 'columns-guessed', text: `${names} are taken for wavelength and flux by their order and values` },
  ]
  return readRows(container, hdu, { scalar, fluxes: [{ column: flux, role: 'flux' }], axis: answer.axis, notes })
}

function readRows(container: Container, hdu: Hdu, given: RowTable): HduAnswer {
  const { source, file } = container
  const { scalar, fluxes, axis, label } = given
  const read = (column: Column): Float64Array => columnNumbers(source, hdu, column)
  const headers = headersOf(file, hdu)
  const skyColumn = scalar.find(({ role, column }) => role === 'sky' && !fluxes.some((flux) => flux.column === column))
  const flags = flagsOf(
    scalar.map(({ column }) => column),
    hdu.header,
  )
  const found = (column: Column, role: RoledColumn['role'], flux: Float64Array): FoundSpectrum => {
    const errors = column.repeat === 1 ? pickErrors(scalar, column) : undefined
    return {
      hdu: hdu.index,
      axis,
      ...(label ? { label } : {}),
      flux,
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
      notes: given.notes,
    }
  }
  const spectra = fluxes.flatMap(({ column, role }) =>
    transposed(read(column), column.repeat).map((flux) => found(column, role, flux)),
  )
  return { spectra: numbered(spectra, fluxes).slice(0, room(container, hdu.rows)), refusals: [], notes: [] }
}

/** The columns of a table of `repeat` values a row, each as one array. */
function transposed(values: Float64Array, repeat: number): readonly Float64Array[] {
  if (repeat === 1) return [values]
  return Array.from({ length: repeat }, (_, k) => values.filter((_value, i) => i % repeat === k))
}

function numbered(spectra: readonly FoundSpectrum[], fluxes: readonly RoledColumn[]): readonly FoundSpectrum[] {
  if (spectra.length < 2) return spectra
  const names = fluxes.map(({ column }) => column.name)
  return spectra.map((found, row) => {
    const text = `${spectra.length} fluxes (${names.join(', ')}) share one wavelength column; this is number ${row}`
    return { ...found, row, notes: [...found.notes, { code: 'many-flux-columns', text }] }
  })
}

/** Two columns of numbers whose names say nothing: wavelength and flux by their order, if the values agree. */
function guessColumns({ source }: Container, hdu: Hdu): { readonly wave: Column; readonly flux: Column } | undefined {
  const numeric = hdu.columns.filter((column) => isNumeric(column) && column.repeat === 1)
  const isNameless = (column: Column): boolean => /^(col(umn)?|c|field|x|y|_)?_?\d*$/.test(plainName(column.name))
  if (numeric.length < 2 || numeric.length !== hdu.columns.length || hdu.rows < FEWEST_UNNAMED) return undefined
  if (!isNameless(numeric[0]) || !isNameless(numeric[1]) || !/^[EDF]$/.test(numeric[0].letter)) return undefined
  return isEvenlySampled(columnNumbers(source, hdu, numeric[0])) ? { wave: numeric[0], flux: numeric[1] } : undefined
}
