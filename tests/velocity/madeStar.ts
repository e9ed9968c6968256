import type { Continuum } from '../../src/continuum/types.ts'
import { seededNormal, seededUniform } from '../../src/numeric/random.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { SPEED_OF_LIGHT } from '../../src/numeric/speedOfLight.ts'

const SIGMAS_PER_FWHM = 2 * Math.sqrt(2 * Math.log(2))
/** [rest wavelength Å air, equivalent width Å, own FWHM Å]; strengths invented, wavelengths of the laboratory. */
export type MadeLine = readonly [number, number, number]

export interface MadeStarOptions {
  readonly lines: readonly MadeLine[]
  readonly velocity?: number
  readonly fwhm?: number
  readonly snr?: number
  readonly seed?: number
  readonly range?: readonly [number, number]
  readonly step?: number
  /** Weak lines at random places, of 0.02 to 0.3 Å. */
  readonly weakLines?: number
  /** Wavelength scale of the file: true wavelength to what the file says. */
  readonly scale?: (wavelength: number) => number
}

/** A spectrum of known velocity with its true continuum (a level of 1000), for the tests of this folder. */
export function madeStar(options: MadeStarOptions): { spectrum: Spectrum; continuum: Continuum } {
  const { lines, velocity = 0, fwhm = 4, snr = 100, seed = 1, range = [3800, 7400], weakLines = 0 } = options
  const step = options.step ?? fwhm / 3
  const scale = options.scale ?? ((w: number) => w)
  const n = Math.floor((range[1] - range[0]) / step) + 1
  const wavelength = Float64Array.from({ length: n }, (_, i) => range[0] + i * step)
  const uniform = seededUniform(seed)
  const weak = Array.from({ length: weakLines }, (): MadeLine => {
    const at = range[0] + uniform() * (range[1] - range[0])
    return [at, 0.02 * Math.pow(15, uniform()), 0]
  })
  const depth = new Float64Array(n)
  for (const [rest, width, own] of [...lines, ...weak]) {
    const centre = scale(rest * (1 + velocity / SPEED_OF_LIGHT))
    const sigma = Math.hypot(own, fwhm) / SIGMAS_PER_FWHM
    for (let i = 0; i < n; i++) {
      const off = (wavelength[i] - centre) / sigma
      if (Math.abs(off) < 6) depth[i] += (width / (sigma * Math.sqrt(2 * Math.PI))) * Math.exp(-0.5 * off * off)
    }
  }
  const normal = seededNormal(seed + 1)
  // S/N is per sample of the continuum; saturation keeps strong blends above zero
  const flux = Float64Array.from(depth, (d) => 1000 * (Math.exp(-d) + normal() / snr))
  const level = new Float64Array(n).fill(1000)
  const spectrum: Spectrum = {
    wavelength,
    flux,
    usable: new Uint8Array(n).fill(1),
    hdu: 0,
    medium: 'air',
    mediumHow: 'declared',
    frame: 'topocentric',
    fluxUnit: '',
    fluxKind: 'counts',
    uncertainty: 'none',
    convention: 'made',
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
  }
  const continuum: Continuum = {
    level,
    error: new Float64Array(n).fill(5),
    isPseudo: false,
    supported: 0.5,
    noise: new Float64Array(n).fill(1000 / snr),
    noiseFrom: 'measured',
  }
  return { spectrum, continuum }
}

const balmer = (widths: readonly number[], own: number): MadeLine[] =>
  [6562.8, 4861.33, 4340.46, 4101.73, 3970.07, 3889.05, 3835.38, 3797.9].map((at, i) => [at, widths[i], own])

/** Invented strengths, in the manner of the type. */
export const MADE_STARS: Readonly<Record<'O' | 'B' | 'A' | 'F' | 'G' | 'K', readonly MadeLine[]>> = {
  O: [
    ...balmer([2.4, 2.2, 2.0, 2.0, 2.0, 1.6, 1.4], 5),
    [4471.48, 0.6, 1],
    [4685.7, 0.6, 1],
    [4541.59, 0.7, 1],
    [5411.52, 0.9, 1],
    [5875.62, 0.8, 1],
    [4199.83, 0.5, 1],
    [4026.19, 0.7, 1],
  ],
  B: [
    ...balmer([4.5, 5.2, 5.6, 5.8, 5.5, 4.5, 4], 8),
    [4026.19, 1.1, 1],
    [4471.48, 1.2, 1],
    [4387.93, 0.6, 1],
    [4921.93, 0.6, 1],
    [5875.62, 0.7, 1],
    [6678.15, 0.6, 1],
    [4143.76, 0.5, 1],
    [4009.26, 0.4, 1],
  ],
  A: [...balmer([9.5, 13, 14, 14, 12, 9, 8], 16), [3933.66, 1, 0], [4481.21, 0.4, 0]],
  F: [
    ...balmer([4, 4, 3.6, 3.6, 3, 2.5, 2.2], 6),
    [3933.66, 6, 6],
    [3968.47, 4, 6],
    [4226.73, 0.6, 0],
    [5172.68, 0.6, 0],
    [5183.6, 0.6, 0],
    [5167.4, 0.6, 0],
    [4383.55, 0.6, 0],
    [4045.81, 0.6, 0],
    [5269.54, 0.4, 0],
    [5328.04, 0.3, 0],
    [5889.95, 0.4, 0],
    [5895.92, 0.3, 0],
    [4923.92, 0.3, 0],
    [5018.44, 0.3, 0],
  ],
  G: [
    ...balmer([3, 2.5, 2, 2, 1, 1, 1], 3),
    [3933.66, 9, 9],
    [3968.47, 7, 9],
    [4226.73, 1.2, 0],
    [5172.68, 1.2, 1],
    [5183.6, 1.4, 1],
    [5167.4, 1.1, 1],
    [4383.55, 1.1, 0],
    [4045.81, 1.2, 0],
    [4063.59, 0.8, 0],
    [5269.54, 0.9, 0],
    [5328.04, 0.8, 0],
    [5889.95, 0.8, 0],
    [5895.92, 0.6, 0],
    [4957.5, 0.7, 0],
    [4920.5, 0.6, 0],
    [4303, 6, 22],
    [6162.17, 0.3, 0],
    [6122.22, 0.25, 0],
    [4271.6, 1.3, 1],
    [4325.76, 1, 0],
  ],
  K: [
    [6562.8, 1, 2],
    [4861.33, 0.8, 1],
    [3933.66, 10, 12],
    [3968.47, 9, 12],
    [4226.73, 3.2, 3],
    [5172.68, 2.2, 2],
    [5183.6, 2.6, 2],
    [5167.4, 2.2, 2],
    [4383.55, 1.8, 0],
    [4045.81, 1.9, 0],
    [5269.54, 1.6, 0],
    [5328.04, 1.4, 0],
    [5889.95, 2.2, 2],
    [5895.92, 1.8, 2],
    [4303, 7, 24],
    [6162.17, 0.6, 0],
    [6122.22, 0.5, 0],
    [6496.9, 0.6, 0],
    [4957.5, 1, 0],
    [4271.6, 1.9, 1],
  ],
}
