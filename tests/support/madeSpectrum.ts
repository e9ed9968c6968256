import { profile } from '../../src/numeric/profiles.ts'
import { seededNormal, seededUniform } from '../../src/numeric/random.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { SPEED_OF_LIGHT } from '../../src/numeric/speedOfLight.ts'

/** A line put into a made spectrum: rest wavelength [Å], equivalent width [Å, negative for emission], own FWHM [Å]. */
export interface MadeLine {
  readonly wavelength: number
  readonly ew: number
  readonly fwhm: number
  readonly shape?: 'gaussian' | 'lorentzian' | 'voigt'
}

/** Kinds of star a made spectrum can imitate. */
export type MadeKind = 'bare' | 'O' | 'B' | 'A0' | 'A5' | 'F0' | 'F5' | 'G2' | 'K5' | 'M4'

export interface MadeOptions {
  readonly kind: MadeKind
  readonly from: number
  readonly to: number
  /** Å, constant; or set `wavelength`. */
  readonly step: number
  readonly wavelength?: Float64Array
  /** Å, of the instrument (Gaussian). */
  readonly fwhm: number
  /** Per sample, the same at every wavelength; Infinity for none. */
  readonly snr: number
  readonly seed: number
  /** Seed of the field of weak lines; the star's identity, kept while the noise changes. */
  readonly star: number
  readonly velocity: number
  /** Share of the weak lines kept (1 = all), and their mean strength relative to the usual. */
  readonly crowding: number
  readonly response: (wavelength: number) => number
  readonly lines: readonly MadeLine[]
  /** Number of cosmic rays (single samples, 20 to 200 times the noise). */
  readonly cosmicRays: number
  /** Parts without data [Å]. */
  readonly gaps: readonly (readonly [number, number])[]
  /** True: a file's uncertainty goes with it. */
  readonly withSigma: boolean
  /** Noise that a resampling has made to run on from one sample to the next: share of the neighbour mixed in, 0 to 0.5. */
  readonly mixing: number
}

export interface MadeSpectrum {
  readonly spectrum: Spectrum
  /** shape (n): the level without any line, noise or cosmic ray. */
  readonly continuum: Float64Array
  /** shape (n): with lines, without noise. */
  readonly clean: Float64Array
  /** shape (n), 1 σ of a sample. */
  readonly sigma: Float64Array
}

const DEFAULTS: MadeOptions = {
  kind: 'bare',
  from: 3600,
  to: 9200,
  step: 1.4,
  fwhm: 4,
  snr: 100,
  seed: 1,
  star: 7,
  velocity: 0,
  crowding: 1,
  response: () => 1,
  lines: [],
  cosmicRays: 0,
  gaps: [],
  withSigma: false,
  mixing: 0,
}

/** Effective temperature [K], weak lines relative to the Sun, equivalent width of Hβ [Å] and of metal lines (Sun = 1). */
const KINDS: Readonly<Record<MadeKind, readonly [number, number, number, number]>> = {
  bare: [8000, 0, 0, 0],
  O: [35000, 0.02, 2.5, 0],
  B: [18000, 0.03, 6, 0.02],
  A0: [9700, 0.06, 15, 0.1],
  A5: [8200, 0.2, 13, 0.3],
  F0: [7200, 0.33, 9, 0.45],
  F5: [6500, 0.55, 6, 0.65],
  G2: [5800, 1, 3.5, 1],
  K5: [4400, 2, 1.2, 2],
  M4: [3200, 2.5, 0.3, 2.5],
}

/** Share of the light that lines take from the Sun, by wavelength [Å]; rough, from memory. */
const SOLAR_BLANKETING: readonly (readonly [number, number])[] = [
  [3500, 0.38], [3700, 0.4], [3850, 0.4], [4000, 0.27], [4250, 0.22], [4500, 0.12], [4750, 0.09], [5000, 0.08],
  [5250, 0.085], [5500, 0.05], [6000, 0.035], [6500, 0.022], [7000, 0.015], [8000, 0.01], [9500, 0.008],
] // prettier-ignore

