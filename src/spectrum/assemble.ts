import { vacuumToAir } from './air.ts'
import { figure } from './axis.ts'
import { fluxKindOf } from './fluxUnit.ts'
import type { FoundSpectrum } from './found.ts'
import { decideMedium } from './medium.ts'
import { checkedKind, sigmaOf } from './uncertainty.ts'
import type { Note } from '../findings/types.ts'
import type { HeaderFacts, Medium, Spectrum, VelocityFrame } from './types.ts'

/** What the headers say of the spectrum as a whole, handed to `assemble`. */
export interface SpectrumContext {
  readonly facts: HeaderFacts
  readonly factNotes: readonly Note[]
  readonly frame: VelocityFrame
  readonly role: Spectrum['role']
  /** First and last wavelength [Å] of all spectra that are stored with this one. */
  readonly span: readonly [number, number]
}

/** Fewest zeros in a row at an end that count as padding. */
const PADDING = 3

/**
 * The spectrum in the program's own units: wavelengths in air, increasing, without repeats; one σ; a mask of the
 * usable samples; and how the file stored it. Samples without a finite wavelength are left out, each change is noted.
 */
export function assemble(found: FoundSpectrum, context: SpectrumContext): Spectrum {
  const notes: Note[] = [...found.axis.notes, ...found.notes]
  const order = increasingOrder(found.axis.wavelength, notes)
  const { wavelength: stored } = found.axis
  const declared = {
    ...(found.axis.medium === undefined ? {} : { medium: found.axis.medium }),
    ...(found.axis.mediumFrom === undefined ? {} : { from: found.axis.mediumFrom }),
  }
  const medium = decideMedium(found.headers, declared, found.label, { range: context.span, unit: found.fluxUnit })
  notes.push(...medium.notes)

  const kept = order.unique
  const inFile = gathered(stored, kept)
  const wavelength = medium.medium === 'vacuum' ? inFile.map(vacuumToAir) : inFile
  const flux = gathered(found.flux, kept)
  const uncertainty = found.uncertainty
  const checked = uncertainty && checkedKind(uncertainty.values, uncertainty.kind, found.flux)
  if (checked) notes.push(...checked.notes)
  const sigma = uncertainty && checked ? sigmaOf(gathered(uncertainty.values, kept), checked.kind, flux) : undefined
  const usable = usableSamples(found, kept, flux, sigma, notes)
  const sky = found.sky
  return {
    wavelength,
    flux,
    ...(sigma ? { sigma } : {}),
    usable,
    ...(sky ? { sky: gathered(sky, kept) } : {}),
    hdu: found.hdu,
    ...(found.row === undefined ? {} : { row: found.row }),
    medium: medium.medium,
    mediumHow: medium.how,
    frame: context.frame,
    fluxUnit: found.fluxUnit,
    fluxKind: found.isNormalised ? 'normalised' : fluxKindOf(found.fluxUnit),
    uncertainty: checked?.kind ?? 'none',
    convention: found.convention,
    role: context.role,
    facts: context.facts,
    asStored: storedEnds(found, order.all, medium.medium),
    notes: [...notes, ...context.factNotes],
  }
}

function storedEnds(found: FoundSpectrum, all: Indices, medium: Medium): Spectrum['asStored'] {
  let nonfinite = 0
  for (const value of found.flux) if (!Number.isFinite(value)) nonfinite++
  const { wavelength } = found.axis
  const [low, high] = all ? [all[0], all[all.length - 1]] : [0, wavelength.length - 1]
  return {
    samples: found.flux.length,
    medium,
    first: wavelength[low],
    last: wavelength[high],
    fluxFirst: found.flux[low],
    fluxLast: found.flux[high],
    nonfinite,
  }
}

/** Indices of samples; undefined for all of them in the order of the file, which most files need. */
type Indices = Uint32Array | undefined

function isInOrder(wavelength: Float64Array): boolean {
  for (let i = 1; i < wavelength.length; i++) if (!(wavelength[i] > wavelength[i - 1])) return false
  return Number.isFinite(wavelength[0]) && Number.isFinite(wavelength[wavelength.length - 1])
}

