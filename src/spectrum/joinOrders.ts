import { figure } from './axis.ts'
import { cutWavelength, levelRatio } from './orderCut.ts'
import type { Note } from '../findings/types.ts'
import type { Spectrum } from './types.ts'

/** Share of the shorter neighbour that an overlap may cover for two spectra to be orders, not repeats of each other. */
const MOST_OVERLAP = 0.8
/** Gap between neighbours, as a share of the shorter, up to which they still abut. */
const MOST_GAP = 0.5
/** Ratio of levels in an overlap from which the step is worth a note of its own. */
const LEVEL_STEP = 1.05

/**
 * The spectra of a file with the orders and arms of one star joined: those that follow each other in wavelength,
 * overlapping by less than 80 % or with a gap under half their length. In an overlap the joined spectrum changes from
 * one to the other where their signal crosses; no sample is resampled and no level rescaled, the step is noted.
 * Spectra of different stars, repeats of one range, sky and lamps stay as they are, at their place in the list.
 */
export function joinOrders(spectra: readonly Spectrum[]): readonly Spectrum[] {
  const joined = new Map<number, Spectrum>()
  const taken = new Set<number>()
  for (const group of groups(spectra)) {
    const sorted = [...group].sort((a, b) => start(spectra[a]) - start(spectra[b]))
    if (sorted.length < 2 || sorted.some((i) => taken.has(i))) continue
    if (!isChain(sorted.map((i) => spectra[i]))) continue
    joined.set(Math.min(...sorted), join(sorted.map((i) => spectra[i])))
    for (const i of sorted) taken.add(i)
  }
  return spectra.flatMap((spectrum, i) => joined.get(i) ?? (taken.has(i) ? [] : [spectrum]))
}

/** Sets of spectra that may be one star: arms in several HDUs with the same row, then rows of one HDU. */
function groups(spectra: readonly Spectrum[]): readonly (readonly number[])[] {
  const byRow = new Map<string, number[]>()
  const byHdu = new Map<string, number[]>()
  for (let i = 0; i < spectra.length; i++) {
    const { role, hdu, row, fluxUnit, fluxKind, medium, facts } = spectra[i]
    if (role !== 'star' && role !== 'unknown') continue
    if (spectra[i].wavelength.length < 2) continue
    const kind = [facts.object ?? '', fluxUnit, fluxKind, medium].join('|')
    append(byRow, `${kind}|${row ?? -1}`, i)
    append(byHdu, `${kind}|${hdu}`, i)
  }
  const arms = [...byRow.values()].filter((group) => new Set(group.map((i) => spectra[i].hdu)).size > 1)
  return [...arms, ...byHdu.values()]
}

function append(map: Map<string, number[]>, key: string, value: number): void {
  const list = map.get(key)
  if (list) list.push(value)
  else map.set(key, [value])
}

function start(spectrum: Spectrum): number {
  return spectrum.wavelength[0]
}

function end(spectrum: Spectrum): number {
  return spectrum.wavelength[spectrum.wavelength.length - 1]
}

/** True when sorted spectra follow each other as orders or arms do. */
function isChain(sorted: readonly Spectrum[]): boolean {
  for (let i = 1; i < sorted.length; i++) {
    const [left, right] = [sorted[i - 1], sorted[i]]
    if (!(start(left) < start(right) && end(left) < end(right))) return false
    const shorter = Math.min(end(left) - start(left), end(right) - start(right))
    const overlap = end(left) - start(right)
    if (overlap > MOST_OVERLAP * shorter || -overlap > MOST_GAP * shorter) return false
  }
  return true
}