/** Balmer lines [Å] and their strength relative to Hβ. */
const BALMER: readonly (readonly [number, number])[] = [
  [6562.79, 0.75], [4861.32, 1], [4340.46, 1], [4101.73, 1], [3970.07, 0.9], [3889.05, 0.8], [3835.38, 0.65], [3797.9, 0.5],
] // prettier-ignore

/** Strong lines of metals [Å] with their equivalent width in the Sun [Å] (facts of Moore et al. 1966, rounded). */
const STRONG: readonly (readonly [number, number])[] = [
  [3933.66, 9], [3968.47, 7], [4226.73, 1.48], [4271.77, 0.76], [4307.9, 0.72], [4325.76, 0.79], [4383.55, 1.01],
  [5167.32, 0.94], [5172.68, 1.26], [5183.6, 1.58], [5269.54, 0.48], [5328.04, 0.38], [5889.95, 0.75], [5895.92, 0.56],
  [8498.02, 1.46], [8542.09, 3.67], [8662.14, 2.6],
] // prettier-ignore

/** Heads [Å] of bands that fade to the red, their greatest depth in an M4 star and their length [Å]. */
const BANDS: readonly (readonly [number, number, number])[] = [
  [4761, 0.35, 90], [4955, 0.45, 110], [5167, 0.5, 110], [5448, 0.45, 130], [5847, 0.55, 150], [6158, 0.6, 200],
  [6651, 0.5, 120], [7054, 0.6, 220], [7589, 0.5, 200], [8432, 0.4, 180], [8859, 0.3, 150],
] // prettier-ignore

const FINE = 0.2
/**
 * A made spectrum with a known continuum: black body times response, a field of thousands of weak lines, Balmer lines
 * with wings, strong metal lines and bands after the kind of star, seen through a Gaussian instrument and with noise.
 * The same options give the same spectrum.
 */
export function madeSpectrum(options: Partial<MadeOptions> = {}): MadeSpectrum {
  const chosen = { ...DEFAULTS, ...options }
  const wavelength = chosen.wavelength ?? evenGrid(chosen)
  const n = wavelength.length
  const relative = throughInstrument(fineSpectrum(chosen, wavelength), wavelength, chosen.fwhm)
  const [temperature] = KINDS[chosen.kind]
  const continuum = wavelength.map((w) => 1000 * planck(w, temperature) * chosen.response(w))
  const clean = continuum.map((level, i) => level * relative[i])
  const sigma = continuum.map((level) => level / chosen.snr)
  const flux = noisy(clean, sigma, chosen)
  const usable = new Uint8Array(n).fill(1)
  const ray = seededUniform(chosen.seed + 5)
  for (let k = 0; k < chosen.cosmicRays; k++) {
    const at = Math.floor(ray() * n)
    flux[at] += Math.max(sigma[at], continuum[at] * 0.01) * (20 + 180 * ray())
  }
  for (let i = 0; i < n; i++)
    if (chosen.gaps.some(([lo, hi]) => wavelength[i] >= lo && wavelength[i] <= hi)) {
      flux[i] = NaN
      usable[i] = 0
    }
  const spectrum = asSpectrum(wavelength, flux, usable, chosen.withSigma ? { sigma } : {})
  return { spectrum, continuum, clean, sigma }
}

/** A `Spectrum` around arrays, as a reader would have made it from a plain image. */
export function asSpectrum(
  wavelength: Float64Array,
  flux: Float64Array,
  usable: Uint8Array = new Uint8Array(flux.length).fill(1),
  more: Partial<Spectrum> = {},
): Spectrum {
  const n = flux.length
  return {
    wavelength,
    flux,
    usable,
    hdu: 0,
    medium: 'air',
    mediumHow: 'declared',
    frame: 'topocentric',
    fluxUnit: '',
    fluxKind: 'unknown',
    uncertainty: more.sigma ? 'sigma' : 'none',
    convention: 'made for a test',
    role: 'star',
    facts: {},
    asStored: {
      samples: n,
      medium: 'air',
      first: wavelength[0],
      last: wavelength[n - 1],
      fluxFirst: flux[0],
      fluxLast: flux[n - 1],
      nonfinite: 0,
    },
    notes: [],
    ...more,
  }
}

