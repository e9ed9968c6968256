import type { Curves } from '../quality/types.ts'
import { shownSpectrum } from './shownSpectrum.ts'
import type { TargetView } from './targetView.ts'
import { measurementsOf } from './targetView.ts'
import { expectedChance, findingsOf, qualityOf, verdictOf } from './verdict.ts'
import { featureWord, percent, typeFound, typeRange, withError } from './words.ts'

/** A curve as base64 of 16-bit steps between `low` and `high`, little-endian; 65535 where there is no value. */
export interface PackedCurve {
  readonly low: number
  readonly high: number
  readonly data: string
}

/** Samples kept of all curves of a page together, so that it stays a few MB for any number of targets. */
const SAMPLES_IN_ALL = 400_000
const LEAST_SAMPLES = 400

const base64 = (bytes: Uint8Array): string =>
  Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength).toString('base64')

/** The curve packed, or null where it is missing or has no finite value. */
export function packCurve(values: ArrayLike<number> | undefined, kept: readonly number[]): PackedCurve | null {
  if (!values) return null
  let low = Infinity
  let high = -Infinity
  for (const i of kept) {
    if (!Number.isFinite(values[i])) continue
    low = Math.min(low, values[i])
    high = Math.max(high, values[i])
  }
  if (!(high >= low)) return null
  const view = new DataView(new ArrayBuffer(2 * kept.length))
  kept.forEach((i, k) => {
    const step = high === low ? 0 : Math.round(((values[i] - low) / (high - low)) * 65534)
    view.setUint16(2 * k, Number.isFinite(values[i]) ? step : 65535, true)
  })
  return { low, high, data: base64(new Uint8Array(view.buffer)) }
}

/** Indices of at most `most` samples: in equal groups the lowest and the highest of the normalised flux, in order. */
export function thinned(values: ArrayLike<number>, most: number): number[] {
  const n = values.length
  if (n <= most) return Array.from({ length: n }, (_, i) => i)
  const groups = Math.max(1, Math.floor(most / 2))
  const kept: number[] = []
  for (let g = 0; g < groups; g++) {
    const from = Math.floor((g * n) / groups)
    const to = Math.floor(((g + 1) * n) / groups)
    let [low, high] = [from, from]
    for (let i = from; i < to; i++) {
      if (values[i] < values[low] || Number.isNaN(values[low])) low = i
      if (values[i] > values[high] || Number.isNaN(values[high])) high = i
    }
    kept.push(Math.min(low, high))
    if (low !== high) kept.push(Math.max(low, high))
  }
  return kept
}

function packCurves(curves: Curves | undefined, most: number): object | null {
  if (!curves || curves.restWavelength.length === 0) return null
  const kept = thinned(curves.normalised, most)
  const rest = new DataView(new ArrayBuffer(4 * kept.length))
  kept.forEach((i, k) => rest.setFloat32(4 * k, curves.restWavelength[i], true))
  return {
    rest: { data: base64(new Uint8Array(rest.buffer)) },
    shift: curves.wavelength[0] / curves.restWavelength[0],
    normalised: packCurve(curves.normalised, kept),
    expected: packCurve(curves.expected, kept),
    flux: packCurve(curves.flux, kept),
    continuum: packCurve(curves.continuum, kept),
  }
}

/** What the page knows of one target. */
export interface HtmlTarget {
  readonly name: string
  readonly type: string
  readonly typeNumber: number | null
  readonly range: string
  readonly expected: string
  readonly probability: number | null
  readonly snr: number | null
  readonly quality: string
  readonly again: string | null
  readonly urgency: number | null
  readonly verdict: string
  readonly findings: readonly (readonly [string, string])[]
  /** Name, rest wavelength, measured, expected, share in words, share. */
  readonly features: readonly (readonly [string, number, string, string, string, number])[]
  readonly pages: string | null
  readonly curves: object | null
}

/** The targets of a night as plain data for the page. */
export function htmlTargets(
  views: readonly TargetView[],
  pagesOf: (target: string) => string | undefined,
): HtmlTarget[] {
  const most = Math.max(LEAST_SAMPLES, Math.floor(SAMPLES_IN_ALL / Math.max(1, views.length)))
  return views.map((view): HtmlTarget => {
    const { type, summary, name } = view
    const best = view.exposures[view.best]
    const evidence = new Map(type.evidence.map((e) => [e.feature, e]))
    const sentence = verdictOf(view).sentence
    return {
      name,
      type: typeFound(type),
      typeNumber: type.typeNumber ?? null,
      range: type.low68 === undefined || type.high68 === undefined ? '' : typeRange(type.low68, type.high68),
      expected: summary?.listed?.expectedType ?? best.night?.expectedType ?? '',
      probability: expectedChance(view) ?? null,
      snr: (summary ? summary.snrReached : best.spectrum.snr.visual) ?? null,
      quality: qualityOf(view),
      again: summary?.observeAgain ? (summary.reason ?? 'no reason given') : null,
      urgency: summary?.observeAgain ? (summary.urgency ?? null) : null,
      verdict: sentence.charAt(0).toUpperCase() + sentence.slice(1),
      findings: findingsOf(view).map((f) => [f.level, f.text] as const),
      features: [...measurementsOf(view)]
        .sort((a, b) => (evidence.get(b.feature)?.share ?? -1) - (evidence.get(a.feature)?.share ?? -1))
        .map((m) => {
          const e = evidence.get(m.feature)
          const unit = m.unit === '1' ? '' : ` ${m.unit}`
          return [
            featureWord(m.feature),
            m.wavelengthRest,
            e && view.exposures.length > 1
              ? withError(e.measured, e.error) + unit
              : m.ew === undefined
                ? m.status
                : withError(m.ew, m.ewErr) + unit,
            e ? withError(e.expected, e.expectedScatter) + unit : '',
            e ? percent(e.share) : '',
            e?.share ?? 0,
          ] as const
        }),
      pages: pagesOf(name) ?? null,
      curves: packCurves(shownSpectrum(view).spectrum.curves, most),
    }
  })
}
