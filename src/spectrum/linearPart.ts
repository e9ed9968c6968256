import { figure } from './axis.ts'
import { cardNumber } from './cards.ts'
import type { Headers } from './cards.ts'
import type { Note } from '../findings/types.ts'

/** The linear part of an axis: value = reference + step × (pixel − reference pixel). */
export interface LinearPart {
  readonly reference: number
  readonly step: number
  readonly pixel: number
  readonly notes: readonly Note[]
}

/**
 * The linear part of axis `number` from CRVAL, CRPIX and CDi_i, or CDELT × PC; undefined without CRVAL and step.
 * A missing CRPIX counts as 1 where the file follows no written standard, noted.
 */
export function linearPart(headers: Headers, number: number): LinearPart | undefined {
  const notes: Note[] = []
  const reference = cardNumber(headers, `CRVAL${number}`)
  const cd = cardNumber(headers, `CD${number}_${number}`)
  const delta = cardNumber(headers, `CDELT${number}`)
  const pc = cardNumber(headers, `PC${number}_${number}`) ?? 1
  const step = cd ?? (delta === undefined ? undefined : delta * pc)
  if (reference === undefined || step === undefined) return undefined
  if (cd !== undefined && delta !== undefined && delta * pc !== cd && Math.abs(delta * pc - cd) > 1e-6 * Math.abs(cd))
    notes.push({
      code: 'step-disagrees',
      text: `CD${number}_${number} is ${figure(cd)} and CDELT${number} is ${figure(delta)}; the first is used`,
    })
  const pixel = cardNumber(headers, `CRPIX${number}`)
  if (pixel === undefined)
    notes.push({
      code: 'no-reference-pixel',
      text: `CRPIX${number} is absent; the first sample is taken for reference`,
    })
  return { reference, step, pixel: pixel ?? 1, notes }
}

/** The linear part by COEFF0 and COEFF1: log10 of the first wavelength and step (surveys that give no CRVAL). */
export function coefficientPart(headers: Headers): LinearPart | undefined {
  const reference = cardNumber(headers, 'COEFF0')
  const step = cardNumber(headers, 'COEFF1')
  return reference === undefined || step === undefined ? undefined : { reference, step, pixel: 1, notes: [] }
}

/** An axis whose linear part is known, to be turned into wavelengths. */
export interface AxisInput {
  readonly number: number
  readonly length: number
  readonly linear: LinearPart
  readonly wat: ReadonlyMap<string, string>
}
