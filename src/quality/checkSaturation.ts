import { QUALITY_RULES } from '../findings/quality.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import type { Spectrum } from '../spectrum/types.ts'
import { figure, percent } from './figures.ts'
import type { Limits } from './samples.ts'

/** Says whether counts reach the detector's limit, or the brightest samples are cut off at one value. */
export function checkSaturation(spectrum: Spectrum, limit: Limits): readonly Finding[] {
  const { flux, usable, wavelength, facts, fluxKind } = spectrum
  let top = -Infinity
  for (let i = 0; i < flux.length; i++) if (usable[i] && flux[i] > top) top = flux[i]
  if (!(top > 0)) return []
  const found: Finding[] = []
  if (fluxKind === 'counts' && facts.saturation !== undefined) {
    const from = limit('saturatedShare') * facts.saturation
    let count = 0
    for (let i = 0; i < flux.length; i++) if (usable[i] && flux[i] >= from) count++
    if (count > 0) {
      const level = count / flux.length > limit('clippedFault') ? 'fault' : 'doubt'
      const text = `${count} samples reach ${figure(top)} counts, the detector saturates at ${figure(facts.saturation)}`
      found.push(finding(QUALITY_RULES, 'saturated-spectrum', text, { value: top, limit: from, level }))
    }
  }
  // a rectified spectrum may be cut at its own continuum
  if (fluxKind === 'normalised' && Math.abs(top - 1) < 1e-6) return found
  const { clipped, longest, where } = equalTops(spectrum, top, limit('saturatedRun'))
  if (clipped > 0) {
    const share = clipped / flux.length
    const level = share > limit('clippedFault') ? 'fault' : 'doubt'
    const text = `${clipped} samples (${percent(share)}) are cut off at one value ${figure(flux[where], 5)}, up to ${longest} in a row, first at ${wavelength[where].toFixed(1)} Å`
    found.push(finding(QUALITY_RULES, 'flat-topped', text, { value: longest, limit: limit('saturatedRun'), level }))
  }
  return found
}

/** Samples in runs of at least `run` equal values within the upper third of the counts. */
function equalTops(
  { flux, usable }: Spectrum,
  top: number,
  run: number,
): { readonly clipped: number; readonly longest: number; readonly where: number } {
  let clipped = 0
  let longest = 0
  let where = 0
  for (let i = 0; i < flux.length;) {
    let j = i + 1
    while (j < flux.length && flux[j] === flux[i]) j++
    if (j - i >= run && usable[i] && flux[i] >= 0.7 * top) {
      if (clipped === 0) where = i
      clipped += j - i
      longest = Math.max(longest, j - i)
    }
    i = j
  }
  return { clipped, longest, where }
}
