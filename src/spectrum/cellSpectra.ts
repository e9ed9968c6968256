import { FormatError } from '../errors.ts'
import type { Column, Hdu } from '../fits/types.ts'
import { refusalOf } from './axis.ts'
import type { Refusal } from './axis.ts'
import { cellAxis } from './cellAxis.ts'
import { cellNumbers, cellText } from './columnCells.ts'
import { isCount, isPartName } from './columnRoles.ts'
import type { RoledColumn } from './columnRoles.ts'
import { headersOf, limitNotes, placeWords, room } from './container.ts'
import type { Container, HduAnswer } from './container.ts'
import { fluxUnitCard } from './fluxUnit.ts'
import type { FoundSpectrum } from './found.ts'
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
  const found = cellAxis(container, hdu, { roled, flux, row, read, length: values.length })
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