function evenGrid({ from, to, step }: MadeOptions): Float64Array {
  return Float64Array.from({ length: Math.floor((to - from) / step) + 1 }, (_, i) => from + i * step)
}

function planck(wavelength: number, temperature: number): number {
  const law = (w: number) => 1 / (w ** 5 * (Math.exp(1.438777e8 / (w * temperature)) - 1))
  return law(wavelength) / law(5500)
}

function solarBlanketing(wavelength: number): number {
  const k = Math.max(
    1,
    SOLAR_BLANKETING.findIndex(([w]) => w >= wavelength),
  )
  const [w0, b0] = SOLAR_BLANKETING[k - 1]
  const [w1, b1] = SOLAR_BLANKETING[k]
  return b0 + ((b1 - b0) * (wavelength - w0)) / (w1 - w0)
}

interface Fine {
  readonly start: number
  /** F/Fc at the fine steps. */
  readonly value: Float64Array
}

function fineSpectrum(options: MadeOptions, wavelength: Float64Array): Fine {
  const start = wavelength[0] - 40
  const size = Math.ceil((wavelength[wavelength.length - 1] + 40 - start) / FINE)
  const depth = new Float64Array(size)
  const [, weak, hydrogen, metals] = KINDS[options.kind]
  const shift = 1 + options.velocity / SPEED_OF_LIGHT
  if (weak > 0 && options.crowding > 0)
    addWeakLines(depth, start, { scale: weak * options.crowding, seed: options.star, shift })
  const optical = depth.map((tau) => Math.exp(-Math.min(tau, 3)))
  const multiply = (line: MadeLine) => multiplyLine(optical, start, line, shift)
  for (const [w, strength] of BALMER)
    if (hydrogen)
      multiply({ wavelength: w, ew: hydrogen * strength, fwhm: Math.max(1.5, hydrogen * 1.1), shape: 'voigt' })
  for (const [w, ew] of STRONG)
    if (metals) multiply({ wavelength: w, ew: ew * metals, fwhm: Math.max(0.7, ew * metals * 1.1) })
  if (options.kind === 'M4') for (const band of BANDS) multiplyBand(optical, start, band, shift)
  for (const line of options.lines) multiply(line)
  return { start, value: optical }
}

/** Optical depth of a field of lines: log-normal strengths (spread 1.1 in ln), placed at random. */
function addWeakLines(
  tau: Float64Array,
  start: number,
  { scale, seed, shift }: { scale: number; seed: number; shift: number },
) {
  const uniform = seededUniform(seed)
  const normal = seededNormal(seed + 1)
  const spread = 1.1
  const typical = 0.03 + 0.06 * Math.sqrt(scale)
  const mean = typical / Math.exp(spread * spread)
  const sigma = 0.25 / 2.3548
  for (let at = 3400; at < 9600;) {
    const blanketing = Math.min(0.7, Math.max(1e-4, solarBlanketing(at) * scale))
    at += (-Math.log(1 - uniform()) * mean) / blanketing
    const ew = mean * Math.exp(spread * normal() - 0.5 * spread * spread)
    const peak = ew / (sigma * Math.sqrt(2 * Math.PI))
    const centre = at * shift
    const reach = 5 * sigma
    for (let i = Math.max(0, Math.ceil((centre - reach - start) / FINE)); i < tau.length; i++) {
      const off = start + i * FINE - centre
      if (off > reach) break
      tau[i] += peak * Math.exp((-0.5 * off * off) / (sigma * sigma))
    }
  }
}

