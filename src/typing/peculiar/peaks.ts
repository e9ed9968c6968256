import type { Continuum } from '../../continuum/types.ts'
import type { Spectrum } from '../../spectrum/types.ts'

/** A peak this many σ over the continuum, and by this share of it, is looked at as an emission line. */
const SIGMA = 6
const SHARE = 0.15
const MOST = 12

/** Wavelengths [Å, observed] of the strongest emission peaks, strongest first; at most twelve. */
export function emissionPeaks({ wavelength, flux, usable }: Spectrum, { level, noise }: Continuum): number[] {
  const peaks: { at: number; light: number }[] = []
  const n = wavelength.length
  for (let i = 1; i + 1 < n; i++) {
    if (!usable[i] || !(flux[i] >= flux[i - 1] && flux[i] > flux[i + 1])) continue
    const over = flux[i] - level[i]
    if (!(over > SIGMA * noise[i] && over > SHARE * level[i])) continue
    let light = 0
    let moment = 0
    for (let j = i; j >= 0 && flux[j] - level[j] > 0.3 * over; j--) {
      light += flux[j] - level[j]
      moment += (flux[j] - level[j]) * wavelength[j]
    }
    for (let j = i + 1; j < n && flux[j] - level[j] > 0.3 * over; j++) {
      light += flux[j] - level[j]
      moment += (flux[j] - level[j]) * wavelength[j]
    }
    peaks.push({ at: moment / light, light: light / Math.max(level[i], noise[i]) })
  }
  return peaks
    .sort((a, b) => b.light - a.light)
    .slice(0, MOST)
    .map(({ at }) => at)
}
