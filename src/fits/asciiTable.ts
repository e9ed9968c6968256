import { FormatError } from '../errors.ts'
import { parseNumber } from './card.ts'
import { textOf, trimmedText } from './text.ts'
import type { Column, ColumnValues, Hdu } from './types.ts'

/**
 * Values of an ASCII table's fields (FITS 4.0, section 7.2): text, or numbers scaled by TSCALn and TZEROn. Blank
 * fields and TNULLn are NaN. Exponents are E or D; blanks within a field are left out as in Fortran. A number without
 * a decimal point is taken as written, whatever the number of decimals in TFORMn: implied points are deprecated.
 *
 * @param bytes  rows x width characters
 * @throws FormatError 'number' when a field is no number, with its row
 */
export function asciiValues(bytes: Uint8Array, hdu: Hdu, column: Column, rows: { firstRow: number }): ColumnValues {
  const { width, letter, scale, zero } = column
  const text = textOf(bytes)
  const count = width === 0 ? 0 : Math.floor(bytes.length / width)
  if (letter === 'A') {
    const values = Array.from({ length: count }, (_, i) => trimmedText(text.slice(i * width, (i + 1) * width)))
    return { kind: 'text', repeat: 1, values }
  }
  const values = new Float64Array(count)
  const empty = typeof column.nullValue === 'string' ? column.nullValue.trim() : undefined
  for (let i = 0; i < count; i++) {
    const field = text
      .slice(i * width, (i + 1) * width)
      .replaceAll('\0', ' ')
      .trim()
    if (field === '' || field === empty) {
      values[i] = NaN
      continue
    }
    const number = parseNumber(fortran(field))
    if (number === undefined) {
      const row = rows.firstRow + i
      const message = `field of row ${row} requires a number, got "${trimmedText(field)}"`
      throw new FormatError('number', message, { hdu: hdu.index, row, keyword: `TFORM${column.index + 1}` })
    }
    values[i] = zero + scale * Number(number)
  }
  return { kind: 'numbers', repeat: 1, values }
}

/** Without blanks inside, and with the exponent letter that Fortran lets a writer leave out (1.5-03). */
function fortran(field: string): string {
  const joined = field.replaceAll(' ', '')
  return joined.replace(/^([+-]?[\d.]+)([+-]\d+)$/, '$1E$2')
}
