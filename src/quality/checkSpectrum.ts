import { noteFinding } from '../findings/reading.ts'
import type { Finding } from '../findings/types.ts'
import type { Thresholds } from '../tables/types.ts'
import { checkCoverage } from './checkCoverage.ts'
import { checkJoins } from './checkJoins.ts'
import { checkSaturation } from './checkSaturation.ts'
import { checkScale } from './checkScale.ts'
import { checkSky } from './checkSky.ts'
import { checkSpikes } from './checkSpikes.ts'
import { checkStar } from './checkStar.ts'
import { gravestFirst, qualityOf } from './qualityOf.ts'
import { limitsOf, samplesOf } from './samples.ts'
import type { SpectrumInput } from './samples.ts'
import { bestSignalToNoise, checkSignal, signalToNoise } from './signalToNoise.ts'
import type { Quality, SignalToNoise } from './types.ts'

/** What is wrong with a spectrum, its signal-to-noise per Å, and the quality that follows from the worst finding. */
export interface SpectrumCheck {
  /** The gravest first; the reader's notes at the end. */
  readonly findings: readonly Finding[]
  readonly snr: SignalToNoise
  readonly quality: Quality
}

/**
 * Every check of one spectrum: signal-to-noise, coverage, saturation, dead and hit samples, sky and telluric residues,
 * joins, ringing, wavelength scale, resolution, emission, missing header facts. Notes of the reader become findings.
 */
export function checkSpectrum(input: SpectrumInput, thresholds: Thresholds): SpectrumCheck {
  const { spectrum, continuum } = input
  const limit = limitsOf(thresholds)
  const samples = samplesOf(spectrum, continuum)
  const snr = signalToNoise(spectrum, continuum)
  const findings = gravestFirst([
    ...checkSignal(bestSignalToNoise(spectrum, continuum, snr), limit),
    ...checkCoverage(spectrum, samples, limit),
    ...checkSaturation(spectrum, limit),
    ...checkSpikes(input, samples, limit),
    ...checkSky(input, samples, limit),
    ...checkJoins(input, samples, limit),
    ...checkScale(input, samples, limit),
    ...checkStar(input, limit),
    ...spectrum.notes.map(noteFinding),
  ])
  return { findings, snr, quality: qualityOf(findings) }
}
