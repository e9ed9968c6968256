import { firstNotBelow } from '../numeric/firstNotBelow.ts'
import { median } from '../numeric/median.ts'
import type { Spectrum } from './types.ts'

/** Number of pieces into which an overlap is divided to compare two signals. */
const PIECES = 16

/**
 * The wavelength [Å, air] in the overlap of two spectra at which to change from the left to the right one: where the
 * signal (over its error where both have one) of the right begins to be the larger; the middle where it never changes.
 */
export function cutWavelength(left: Spectrum, right: Spectrum): number {
  const low = right.wavelength[0]
  const high = left.wavelength[left.wavelength.length - 1]
  const step = (high - low) / PIECES
  const isWeighed = left.sigma !== undefined && right.sigma !== undefined
  let best = (low + high) / 2
  let least = Infinity
  const gains: number[] = []
  for (let i = 0; i < PIECES; i++) {
    const range = [low + i * step, low + (i + 1) * step] as const
    const gain = signal(left, range, isWeighed) - signal(right, range, isWeighed)
    gains.push(Number.isFinite(gain) ? gain : 0)
  }
  // The cut after piece i keeps the left's signal up to i and the right's from there: its sum of losses is least.
  let loss = gains.reduce((sum, gain) => sum + Math.max(gain, 0), 0)
  const whole = gains.every((gain) => gain >= 0) || gains.every((gain) => gain <= 0)
  if (whole && gains.every((gain) => gain === gains[0])) return best
  for (let i = 0; i <= PIECES; i++) {
    if (loss < least) {
      least = loss
      best = low + i * step
    }
    if (i < PIECES) loss -= gains[i]
  }
  return best
}

function signal(spectrum: Spectrum, [low, high]: readonly [number, number], isWeighed: boolean): number {
  const values: number[] = []
  const { wavelength, flux, sigma, usable } = spectrum
  for (let i = firstNotBelow(wavelength, low); i < wavelength.length && wavelength[i] <= high; i++)
    if (usable[i]) values.push(isWeighed && sigma ? flux[i] / sigma[i] : flux[i])
  const middle = median(values)
  return Number.isFinite(middle) ? middle : 0
}

/** Level of the right spectrum over that of the left in their overlap; undefined without usable samples of both. */
export function levelRatio(left: Spectrum, right: Spectrum): number | undefined {
  const low = right.wavelength[0]
  const high = left.wavelength[left.wavelength.length - 1]
  const [a, b] = [left, right].map((spectrum) => signal(spectrum, [low, high], false))
  return a > 0 && b > 0 ? b / a : undefined
}