/** Multiplies by 1 − d·P with the equivalent width asked for; a depth over 0.9 is made wider instead. */
function multiplyLine(value: Float64Array, start: number, line: MadeLine, shift: number): void {
  const { wavelength, ew, shape = 'gaussian' } = line
  let fwhm = line.fwhm
  const area = (width: number) =>
    shape === 'gaussian' ? 1.0644670194312262 * width : shape === 'lorentzian' ? (Math.PI / 2) * width : 1.3 * width
  if (ew / area(fwhm) > 0.9) fwhm *= ew / area(fwhm) / 0.9
  const width = shape === 'lorentzian' ? fwhm / 2 : fwhm / 2.3548200450309493
  const parameters = Float64Array.of(1, wavelength * shift, shape === 'voigt' ? width * 0.66 : width, fwhm / 4)
  const out = new Float64Array(5)
  const reach = shape === 'gaussian' ? 4 * fwhm : 25 * fwhm
  const from = Math.max(0, Math.ceil((wavelength * shift - reach - start) / FINE))
  const to = Math.min(value.length - 1, Math.floor((wavelength * shift + reach - start) / FINE))
  let sum = 0
  const shapeAt = new Float64Array(Math.max(0, to - from + 1))
  for (let i = from; i <= to; i++) {
    profile(shape, start + i * FINE, parameters, 0, out)
    shapeAt[i - from] = out[0]
    sum += out[0] * FINE
  }
  for (let i = from; i <= to; i++) value[i] *= 1 - ((ew * shift) / sum) * shapeAt[i - from]
}

function multiplyBand(
  value: Float64Array,
  start: number,
  [head, depth, length]: readonly [number, number, number],
  shift: number,
) {
  for (let i = 0; i < value.length; i++) {
    const off = (start + i * FINE) / shift - head
    if (off > 0 && off < 5 * length) value[i] *= 1 - depth * Math.exp(-off / length) * Math.min(1, off / 3)
  }
}

/** Convolves with the instrument and averages over each pixel. */
function throughInstrument({ start, value }: Fine, wavelength: Float64Array, fwhm: number): Float64Array {
  const sigma = fwhm / 2.3548200450309493 / FINE
  const half = Math.ceil(5 * sigma)
  const kernel = Float64Array.from({ length: 2 * half + 1 }, (_, j) => Math.exp(-0.5 * ((j - half) / sigma) ** 2))
  const total = kernel.reduce((sum, k) => sum + k, 0)
  const smooth = new Float64Array(value.length)
  for (let i = 0; i < value.length; i++) {
    let sum = 0
    for (let j = -half; j <= half; j++) sum += kernel[j + half] * value[Math.min(value.length - 1, Math.max(0, i + j))]
    smooth[i] = sum / total
  }
  return wavelength.map((w, k) => {
    const step = k + 1 < wavelength.length ? wavelength[k + 1] - w : w - wavelength[k - 1]
    const lo = (w - step / 2 - start) / FINE
    const hi = (w + step / 2 - start) / FINE
    let sum = 0
    const parts = 5
    for (let j = 0; j < parts; j++) {
      const at = lo + ((j + 0.5) * (hi - lo)) / parts
      const i = Math.floor(at)
      sum += smooth[i] + (smooth[i + 1] - smooth[i]) * (at - i)
    }
    return sum / parts
  })
}

/** Adds noise; mixed noise keeps the standard deviation of a sample but runs on to the next. */
function noisy(clean: Float64Array, sigma: Float64Array, { snr, seed, mixing }: MadeOptions): Float64Array {
  if (!(snr < Infinity)) return clean.slice()
  const normal = seededNormal(seed)
  const norm = Math.hypot(1 - mixing, mixing)
  let last = normal()
  return clean.map((value, i) => {
    const fresh = normal()
    const noise = ((1 - mixing) * fresh + mixing * last) / norm
    last = fresh
    return value + sigma[i] * noise
  })
}
