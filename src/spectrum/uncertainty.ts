import { median } from '../numeric/median.ts'
import type { Note } from '../findings/types.ts'
import type { UncertaintyKind } from './types.ts'

/** One σ from what the file gives, in the flux unit; NaN where the file says that nothing is known. */
export function sigmaOf(values: Float64Array, kind: UncertaintyKind, flux: Float64Array): Float64Array {
  const sigma = new Float64Array(values.length)
  for (let i = 0; i < values.length; i++) sigma[i] = oneSigma(values[i], kind, flux[i])
  return sigma
}

function oneSigma(value: number, kind: UncertaintyKind, flux: number): number {
  // Zero and negative uncertainties are the custom for "no measurement"; an inverse variance of 0 says so by itself.
  if (!(value > 0)) return NaN
  if (kind === 'sigma') return value
  if (kind === 'variance') return Math.sqrt(value)
  if (kind === 'inverse variance') return 1 / Math.sqrt(value)
  return kind === 'relative' ? value * Math.abs(flux) : NaN
}

/** A signal-to-noise ratio a sample above this is beyond any ground-based spectrum: 1e8 counts in one sample. */
const ABSURD_SNR = 1e4

/**
 * 'relative' instead of 'sigma' where values taken as σ would mean an absurd signal-to-noise ratio (above 10,000 a
 * sample) while as fractions of the flux (all below 1) they are sensible; with the note that says so.
 */
export function checkedKind(
  values: Float64Array,
  kind: UncertaintyKind,
  flux: Float64Array,
): { readonly kind: UncertaintyKind; readonly notes: readonly Note[] } {
  if (kind !== 'sigma') return { kind, notes: [] }
  const ratios: number[] = []
  const positive: number[] = []
  for (let i = 0; i < values.length; i++) {
    if (values[i] > 0 && Number.isFinite(flux[i])) {
      positive.push(values[i])
      ratios.push(Math.abs(flux[i]) / values[i])
    }
  }
  const typical = median(positive)
  const snr = median(ratios)
  if (!(snr > ABSURD_SNR) || !(typical > 1e-5 && typical < 1)) return { kind, notes: [] }
  const text = `uncertainties of ${typical.toPrecision(3)} would mean a signal-to-noise ratio of ${snr.toPrecision(3)} a sample; they are taken for fractions of the flux`
  return { kind: 'relative', notes: [{ code: 'uncertainty-guessed', text }] }
}
