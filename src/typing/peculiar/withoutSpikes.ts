import type { Continuum } from '../../continuum/types.ts'
import type { Spectrum } from '../../spectrum/types.ts'

/** A sample so many σ and such a share above its surroundings is a spike where its neighbours have little of it. */
const SIGMA = 8
const SHARE = 0.03
/** The next sample of a line, undersampled though it be, has more of the peak than this; a cosmic ray's less. */
const BESIDE = 0.15

/** The spectrum with samples that only a cosmic ray can make taken out of use. */
export function withoutSpikes(spectrum: Spectrum, { noise }: Continuum): Spectrum {
  const { flux, usable } = spectrum
  let out: Uint8Array | undefined
  for (let i = 3; i + 3 < flux.length; i++) {
    const beside = Math.max(flux[i - 1], flux[i + 1])
    if (!(flux[i] > beside + SIGMA * noise[i])) continue
    const base = middleOfFour(flux[i - 3], flux[i - 2], flux[i + 2], flux[i + 3])
    const peak = flux[i] - base
    if (peak < SHARE * base || beside - base > BESIDE * peak) continue
    out ??= usable.slice()
    out[i] = 0
  }
  return out ? { ...spectrum, usable: out } : spectrum
}

/** Median of four. */
function middleOfFour(a: number, b: number, c: number, d: number): number {
  return 0.5 * (a + b + c + d - Math.min(a, b, c, d) - Math.max(a, b, c, d))
}
