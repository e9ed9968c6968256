import { FormatError } from '../errors.ts'
import type { Column, Hdu } from '../fits/types.ts'
import { refusalOf } from './axis.ts'
import type { Axis, AxisAnswer, Refusal } from './axis.ts'
import { listedAxis } from './columnAxis.ts'
import { cellNumbers, cellText } from './columnCells.ts'
import { isCount, isPartName, isStep } from './columnRoles.ts'
import type { RoledColumn } from './columnRoles.ts'
import { companionAxis } from './companion.ts'
import { headersOf, limitNotes, placeWords, room } from './container.ts'
import type { Container, HduAnswer } from './container.ts'
import { fluxUnitCard } from './fluxUnit.ts'
import type { FoundSpectrum } from './found.ts'
import { headerAxis } from './headerAxis.ts'
import type { WavelengthLabel } from './medium.ts'
import { rowFacts } from './rowFacts.ts'
import { flagsOf, pickErrors } from './tablePlanes.ts'
import type { Note } from '../findings/types.ts'

/** One spectrum a row: cells that hold arrays, of one length or of variable length, with planes by TDIM. */
export function cellSpectra(
  container: Container,
  hdu: Hdu,
  { roled, fluxes }: { roled: readonly RoledColumn[]; fluxes: readonly RoledColumn[] },
): HduAnswer {
  const spectra: FoundSpectrum[] = []
  const refusals: Refusal[] = []
  const notes: Note[] = []
  const widest = Math.max(...fluxes.map(({ column }) => column.repeat))
  const most = room(container, widest)
  let row = 0
  for (; row < hdu.rows && spectra.length < most; row++) {
    for (const flux of fluxes) {
      const answer = guarded(container, hdu, {
        roled,
        flux: flux.column,
        isNormalised: flux.role === 'normalised',
        row,
      })
      if ('refusal' in answer) {
        refusals.push({ ...answer.refusal, hdu: hdu.index, row })
        if (answer.refusal.weight >= 10)
          notes.push({ code: answer.refusal.code, text: `row ${row}: ${answer.refusal.message}` })
      } else spectra.push(...answer.spectra)
    }
    // A column that cannot be wavelengths in one row will not be in ten thousand.
    if (spectra.length === 0 && refusals.length > 8) break
  }
  const isMany = spectra.length > 1 || hdu.rows > 1
  return {
    spectra: spectra.map((found, i) =>
      isMany ? { ...found, row: fluxes.length === 1 ? (found.row ?? i) : i } : withoutRow(found),
    ),
    refusals,
    notes: [...notes, ...limitNotes(hdu, row, spectra.length >= most ? hdu.rows : row)],
  }
}

function withoutRow({ row: _row, ...found }: FoundSpectrum): FoundSpectrum {
  return found
}

/** A row with a fault does not keep the others from being read. */
function guarded(container: Container, hdu: Hdu, given: RowInput): CellAnswer {
  try {
    return cellRow(container, hdu, given)
  } catch (error) {
    if (!(error instanceof FormatError)) throw error
    return { refusal: refusalOf(error, hdu.index) }
  }
}

interface RowInput {
  readonly roled: readonly RoledColumn[]
  readonly flux: Column
  readonly isNormalised: boolean
  readonly row: number
}

type CellAnswer = { readonly spectra: readonly FoundSpectrum[] } | { readonly refusal: Refusal }

function cellRow(container: Container, hdu: Hdu, { roled, flux, isNormalised, row }: RowInput): CellAnswer {
  const { source, file } = container
  const headers = headersOf(file, hdu)
  const read = (column: Column): Float64Array => cellNumbers(source, hdu, column, row)
  const values = read(flux)
  if (values.length === 0)
    return { refusal: { code: 'empty-cell', message: `${flux.name} requires an array, got none`, weight: 3 } }
  const countColumn = hdu.columns.find(isCount)
  const counted = countColumn ? read(countColumn)[0] : values.length
  const found = rowAxis(container, hdu, { roled, flux, row, read, length: values.length })
  if ('refusal' in found) return found
  const { axis, label } = found
  const samples = axis.wavelength.length
  if (samples === 0 || values.length % samples !== 0)
    return {
      refusal: {
        code: 'lengths-differ',
        message: `${flux.name} requires as many values as wavelengths, got ${values.length} and ${samples}`,
        weight: 6,
      },
    }
  const planes = values.length / samples
  const length = counted > 0 && counted < samples ? counted : samples
  const notes: Note[] = []
  if (length < samples)
    notes.push({ code: 'cells-cut', text: `${length} of ${samples} cells are filled, by ${countColumn?.name}` })
  const errors = pickErrors(roled, flux)
  const flags = flagsOf(
    roled.filter(({ column }) => column.repeat === flux.repeat).map(({ column }) => column),
    hdu.header,
  )
  const sky = roled.find(({ role, column }) => role === 'sky' && column.repeat === flux.repeat && column !== flux)
  const slice = (array: Float64Array, plane: number): Float64Array =>
    array.subarray(plane * samples, plane * samples + length)
  const errorValues = errors && read(errors.column)
  const flagValues = flags && read(flags.column)
  const skyValues = sky && read(sky.column)
  const shown = { ...axis, wavelength: axis.wavelength.subarray(0, length) }
  const own = rowFacts(container, hdu, row)
  const part = textOf(container, hdu, row, isPartName)
  return {
    spectra: Array.from({ length: planes }, (_, plane): FoundSpectrum => ({
      hdu: hdu.index,
      row: row * planes + plane,
      axis: shown,
      label,
      flux: slice(values, plane),
      fluxUnit: flux.unit || fluxUnitCard(headers),
      ...(isNormalised ? { isNormalised: true } : {}),
      ...(errors && errorValues && errorValues.length === values.length
        ? { uncertainty: { values: slice(errorValues, plane), kind: errors.kind } }
        : {}),
      ...(flags && flagValues && flagValues.length === values.length
        ? { flags: { values: slice(flagValues, plane), isBad: flags.isBad, words: `flags in ${flags.column.name}` } }
        : {}),
      ...(skyValues && skyValues.length === values.length ? { sky: slice(skyValues, plane) } : {}),
      headers,
      convention: `${placeWords(hdu)}, one spectrum a row, ${axis.words}, flux in ${flux.name}${part === undefined ? '' : `, ${part}`}`,
      own: own.facts,
      ...(own.role ? { role: own.role } : {}),
      ...(part === undefined ? {} : { part }),
      notes:
        planes > 1
          ? [
              ...notes,
              {
                code: 'planes',
                text: `${flux.name} holds ${planes} planes over one set of wavelengths; this is plane ${plane}`,
              },
            ]
          : notes,
    })),
  }
}

