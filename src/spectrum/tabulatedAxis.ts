import type { Hdu } from '../fits/types.ts'
import { refuse, wavelengthFault } from './axis.ts'
import type { AxisAnswer } from './axis.ts'
import { cellNumbers } from './columnCells.ts'
import { cardNumber, cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import type { Container } from './container.ts'
import { linearPart } from './linearPart.ts'
import { SPECTRAL_CODES } from './spectralCode.ts'
import { spectralUnit, toAngstrom } from './unit.ts'

/**
 * The wavelengths of an axis of type `-TAB`: coordinates listed in a table extension, with or without an index
 * (FITS WCS Paper III, section 6); undefined for an axis of another type.
 */
export function tabulatedAxis(
  { container, hdu, headers }: { readonly container: Container; readonly hdu: Hdu; readonly headers: Headers },
  number: number,
  length: number,
): AxisAnswer | undefined {
  const type = /^([A-Z]{4})-TAB\s*$/.exec((cardText(headers, `CTYPE${number}`) ?? '').toUpperCase())
  if (!type) return undefined
  const code = SPECTRAL_CODES[type[1]]
  const key = `PS${number}_0`
  const name = cardText(headers, key)
  const version = cardNumber(headers, `PV${number}_1`) ?? 1
  const table = container.file.hdus.find(
    (other) => other !== hdu && other.columns.length > 0 && other.name === name && other.version === version,
  )
  if (!table)
    return refuse(
      'no-table',
      `${key} requires a table extension of that name and version, got ${name ?? 'none'}`,
      8,
      key,
    )
  const coordinateKey = `PS${number}_1`
  const wanted = cardText(headers, coordinateKey)
  const column = table.columns.find((found) => found.name === wanted)
  const values = column && cellNumbers(container.source, table, column, 0)
  const linear = linearPart(headers, number)
  if (!column || !values || values.length === 0)
    return refuse(
      'no-table',
      `${coordinateKey} requires a column of numbers in table ${name}, got ${wanted ?? 'none'}`,
      8,
      coordinateKey,
    )
  if (!linear)
    return refuse('no-wavelength-axis', `axis ${number} requires CRVAL${number} and CDELT${number}, got none`, 8)
  if (!code || code.needsRest)
    return refuse(
      'no-wavelength-axis',
      `CTYPE${number} requires a wavelength, frequency, energy or wavenumber table, got ${type[0]}`,
      7,
    )
  const indexName = cardText(headers, `PS${number}_2`)
  const indexColumn = table.columns.find((found) => indexName !== undefined && found.name === indexName)
  const index = indexColumn && cellNumbers(container.source, table, indexColumn, 0)
  const unit = spectralUnit(cardText(headers, `CUNIT${number}`) ?? column.unit)
  const wavelength = new Float64Array(length)
  for (let i = 0; i < length; i++) {
    const psi = linear.reference + linear.step * (i + 1 - linear.pixel)
    const value = listed(values, index ? position(index, psi) : psi)
    wavelength[i] = unit ? toAngstrom(value, unit) : toAngstrom(value, { quantity: 'wavelength', scale: 1e10 })
  }
  return (
    wavelengthFault(wavelength, `axis ${number}`) ?? {
      axis: {
        wavelength,
        medium: type[1] === 'AWAV' ? 'air' : 'vacuum',
        mediumFrom: `CTYPE${number} = ${type[0].trim()}`,
        words: `wavelengths listed in table ${name}`,
        notes: [],
      },
    }
  )
}

/** Where in the index (from 1, with fraction) a value lies; extended by the end steps by half a step at most. */
function position(index: Float64Array, value: number): number {
  if (index.length === 1) return value === index[0] ? 1 : NaN
  const rises = index[index.length - 1] >= index[0]
  let i = 0
  while (i < index.length - 2 && (rises ? value > index[i + 1] : value < index[i + 1])) i++
  const step = index[i + 1] - index[i]
  return step === 0 ? i + 1 : i + 1 + (value - index[i]) / step
}

/** The listed value at a position (from 1), linear between neighbours; NaN more than half a step beyond the ends. */
function listed(values: Float64Array, at: number): number {
  if (!(at >= 0.5 && at <= values.length + 0.5)) return NaN
  if (values.length === 1) return values[0]
  const i = Math.min(Math.max(Math.floor(at), 1), values.length - 1)
  return values[i - 1] + (values[i] - values[i - 1]) * (at - i)
}
