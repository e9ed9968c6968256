import { NIGHT_RULES } from '../findings/night.ts'
import type { NightCode } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import { median } from '../numeric/median.ts'
import { figure } from '../quality/figures.ts'
import type { FrameStatistics } from '../quality/types.ts'
import type { ThresholdName, Thresholds } from '../tables/types.ts'
import { isOnSky } from './exposures.ts'
import type { Exposure, NightSpectrum } from './exposures.ts'
import { findJumps } from './jumps.ts'
import type { DriftPoint } from './jumps.ts'
import { findSlowDrift } from './slowDrift.ts'
import type { Drift } from './types.ts'

/** How a quantity is watched: which jump is said, by which limit, and whether the limit is a share of the level. */
interface Watch {
  readonly unit: string
  readonly code?: NightCode
  readonly limit?: ThresholdName
  readonly isRelative?: boolean
}

const WATCHES: Readonly<Record<Drift['quantity'], Watch>> = {
  'wavelength zero point': { unit: 'km/s', code: 'zero-point-jump', limit: 'zeroPointJump' },
  resolution: { unit: 'Å', code: 'resolution-jump', limit: 'resolutionJump', isRelative: true },
  throughput: { unit: '1', code: 'throughput-jump', limit: 'throughputJump', isRelative: true },
  'bias level': { unit: 'counts', code: 'bias-level-jump', limit: 'biasJump' },
  'signal-to-noise': { unit: 'per Å' },
  airmass: { unit: '1' },
  seeing: { unit: 'pixels', code: 'seeing-jump', limit: 'seeingJump', isRelative: true },
}

/** A quantity of one file or spectrum at a time. */
interface Reading extends DriftPoint {
  readonly quantity: Drift['quantity']
  readonly setup: string
}

/** A raw frame with its statistics. */
export interface FrameReading {
  readonly exposure: Exposure
  readonly statistics?: FrameStatistics
}

/**
 * Quantities through the night, each set-up on its own and in order of time, with a finding for each jump. Throughput
 * is relative: counts per second of a target over the median of that target, for targets observed twice or more.
 */
export function driftsOf(
  spectra: readonly NightSpectrum[],
  frames: readonly FrameReading[],
  targetKeys: readonly string[],
  thresholds: Thresholds,
): readonly Drift[] {
  const readings = [
    ...spectra.flatMap(spectrumReadings),
    ...throughputs(spectra, targetKeys),
    ...frames.flatMap(frameReadings),
  ]
  const groups = new Map<string, Reading[]>()
  for (const reading of readings) {
    const key = `${reading.quantity}|${reading.setup}`
    const list = groups.get(key)
    if (list) list.push(reading)
    else groups.set(key, [reading])
  }
  const order = Object.keys(WATCHES)
  return [...groups.values()]
    .map((group) => driftOf(group, thresholds))
    .sort(
      (a, b) =>
        order.indexOf(a.quantity) - order.indexOf(b.quantity) || (a.setup < b.setup ? -1 : a.setup > b.setup ? 1 : 0),
    )
}

function spectrumReadings({ spectrum }: NightSpectrum): readonly Reading[] {
  const { facts, setup, zeroPoint, resolution, snr } = spectrum
  const mjd = facts.mjdMid ?? facts.mjdStart
  if (mjd === undefined) return []
  const label = facts.object ?? ''
  const base = { setup, mjd, label }
  const readings: Reading[] = []
  if (zeroPoint)
    readings.push({ ...base, quantity: 'wavelength zero point', value: zeroPoint.offset, error: zeroPoint.error })
  if (resolution && !resolution.isUpperLimit && resolution.how.endsWith('lines'))
    readings.push({
      ...base,
      quantity: 'resolution',
      value: resolution.fwhm,
      ...(resolution.error === undefined ? {} : { error: resolution.error }),
    })
  const signal = snr.visual ?? snr.blue ?? snr.red
  if (signal !== undefined) readings.push({ ...base, quantity: 'signal-to-noise', value: signal })
  if (facts.airmass !== undefined) readings.push({ ...base, quantity: 'airmass', value: facts.airmass })
  return readings
}

function throughputs(spectra: readonly NightSpectrum[], keys: readonly string[]): readonly Reading[] {
  const groups = new Map<string, NightSpectrum[]>()
  for (const [i, one] of spectra.entries()) {
    const rate = one.spectrum.countsPerSecond
    const mjd = one.spectrum.facts.mjdMid ?? one.spectrum.facts.mjdStart
    if (rate === undefined || !(rate > 0) || mjd === undefined || keys[i] === '') continue
    const key = `${keys[i]}|${one.spectrum.setup}`
    groups.set(key, [...(groups.get(key) ?? []), one])
  }
  return [...groups.values()]
    .filter((group) => group.length > 1)
    .flatMap((group) => {
      const level = median(group.map(({ spectrum }) => spectrum.countsPerSecond ?? NaN))
      return group.map(({ spectrum }): Reading => ({
        quantity: 'throughput',
        setup: spectrum.setup,
        mjd: spectrum.facts.mjdMid ?? spectrum.facts.mjdStart ?? NaN,
        value: (spectrum.countsPerSecond ?? NaN) / level,
        label: spectrum.facts.object ?? '',
      }))
    })
}

