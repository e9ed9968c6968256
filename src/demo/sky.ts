import { fineGrid, FINE_FIRST, FINE_SAMPLES, FINE_STEP } from './grid.ts'

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

/**
 * Absorption of the air: first and last wavelength [Å], depth at airmass 1, length [Å] over which the band recovers.
 * Extents as the Fraunhofer bands are given in handbooks; depths are round figures for a dry site.
 */
const AIR_BANDS: readonly (readonly [first: number, last: number, depth: number])[] = [
  [6276, 6320, 0.05],
  [6867, 6945, 0.22],
  [7160, 7340, 0.07],
  [7593, 7690, 0.5],
  [8120, 8350, 0.06],
  [8950, 9100, 0.12],
]

/** Share of the light that the bands of the air let through at an airmass, on the fine grid. */
export function airBands(airmass: number): Float64Array {
  const out = new Float64Array(FINE_SAMPLES).fill(1)
  for (const [first, last, depth] of AIR_BANDS) {
    for (let i = 0; i < FINE_SAMPLES; i++) {
      const along = (FINE_FIRST + FINE_STEP * i - first) / (last - first)
      if (along < 0 || along > 1) continue
      // a strong narrow head, then the teeth of the two branches fading to the red
      const teeth = 0.75 + 0.25 * Math.cos(2 * Math.PI * along * 9)
      const shape = along < 0.06 ? along / 0.06 : (1 - along) ** 0.6 * teeth
      out[i] = (1 - depth * shape) ** Math.sqrt(airmass)
    }
  }
  return out
}

/** Share of the light that the air lets through besides its bands. Source: round figures for a high site. */
export function extinction(wavelength: number, airmass: number): number {
  const magnitudes = 0.08 + 0.12 * (5000 / wavelength) ** 4
  return 10 ** (-0.4 * magnitudes * airmass)
}