/** The values at the indices, in their order; the array itself where nothing changes its place. */
function gathered(values: Float64Array, indices: Indices): Float64Array {
  if (!indices) return values
  const out = new Float64Array(indices.length)
  for (let i = 0; i < indices.length; i++) out[i] = values[indices[i]]
  return out
}

/** Indices of the samples by increasing wavelength: all with a finite one, and those left when repeats are dropped. */
function increasingOrder(wavelength: Float64Array, notes: Note[]): { readonly all: Indices; readonly unique: Indices } {
  if (isInOrder(wavelength)) return { all: undefined, unique: undefined }
  const finite = new Uint32Array(wavelength.length)
  let count = 0
  let rises = true
  let falls = true
  let before = NaN
  for (let i = 0; i < wavelength.length; i++) {
    const value = wavelength[i]
    if (!Number.isFinite(value)) continue
    if (value <= before) rises = false
    if (value >= before) falls = false
    before = value
    finite[count++] = i
  }
  const all = finite.subarray(0, count)
  const lost = wavelength.length - count
  if (lost > 0)
    notes.push({ code: 'wavelength-missing', text: `${lost} samples have no finite wavelength and are left out` })
  if (rises) return { all, unique: all }
  if (falls) all.reverse()
  else {
    // Stable: of two samples at one wavelength the earlier in the file stays first.
    all.sort((a, b) => wavelength[a] - wavelength[b] || a - b)
    notes.push({
      code: 'wavelengths-sorted',
      text: 'the wavelengths are not in order in the file; samples were sorted',
    })
  }
  const unique = all.filter((index, i) => i === 0 || wavelength[index] !== wavelength[all[i - 1]])
  const repeated = all.length - unique.length
  if (repeated > 0)
    notes.push({
      code: 'wavelengths-repeated',
      text: `${repeated} samples repeat a wavelength; the first of each is kept`,
    })
  return { all, unique }
}

function usableSamples(
  found: FoundSpectrum,
  kept: Indices,
  flux: Float64Array,
  sigma: Float64Array | undefined,
  notes: Note[],
): Uint8Array {
  const usable = new Uint8Array(flux.length).fill(1)
  for (let i = 0; i < flux.length; i++) if (!Number.isFinite(flux[i])) usable[i] = 0
  maskPadding(flux, usable, notes)
  const { flags, uncertainty } = found
  if (flags) {
    const values = gathered(flags.values, kept)
    const bad = new Uint8Array(values.length)
    for (let i = 0; i < bad.length; i++) bad[i] = flags.isBad(values[i]) ? 1 : 0
    const count = bad.reduce((sum, value) => sum + value, 0)
    if (count === bad.length && count > 0)
      notes.push({ code: 'flags-ignored', text: `${flags.words} mark every sample; they are not used` })
    else for (let i = 0; i < bad.length; i++) if (bad[i]) usable[i] = 0
  }
  // An inverse variance of 0 is the usual way to say that a sample is bad. Other uncertainties of 0 only say nothing.
  if (uncertainty?.kind === 'inverse variance' && sigma) {
    const weights = gathered(uncertainty.values, kept)
    const without = weights.reduce((sum, value) => sum + (value > 0 ? 0 : 1), 0)
    if (without === flux.length)
      notes.push({ code: 'flags-ignored', text: 'the inverse variance is 0 everywhere; it is not used as a mask' })
    else for (let i = 0; i < flux.length; i++) if (!(weights[i] > 0)) usable[i] = 0
  }
  return usable
}

/** Marks runs of exact zeros at both ends: samples that the detector did not cover. */
function maskPadding(flux: Float64Array, usable: Uint8Array, notes: Note[]): void {
  let low = 0
  while (low < flux.length && (flux[low] === 0 || !Number.isFinite(flux[low]))) low++
  if (low === flux.length) return
  let high = 0
  while (flux[flux.length - 1 - high] === 0 || !Number.isFinite(flux[flux.length - 1 - high])) high++
  const total = (low >= PADDING ? low : 0) + (high >= PADDING ? high : 0)
  if (low >= PADDING) usable.fill(0, 0, low)
  if (high >= PADDING) usable.fill(0, flux.length - high)
  if (total > 0)
    notes.push({ code: 'padding', text: `${figure(total)} samples of 0 or no value at the ends are taken for padding` })
}