function frameReadings({ exposure, statistics }: FrameReading): readonly Reading[] {
  const { mjd, setup, kind, facts, file } = exposure
  if (mjd === undefined || !statistics) return []
  const label = facts.object ?? file
  if (kind === 'bias') return [{ quantity: 'bias level', setup, mjd, value: statistics.median, label }]
  if (isOnSky(kind) && statistics.trace)
    return [{ quantity: 'seeing', setup, mjd, value: statistics.trace.fwhm, label }]
  return []
}

function driftOf(readings: readonly Reading[], thresholds: Thresholds): Drift {
  const [{ quantity, setup }] = readings
  const watch = WATCHES[quantity]
  const points = readings
    .map(({ mjd, value, error, label }) => ({ mjd, value, label, ...(error === undefined ? {} : { error }) }))
    .sort((a, b) => a.mjd - b.mjd)
  const findings = watch.code && watch.limit ? jumpFindings(points, setup, quantity, watch, thresholds) : []
  return { quantity, unit: watch.unit, setup, points, findings }
}

function jumpFindings(
  points: readonly DriftPoint[],
  setup: string,
  quantity: Drift['quantity'],
  { unit, code = 'zero-point-jump', limit = 'zeroPointJump', isRelative = false }: Watch,
  thresholds: Thresholds,
): Drift['findings'] {
  const allowed = thresholds[limit].value
  // relative quantities in logarithms, so that a loss and a gain by one factor are alike
  const watched = isRelative
    ? points
        .filter(({ value }) => value > 0)
        .map(({ value, error, ...rest }) => ({
          ...rest,
          value: Math.log(value),
          ...(error === undefined ? {} : { error: error / value }),
        }))
    : points
  const smallest = isRelative ? Math.log(1 + allowed) : allowed
  const jumps = findJumps(watched, smallest, thresholds.jumpSigma.value)
  if (jumps.length === 0) return slowFindings(watched, setup, quantity, { unit, smallest, isRelative, thresholds })
  return jumps.map(({ at, before, after, size }) => {
    const [from, to] = isRelative ? [Math.exp(before), Math.exp(after)] : [before, after]
    const shown = unit === '1' ? '' : ` ${unit}`
    const between = `between ${timeOf(watched[at - 1].mjd)} (${watched[at - 1].label}) and ${timeOf(watched[at].mjd)} (${watched[at].label}) UTC`
    const text = `The ${quantity} of set-up ${setup} jumps from ${fromTo(from, to)}${shown} ${between}`
    return finding(NIGHT_RULES, code, text, { value: isRelative ? Math.exp(Math.abs(size)) - 1 : size, limit: allowed })
  })
}

interface SlowWatch {
  readonly unit: string
  readonly smallest: number
  readonly isRelative: boolean
  readonly thresholds: Thresholds
}

/** A note where a quantity changes steadily by as much as would be a jump. */
function slowFindings(
  watched: readonly DriftPoint[],
  setup: string,
  quantity: Drift['quantity'],
  { unit, smallest, isRelative, thresholds }: SlowWatch,
): Drift['findings'] {
  // The star's image widens and the light weakens with the airmass as the night goes on; that is no fault.
  if (quantity === 'seeing' || quantity === 'throughput') return []
  const drift = findSlowDrift(watched, smallest, thresholds.jumpSigma.value)
  if (!drift) return []
  const change = isRelative ? `${(100 * (Math.exp(drift.total) - 1)).toFixed(0)} %` : `${figure(drift.total)} ${unit}`
  const text = `the ${quantity} of set-up ${setup} drifts by ${change} within ${drift.hours.toFixed(1)} h`
  return [finding(NIGHT_RULES, 'slow-drift', text, { value: drift.total, limit: smallest })]
}

/** Two values to the third digit of the step between them: '0 to 251', '4.62 to 5.91'. */
function fromTo(from: number, to: number): string {
  const step = Math.abs(to - from)
  const decimals = step > 0 ? Math.min(6, Math.max(0, 2 - Math.floor(Math.log10(step)))) : 2
  const word = (value: number): string => value.toFixed(decimals).replace(/^-(?=0(\.0+)?$)/, '')
  return `${word(from)} to ${word(to)}`
}

/** Hours and minutes of an MJD. */
export function timeOf(mjd: number): string {
  const minutes = Math.round((mjd - Math.floor(mjd)) * 1440) % 1440
  return `${String(Math.floor(minutes / 60)).padStart(2, '0')}:${String(minutes % 60).padStart(2, '0')}`
}
