import { DEMO_INSTRUMENT } from '../tables/demoNight.ts'

const { width: WIDTH, height: HEIGHT } = DEMO_INSTRUMENT
/** Largest departure of a pixel's sensitivity from the mean, and rows at each end that the slit does not reach. */
const SENSITIVITY_SCATTER = 0.008
const SLIT_EDGE = 3

/** What falls on the detector, in electrons. */
export interface FrameLight {
  /** shape (width), electrons of the star summed along the slit, and its FWHM in rows. */
  readonly star?: Float64Array
  readonly seeing?: number
  /** shape (width), electrons in each row, the same all along the slit. */
  readonly even?: Float64Array
  /** Electrons in every pixel, slit or not: dark current. */
  readonly dark?: number
  /** shape (width × height) in place of the above, for images without grating. */
  readonly image?: Float64Array
}

/** Row of the star's light in a column, from 0. */
export function traceRow(column: number): number {
  return DEMO_INSTRUMENT.traceRow + DEMO_INSTRUMENT.traceTilt * (column - WIDTH / 2)
}

/** Share of a Gaussian trace in each row, peak first normalised so that the rows sum to 1. */
function rowShare(row: number, centre: number, fwhm: number): number {
  const sigma = fwhm / (2 * Math.sqrt(2 * Math.LN2))
  return Math.exp(-0.5 * ((row - centre) / sigma) ** 2) / (sigma * Math.sqrt(2 * Math.PI))
}

/** Fixed pattern of the detector: sensitivity of a pixel, the same in every frame. */
function sensitivity(index: number): number {
  const mixed = Math.imul(index + 1, 0x9e3779b1) >>> 0
  const scrambled = Math.imul(mixed ^ (mixed >>> 15), 0x85ebca6b) >>> 0
  return 1 + SENSITIVITY_SCATTER * ((scrambled >>> 8) / 2 ** 23 - 1)
}

/**
 * Stored counts of a raw frame, shape (width × height), rows outermost, whole numbers from 0 to the saturation limit.
 *
 * @param normal  source of normal numbers, for photon and read-out noise
 */
export function rawCounts(light: FrameLight, normal: () => number): Float64Array {
  const { gain, readNoise, biasLevel, saturation } = DEMO_INSTRUMENT
  const out = new Float64Array(WIDTH * HEIGHT)
  for (let row = 0; row < HEIGHT; row++) {
    const inSlit = row >= SLIT_EDGE && row < HEIGHT - SLIT_EDGE
    for (let column = 0; column < WIDTH; column++) {
      const i = row * WIDTH + column
      let electrons = light.dark ?? 0
      if (light.image) electrons += light.image[i]
      if (inSlit && light.even) electrons += light.even[column]
      if (inSlit && light.star) {
        electrons += light.star[column] * rowShare(row, traceRow(column), light.seeing ?? DEMO_INSTRUMENT.seeing)
      }
      electrons *= sensitivity(i)
      const noisy = electrons + normal() * Math.sqrt(Math.max(0, electrons) + readNoise ** 2)
      out[i] = Math.min(saturation, Math.max(0, Math.round(biasLevel + noisy / gain)))
    }
  }
  return out
}

/** Electrons at which the brightest row of a trace of that FWHM saturates, summed along the slit. */
export function saturationElectrons(fwhm: number): number {
  const { saturation, biasLevel, gain } = DEMO_INSTRUMENT
  return ((saturation - biasLevel) * gain) / rowShare(0, 0, fwhm)
}

/** Stars of an acquisition or focus image as electrons in each pixel, shape (width × height). */
export function starField(
  stars: readonly { readonly x: number; readonly y: number; readonly electrons: number }[],
  fwhm: number,
): Float64Array {
  const out = new Float64Array(WIDTH * HEIGHT)
  const reach = Math.ceil(3 * fwhm)
  for (const { x, y, electrons } of stars) {
    for (let row = Math.max(0, Math.floor(y) - reach); row < Math.min(HEIGHT, y + reach); row++) {
      for (let column = Math.max(0, Math.floor(x) - reach); column < Math.min(WIDTH, x + reach); column++) {
        out[row * WIDTH + column] += electrons * rowShare(row, y, fwhm) * rowShare(column, x, fwhm)
      }
    }
  }
  return out
}
