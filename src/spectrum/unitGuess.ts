import { figure } from './axis.ts'
import type { Note } from '../findings/types.ts'

/** The note that a unit was guessed, with the text the file gives instead and the values at the ends. */
export function guessNote(unit: string, text: string | undefined, ends: readonly number[]): Note {
  const why = text === undefined || text === '' ? 'no unit is given' : `the unit given, '${text}', is no spectral one`
  return {
    code: 'unit-guessed',
    text: `${why}; the values ${figure(ends[0])} to ${figure(ends[ends.length - 1])} are taken for ${unit}`,
  }
}
