import { readImage } from '../fits/image.ts'
import type { Hdu } from '../fits/types.ts'
import { apertureSolutions, isMultispec } from './apertures.ts'
import { cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import type { Container } from './container.ts'
import { headerAxis, isOtherAxis } from './headerAxis.ts'
import { imageRole } from './imageRole.ts'
import type { RowLayout } from './rowLayout.ts'
import { isEvenlySampled } from './sampling.ts'
import { guessedWavelengthUnit } from './unit.ts'

/** Most rows of an image that are taken for spectra when only its wavelength axis speaks for it. */
const FEW_ROWS = 8

/** How an image lies in the file: `samples` along the spectrum, then rows, then bands, all the rest 1. */
export interface ImageShape {
  readonly samples: number
  readonly rows: number
  readonly bands: number
  /** Number of the axis that is the spectral one, from 1. */
  readonly axis: number
}

/** An image of a file with what is known of it before its data are read. */
export interface ImageInput {
  readonly container: Container
  readonly hdu: Hdu
  readonly headers: Headers
  readonly shape: ImageShape
}

/** How the image of an HDU lies; undefined for one with more than one axis that could be the spectral one. */
export function imageShape(hdu: Hdu): ImageShape | undefined {
  const { dimensions } = hdu
  const long = dimensions.flatMap((n, i) => (n > 1 ? [i] : []))
  if (dimensions.length === 0 || dimensions.some((n) => n < 1)) return undefined
  if (long.length <= 1) return { samples: Math.max(...dimensions), rows: 1, bands: 1, axis: (long[0] ?? 0) + 1 }
  if (long[0] !== 0 || dimensions.length > 4) return undefined
  const [samples, second, third = 1, fourth = 1] = dimensions
  if (fourth > 1) return undefined
  if (third === 1) return { samples, rows: second, bands: 1, axis: 1 }
  // Three axes: aperture spectra with bands (spectrum, raw, background, sigma), else a cube.
  const isBands = cardText([hdu.header], 'BANDID1') !== undefined || isMultispec(hdu.header)
  return isBands && third <= FEW_ROWS ? { samples, rows: second, bands: third, axis: 1 } : undefined
}

/** Rows wavelength, flux and perhaps σ of an image without names and axis, told by the values of its first row. */
export function unnamedLayout(image: ImageInput): RowLayout | undefined {
  const { hdu, headers, shape } = image
  const isSmall = shape.rows <= 4 && shape.samples >= 16 && shape.bands === 1
  if (!isSmall || 'axis' in headerAxis(headers, 1, shape.samples) || isMultispec(hdu.header)) return undefined
  const first = readRow(image, 0)
  const ends = [first[0], first[first.length - 1]]
  if (!isEvenlySampled(first) || guessedWavelengthUnit(Math.min(...ends), Math.max(...ends)) === undefined)
    return undefined
  const roles = (['wavelength', 'flux', 'sigma', 'other'] as const).slice(0, shape.rows)
  return { roles, words: `rows ${roles.join(', ')} by their order and values`, isNamed: false }
}

/** Why the rows of an image are spectra, in words; undefined for a frame. */
export function rowsEvidence(image: ImageInput, layout: RowLayout | undefined): string | undefined {
  const { container, hdu, headers, shape } = image
  const { file, companion } = container
  const { samples, rows } = shape
  const { header } = hdu
  if (layout) return layout.words
  if (isMultispec(header) && apertureSolutions(header).size > 0) return 'a dispersion solution each'
  if (isOtherAxis(headers, 1) || isOtherAxis(headers, 2)) return undefined
  if (header.get('APNUM1') && header.get(`APNUM${Math.min(rows, 9)}`)) return 'extracted apertures'
  if (cardText([header], 'WAT0_001') === 'system=equispec' && header.get('APNUM1')) return 'extracted apertures'
  const others = [...file.hdus, ...(companion?.file.hdus ?? [])].filter((other) => other !== hdu)
  const hasWavelengths = others.some(
    (other) =>
      other.dimensions[0] === samples &&
      (other.dimensions.length === 1 || other.dimensions[1] === rows) &&
      isWaveName(other.name),
  )
  if (hasWavelengths) return 'wavelengths in another extension'
  const hasAxis = 'axis' in headerAxis(headers, 1, samples)
  if (!hasAxis) return undefined
  if (header.get('COEFF0') && header.get('COEFF1')) return 'a common log10 wavelength scale'
  const fibres = others.find((other) => other.rows === rows && /fib|plug|target|object|aperture|spec/i.test(other.name))
  if (fibres) return `one a row of table ${fibres.name}`
  return rows <= FEW_ROWS ? 'few rows on one wavelength axis' : undefined
}

function isWaveName(name: string): boolean {
  const role = imageRole(name)
  return name !== '' && (role === 'wavelength' || role === 'log wavelength')
}

/** One row of an image, or its first `length` samples. */
export function readRow({ container, hdu, shape }: ImageInput, at: number, length = shape.samples): Float64Array {
  return readImage(container.source, hdu, { start: at * shape.samples, count: length })
}
