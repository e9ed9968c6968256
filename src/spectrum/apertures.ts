import type { Header } from '../fits/types.ts'
import type { AxisAnswer } from './axis.ts'
import { refuse, wavelengthFault } from './axis.ts'
import { cardNumber, cardText } from './cards.ts'
import { parseSolution, solutionWavelength } from './dispersion.ts'
import type { ApertureSolution } from './dispersion.ts'
import { spectralUnit } from './unit.ts'
import { attributeText, attributes } from './watCards.ts'

/** True for an image whose rows have dispersion solutions of their own (system=multispec). */
export function isMultispec(header: Header): boolean {
  return (
    attributes(attributeText(header, 0)).get('system') === 'multispec' ||
    /^multispe/i.test(cardText([header], 'CTYPE1') ?? '')
  )
}

/** The solutions of a multi-spectrum image by row, from 0; rows whose text cannot be read are left out. */
export function apertureSolutions(header: Header): ReadonlyMap<number, ApertureSolution> {
  const found = new Map<number, ApertureSolution>()
  for (const [key, text] of attributes(attributeText(header, 2))) {
    const row = /^spec(\d+)$/.exec(key)
    const solution = row && parseSolution(text)
    if (row && solution) found.set(Number(row[1]) - 1, solution)
  }
  return found
}

/**
 * The wavelengths of one row of a multi-spectrum image by its own solution.
 *
 * @param length  samples in the row; the solution may say that fewer are good
 */
export function apertureAxis(
  header: Header,
  row: number,
  solution: ApertureSolution | undefined,
  length: number,
): AxisAnswer {
  const key = `WAT2_001`
  if (!solution)
    return refuse('no-dispersion', `${key} requires a solution spec${row + 1} that can be read, got none`, 6, key)
  if (solution.kind === 'none')
    return refuse('no-dispersion', `spec${row + 1} requires a dispersion solution, got type -1 (none)`, 5, key)
  const samples =
    Number.isInteger(solution.samples) && solution.samples > 0 ? Math.min(solution.samples, length) : length
  const unitText = attributes(attributeText(header, 1)).get('units') ?? ''
  const unit = spectralUnit(unitText)
  const scale = unit?.quantity === 'wavelength' ? unit.scale : 1
  // Solutions are functions of the physical pixel: a section cut out later keeps them and moves LTV.
  const shift = cardNumber([header], 'LTV1') ?? 0
  const factor = cardNumber([header], 'LTM1_1') || 1
  const wavelength = new Float64Array(samples)
  for (let i = 0; i < samples; i++) wavelength[i] = scale * solutionWavelength(solution, (i + 1 - shift) / factor)
  const fault = wavelengthFault(wavelength, `spec${row + 1}`)
  if (fault) return fault
  const kinds = [...new Set(solution.functions.map((term) => term.kind))]
  const words =
    solution.kind === 'function' ? `${kinds.join(' + ')} dispersion function` : `${solution.kind} dispersion`
  const notes = []
  if (samples < length)
    notes.push({ code: 'cells-cut', text: `${samples} of ${length} samples are good, by the solution of row ${row}` })
  if (solution.redshift !== 0)
    notes.push({
      code: 'redshift-removed',
      text: `wavelengths are divided by 1 + z with z = ${solution.redshift}, by the solution of row ${row}`,
    })
  return { axis: { wavelength, words: `${words} of each row`, notes } }
}
