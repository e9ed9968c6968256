import { median } from '../numeric/median.ts'
import type { Spectrum } from '../spectrum/types.ts'

/** Å: where throughput is compared, clear of the bands of the air and of strong lines of most stars. */
const VISUAL = [5400, 5600] as const

/**
 * Median counts per second and sample of a spectrum in counts, about 5500 Å or, where that is not covered, in its
 * middle third; undefined without counts or an exposure time.
 */
export function countsPerSecond(spectrum: Spectrum): number | undefined {
  const { wavelength, flux, usable, fluxKind, facts } = spectrum
  if (fluxKind !== 'counts' || !facts.exposure || facts.exposure <= 0) return undefined
  const n = wavelength.length
  const third = [wavelength[Math.floor(n / 3)], wavelength[Math.floor((2 * n) / 3)]] as const
  const [from, to] = wavelength[0] < VISUAL[0] && wavelength[n - 1] > VISUAL[1] ? VISUAL : third
  const values = flux.filter((_, i) => usable[i] !== 0 && wavelength[i] >= from && wavelength[i] <= to)
  const level = median(values)
  return Number.isFinite(level) ? level / facts.exposure : undefined
}