function textOf(container: Container, hdu: Hdu, row: number, wanted: (column: Column) => boolean): string | undefined {
  const column = hdu.columns.find(wanted)
  return column && cellText(container.source, hdu, column, row)
}

function numberNear(
  roled: readonly RoledColumn[],
  columns: readonly Column[],
  read: (column: Column) => Float64Array,
): { start: Column; values: readonly [number, number] } | undefined {
  const step = columns.find(isStep)
  const start =
    roled.find(({ role, column }) => role === 'wavelength' && column.repeat === 1)?.column ??
    columns.find(
      ({ name, repeat }) =>
        repeat === 1 &&
        /^(w_?start|wave_?start|start_?wave|crval_?1?|lambda_?0|wave_?0|w_?0|lambda_?min|wave_?min)$/i.test(
          name.trim(),
        ),
    )
  return step && start && { start, values: [read(start)[0], read(step)[0]] }
}

function rowAxis(
  container: Container,
  hdu: Hdu,
  given: {
    roled: readonly RoledColumn[]
    flux: Column
    row: number
    read: (column: Column) => Float64Array
    length: number
  },
): { readonly axis: Axis; readonly label?: WavelengthLabel } | { readonly refusal: Refusal } {
  const { roled, flux, read, length } = given
  const listed = roled.filter(
    ({ role, column }) => (role === 'wavelength' || role === 'log wavelength') && column.repeat !== 1,
  )
  const wave = listed.find(({ role }) => role === 'wavelength') ?? listed[0]
  if (wave) return labelled(listedOf(wave, read), wave.column)
  const even = numberNear(roled, hdu.columns, read)
  if (even) {
    const values = Float64Array.from({ length }, (_, i) => even.values[0] + i * even.values[1])
    const name = `start and step in columns ${even.start.name}`
    const answer = listedAxis(values, {
      name,
      unit: even.start.unit,
      role: 'wavelength',
      keyword: `TUNIT${even.start.index + 1}`,
    })
    return labelled(answer, even.start)
  }
  const cards = cellCards(container, hdu, flux, length)
  if (cards && 'axis' in cards) return labelled(cards, undefined)
  const companion = companionAxis(container, hdu, length, given.row)
  if (companion) return companion
  if (cards && cards.refusal.weight > 3) return cards
  const message = `table requires a wavelength column, a start with a step, or a companion with ${length} wavelengths, got none`
  return { refusal: { code: 'no-wavelength-axis', message, weight: 3 } }
}

function listedOf({ column, role }: RoledColumn, read: (column: Column) => Float64Array): AxisAnswer {
  return listedAxis(read(column), {
    name: `column ${column.name}`,
    unit: column.unit,
    role: role ?? 'wavelength',
    keyword: `TUNIT${column.index + 1}`,
  })
}

function labelled(
  answer: AxisAnswer,
  column: Column | undefined,
): { axis: Axis; label?: WavelengthLabel } | { refusal: Refusal } {
  if ('refusal' in answer || !column) return answer
  return { axis: answer.axis, label: { name: column.name, ucd: column.ucd, utype: column.utype } }
}

/** The axis of the array in a cell by its own cards (1CRVLn, 1CDLTn ...; FITS 4.0, table 22), or by the image's. */
function cellCards(container: Container, hdu: Hdu, flux: Column, length: number): AxisAnswer | undefined {
  const headers = headersOf(container.file, hdu)
  const n = flux.index + 1
  const names: Readonly<Record<string, string>> = {
    [`CTYPE1`]: `1CTYP${n}`,
    [`CUNIT1`]: `1CUNI${n}`,
    [`CRVAL1`]: `1CRVL${n}`,
    [`CDELT1`]: `1CDLT${n}`,
    [`CRPIX1`]: `1CRPX${n}`,
  }
  if (headers[0].get(`1CRVL${n}`)) {
    const translated = { cards: headers[0].cards, get: (keyword: string) => headers[0].get(names[keyword] ?? keyword) }
    return headerAxis([translated], 1, length)
  }
  const own = headers[0]
  return (own.get('CRVAL1') ?? own.get('COEFF0')) && headerAxis([own], 1, length)
}
