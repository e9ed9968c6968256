import { figure, refuse } from './axis.ts'
import type { AxisAnswer } from './axis.ts'
import { cardNumber, cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import type { AxisInput, LinearPart } from './linearPart.ts'
import { guessedWavelengthUnit, spectralUnit, toAngstrom } from './unit.ts'
import type { SpectralUnit } from './unit.ts'
import { guessNote } from './unitGuess.ts'

/** The wavelengths of an axis that no standard code describes: linear or logarithmic, in a unit given or guessed. */
export function plainAxis(headers: Headers, input: AxisInput & { readonly type: string }): AxisAnswer {
  const { number, length, linear, type, wat } = input
  const notes = [...linear.notes]
  const values = new Float64Array(length)
  for (let i = 0; i < length; i++) values[i] = linear.reference + linear.step * (i + 1 - linear.pixel)
  const label = `${type} ${wat.get('label') ?? ''}`
  const flag = cardNumber(headers, 'DC-FLAG')
  const isNatural = /(^|[^a-z])ln\b/i.test(type)
  const isLogWord = /log/i.test(type) && !/catalog/i.test(type)
  const isCoefficients = cardNumber(headers, 'COEFF0') === linear.reference && linear.reference < 6
  const isLog = isNatural || isLogWord || flag === 1 || isCoefficients
  const unitTexts = [cardText(headers, `CUNIT${number}`), wat.get('units'), /[[(]([^)\]]+)[\])]/.exec(type)?.[1]]
  let unit: SpectralUnit | undefined
  let unknown: string | undefined
  for (const text of unitTexts) {
    if (text === undefined) continue
    const found = spectralUnit(text)
    if (found && !unit) unit = found
    if (!found && !/^(deg|degrees?|pixels?|pix|arcsec|none|linear|unitless|wavelength|lambda|wave|)$/i.test(text))
      unknown ??= text
  }
  const isWavenumber = /wave ?num/i.test(label) || /kayser/i.test(wat.get('units') ?? '')
  if (isWavenumber && (!unit || unit.quantity === 'wavelength')) {
    const given = wat.get('units') ?? cardText(headers, `CUNIT${number}`) ?? ''
    unit = { quantity: 'wavenumber', scale: 1 }
    if (!spectralUnit(given))
      notes.push({ code: 'unit-guessed', text: `a wavenumber axis in '${given}' is taken for cm-1 by its values` })
    unknown = undefined
  }
  if (unit?.quantity === 'velocity')
    return refuse('no-rest-wavelength', `axis ${number} requires a rest wavelength for velocities, got none`, 7)
  if (!unit && unknown !== undefined)
    return refuse('unit-unknown', `CUNIT${number} requires a spectral unit, got '${unknown}'`, 8, `CUNIT${number}`)
  const ends = [values[0], values[length - 1]]
  // log10 of 1000 to 100000 Å lies between 3 and 5: no optical axis in Å does, and none of this length in µm.
  const isAngstrom = !unit || (unit.quantity === 'wavelength' && unit.scale === 1)
  const looksLog = isAngstrom && Math.min(...ends) >= 3 && Math.max(...ends) <= 5
  if (looksLog && !isLog && unit?.log === undefined)
    notes.push({
      code: 'log-guessed',
      text: `the values ${figure(ends[0])} to ${figure(ends[1])} are taken for log10 of wavelengths in Angstrom`,
    })
  const isSpectralLog = isLog || unit?.log !== undefined || looksLog
  const linearValues = isSpectralLog
    ? ends.map((value) => (isNatural || unit?.log === 'ln' ? Math.exp(value) : 10 ** value))
    : ends
  const low = Math.min(...linearValues)
  const high = Math.max(...linearValues)
  if (!unit) {
    if (isPixelCount(values, linear) && !isSpectralLog)
      return refuse('pixel-axis', `axis ${number} requires a wavelength solution, got pixels ${low} to ${high}`, 4)
    const guess = guessedWavelengthUnit(low, high)
    if (guess === undefined) {
      const rule = `axis ${number} requires a wavelength unit, or values that can be wavelengths in one`
      return refuse('unit-unknown', `${rule}, got no unit and ${figure(low)} to ${figure(high)}`, 3)
    }
    unit = spectralUnit(guess) as SpectralUnit
    notes.push(guessNote(guess, cardText(headers, `CUNIT${number}`), linearValues))
  }
  const log = isSpectralLog ? (isNatural ? 'ln' : (unit.log ?? 'log10')) : undefined
  const wavelength = values.map((value) => toAngstrom(value, { ...unit, log } as SpectralUnit))
  const isInverse = unit.quantity !== 'wavelength'
  const words = log ? `${log === 'ln' ? 'natural-log' : 'log10'} ${unit.quantity} axis` : `linear ${unit.quantity} axis`
  return {
    axis: {
      wavelength,
      ...(isInverse ? { medium: 'vacuum', mediumFrom: `axis of ${unit.quantity}` } : {}),
      words,
      notes,
    },
  }
}

/** True for values that only count samples: 1, 2, 3 ... or 0, 1, 2 ... */
function isPixelCount(values: Float64Array, { step }: LinearPart): boolean {
  return Math.abs(step) === 1 && (values[0] === 0 || values[0] === 1)
}
