import { OXYGEN_BANDS, TELLURIC_BANDS } from '../tables/sky.ts'
import { fineGrid, FINE_FIRST, FINE_SAMPLES, FINE_STEP } from './grid.ts'
import { withFeatures } from './profiles.ts'
import type { PlacedFeature } from './profiles.ts'

/** Night-sky emission: wavelength [Å, air] and photons relative to the 5577 line. Strengths are round, for a dark site. */
const SKY_LINES: readonly (readonly [wavelength: number, strength: number])[] = [
  [5577.339, 1],
  [5889.95, 0.25],
  [5895.92, 0.15],
  [6300.304, 0.6],
  [6363.776, 0.2],
  [6863.96, 0.3],
  [6923.22, 0.25],
  [7276.41, 0.4],
  [7316.28, 0.4],
  [7340.89, 0.35],
  [7750.64, 0.5],
  [7794.12, 0.6],
  [7821.51, 0.5],
  [7913.71, 0.6],
  [7964.65, 0.6],
  [7993.33, 0.6],
  [8344.6, 0.9],
  [8399.16, 1],
  [8430.17, 0.9],
  [8465.2, 0.5],
  [8885.83, 1.2],
  [8919.61, 1.1],
]
/** Photons of a line against those of an Å of the sky's continuum. */
const LINE_TO_CONTINUUM = 600

/** Light of the night sky on the fine grid, photons per Å, continuum 1 at 5500 Å; lines are one sample wide. */
export function nightSky(): Float64Array {
  const light = fineGrid().map((wavelength) => 0.8 + 0.2 * (wavelength / 5500) ** 2)
  for (const [wavelength, strength] of SKY_LINES) {
    const position = (wavelength - FINE_FIRST) / FINE_STEP
    const i = Math.floor(position)
    const height = (strength * LINE_TO_CONTINUUM) / FINE_STEP
    light[i] += height * (1 - (position - i))
    light[i + 1] += height * (position - i)
  }
  return light
}

/** Equivalent width [Å] at airmass 1 of an oxygen line whose strength in the table is 1; round, for a high site. */
const OXYGEN_STRENGTH: Readonly<Record<string, number>> = { 'O2 A band': 0.62, 'O2 B band': 0.17 }
/** Mean depth of the other bands at airmass 1; round, for a dry night. */
const OTHER_DEPTH: Readonly<Record<string, number>> = {
  'γ band': 0.03,
  'a band': 0.05,
  'Z band': 0.04,
  'ρστ bands': 0.1,
}

/** The bands of the air at airmass 1: oxygen line by line, the weaker bands as shallow troughs. */
function airFeatures(): readonly PlacedFeature[] {
  const oxygen = OXYGEN_BANDS.flatMap(({ name, lines }) =>
    lines.map(([wavelength, strength]) => ({
      shape: { form: 'line' } as const,
      wavelength,
      strength: strength * (OXYGEN_STRENGTH[name] ?? 0),
    })),
  )
  const others = TELLURIC_BANDS.map(({ name, range: [from, to] }) => ({
    shape: { form: 'trough', width: to - from } as const,
    wavelength: (from + to) / 2,
    strength: (OTHER_DEPTH[name] ?? 0) * (to - from),
  }))
  return [...oxygen, ...others]
}

/** Share of the light that the bands of the air let through at an airmass, on the fine grid. Saturated lines grow as its root. */
export function airBands(airmass: number): Float64Array {
  const light = withFeatures(new Float64Array(FINE_SAMPLES).fill(1), airFeatures())
  return light.map((share) => share ** Math.sqrt(airmass))
}

/** Share of the light that the air lets through besides its bands. Source: round figures for a high site. */
export function extinction(wavelength: number, airmass: number): number {
  const magnitudes = 0.08 + 0.12 * (5000 / wavelength) ** 4
  return 10 ** (-0.4 * magnitudes * airmass)
}