function join(parts: readonly Spectrum[]): Spectrum {
  const notes: Note[] = []
  // Where three overlap a later cut may not lie before an earlier one.
  let before = -Infinity
  const steps: { readonly size: number; readonly cut: number }[] = []
  const cuts = parts.slice(1).map((right, i) => {
    const left = parts[i]
    if (end(left) < start(right)) return { low: end(left), high: start(right) }
    const cut = Math.max(cutWavelength(left, right), before)
    before = cut
    const ratio = levelRatio(left, right)
    const size = ratio === undefined ? 1 : Math.max(ratio, 1 / ratio)
    if (size > LEVEL_STEP) steps.push({ size, cut })
    return { low: cut, high: cut }
  })
  const ranges = parts.map(({ wavelength }, i) => {
    const low = i === 0 ? -Infinity : cuts[i - 1].high
    const high = i === parts.length - 1 ? Infinity : cuts[i].low
    // A sample on the cut belongs to the left part.
    const from =
      i > 0 && low === cuts[i - 1].low
        ? wavelength.findIndex((value) => value > low)
        : wavelength.findIndex((value) => value >= low)
    const past = wavelength.findIndex((value) => value > high)
    return { from: from < 0 ? wavelength.length : from, to: past < 0 ? wavelength.length : past }
  })
  const pick = (of: (part: Spectrum) => Float64Array | undefined): Float64Array => {
    const pieces = parts.map((part, i) => {
      const values = of(part)
      const { from, to } = ranges[i]
      return values ? values.subarray(from, Math.max(from, to)) : new Float64Array(Math.max(0, to - from)).fill(NaN)
    })
    return Float64Array.from(concatenate(pieces))
  }
  const usable = Uint8Array.from(
    concatenate(parts.map((part, i) => part.usable.subarray(ranges[i].from, Math.max(ranges[i].from, ranges[i].to)))),
  )
  const first = parts[0]
  const last = parts[parts.length - 1]
  const places = parts.map(({ hdu, row }) => ({ hdu, ...(row === undefined ? {} : { row }) }))
  if (steps.length > 0) {
    const largest = steps.reduce((most, next) => (next.size > most.size ? next : most))
    notes.push({
      code: 'join-step',
      text: `levels differ at ${steps.length} of ${parts.length - 1} joins, the most by a factor ${largest.size.toPrecision(3)} at ${figure(largest.cut)} Å; they were not rescaled`,
    })
  }
  const gaps = parts.slice(1).filter((right, i) => end(parts[i]) < start(right)).length
  notes.unshift({
    code: 'joined',
    text: `joined from ${parts.length} spectra that overlap or abut${gaps > 0 ? `, with ${gaps} gaps` : ''}; in an overlap the stronger signal is kept`,
  })
  return {
    medium: first.medium,
    mediumHow: first.mediumHow,
    frame: first.frame,
    fluxUnit: first.fluxUnit,
    fluxKind: first.fluxKind,
    role: first.role,
    facts: first.facts,
    wavelength: pick((part) => part.wavelength),
    flux: pick((part) => part.flux),
    ...(parts.some((part) => part.sigma) ? { sigma: pick((part) => part.sigma) } : {}),
    ...(parts.every((part) => part.sky) ? { sky: pick((part) => part.sky) } : {}),
    usable,
    hdu: Math.min(...parts.map((part) => part.hdu)),
    convention: `${parts.length} joined: ${first.convention}`,
    uncertainty: parts.find((part) => part.uncertainty !== 'none')?.uncertainty ?? 'none',
    asStored: {
      samples: parts.reduce((sum, part) => sum + part.asStored.samples, 0),
      medium: first.asStored.medium,
      first: first.asStored.first,
      last: last.asStored.last,
      fluxFirst: first.asStored.fluxFirst,
      fluxLast: last.asStored.fluxLast,
      nonfinite: parts.reduce((sum, part) => sum + part.asStored.nonfinite, 0),
    },
    joinedFrom: places,
    notes: [...notes, ...sharedNotes(parts)],
  }
}

function concatenate<T extends Float64Array | Uint8Array>(pieces: readonly T[]): number[] {
  return pieces.flatMap((piece) => [...piece])
}

function sharedNotes(parts: readonly Spectrum[]): readonly Note[] {
  const seen = new Map<string, Note>()
  // One note of a kind is enough for a hundred orders.
  for (const part of parts) for (const note of part.notes) if (!seen.has(note.code)) seen.set(note.code, note)
  return [...seen.values()]
}
