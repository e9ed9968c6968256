import { encodeFits } from '../../src/fits/write.ts'
import type { FitsHduInput } from '../../src/fits/write.ts'
import type { FitsColumnInput } from '../../src/fits/writeTable.ts'
import type { FitsCardInput } from '../../src/fits/writeCard.ts'
import type { ReadResult } from '../../src/spectrum/readSpectra.ts'
import { readSpectra } from '../../src/spectrum/readSpectra.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'
import { openBytes } from '../fits/sharedFile.ts'

/** Cards of plain values. */
export function cards(values: Readonly<Record<string, string | number | boolean>>): readonly FitsCardInput[] {
  return Object.entries(values).map(([keyword, value]) => ({ keyword, value }))
}

/** Values 1, 2, 3 ... of an invented flux. */
export function ramp(count: number, first = 1): Float64Array {
  return Float64Array.from({ length: count }, (_, i) => first + i)
}

/** An image HDU of double-precision values with cards; by default one row. */
export function image(
  values: Float64Array,
  values2: Readonly<Record<string, string | number | boolean>>,
  { name, dimensions = [values.length] }: { name?: string; dimensions?: readonly number[] } = {},
): FitsHduInput {
  return { kind: 'image', bitpix: -64, dimensions, values, cards: cards(values2), ...(name ? { name } : {}) }
}

/** A table HDU. */
export function table(
  rows: number,
  columns: readonly FitsColumnInput[],
  { name, cards: given = {} }: { name?: string; cards?: Readonly<Record<string, string | number | boolean>> } = {},
): FitsHduInput {
  return { kind: 'table', rows, columns, cards: cards(given), ...(name ? { name } : {}) }
}

/** What the reader makes of a file of these HDUs. */
export function readMade(hdus: readonly FitsHduInput[], companion?: readonly FitsHduInput[]): ReadResult {
  const { file, source } = openBytes(encodeFits(hdus))
  return readSpectra(file, source, {
    keywords: KEYWORDS,
    fileName: 'made.fits',
    ...(companion ? { companion: openBytes(encodeFits(companion)) } : {}),
  })
}
