import type { Column, Hdu } from '../fits/types.ts'
import type { Axis, AxisAnswer, Refusal } from './axis.ts'
import { listedAxis } from './columnAxis.ts'
import { isStep } from './columnRoles.ts'
import type { RoledColumn } from './columnRoles.ts'
import { companionAxis } from './companion.ts'
import { headersOf } from './container.ts'
import type { Container } from './container.ts'
import { headerAxis } from './headerAxis.ts'
import type { WavelengthLabel } from './medium.ts'

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

/** The wavelengths of one row whose flux is an array: an array beside it, start and step, the cell's own cards, or a companion. */
export function cellAxis(
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
