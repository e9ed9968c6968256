import { requireData } from '../fits/source.ts'
import type { Hdu } from '../fits/types.ts'
import { apertureAxis, apertureSolutions, isMultispec } from './apertures.ts'
import type { Axis, AxisAnswer, Refusal } from './axis.ts'
import { cardNumber, cardText } from './cards.ts'
import type { Headers } from './cards.ts'
import { listedAxis } from './columnAxis.ts'
import { companionAxis, siblingAxis } from './companion.ts'
import { headersOf, limitNotes, placeWords, refused, room } from './container.ts'
import type { Container, HduAnswer } from './container.ts'
import type { FoundSpectrum } from './found.ts'
import { fluxUnitCard } from './fluxUnit.ts'
import { alternateAxis, headerAxis } from './headerAxis.ts'
import { imagePlanes } from './imagePlanes.ts'
import type { ImagePlanes } from './imagePlanes.ts'
import { imageRole } from './imageRole.ts'
import { imageShape, readRow, rowsEvidence, unnamedLayout } from './imageShape.ts'
import type { ImageInput, ImageShape } from './imageShape.ts'
import type { WavelengthLabel } from './medium.ts'
import { planeRole } from './planeRole.ts'
import { fibreTable, rowFacts } from './rowFacts.ts'
import { rowLayout } from './rowLayout.ts'
import type { RowLayout } from './rowLayout.ts'
import { tabulatedAxis } from './tabulatedAxis.ts'
import { uncertaintyKind } from './tablePlanes.ts'

/** Most samples of one spectrum: ten times those of the largest Fourier-transform spectrum met. */
const MOST_SAMPLES = 8_000_000

/** The spectra of an image HDU; `isFrame` when it is a 2-D picture of a detector without rows that are spectra. */
export function imageSpectra(container: Container, hdu: Hdu): HduAnswer & { readonly isFrame: boolean } {
  const headers = axisHeaders(container, hdu)
  const shape = imageShape(hdu)
  if (!shape) {
    const text = `image requires one spectral axis, got ${hdu.dimensions.join(' x ')}`
    const isCube = hdu.dimensions.filter((n) => n > 1).length > 2
    const refusal = {
      code: isCube ? 'cube' : 'no-wavelength-axis',
      message: isCube ? `${text}: a data cube` : text,
      weight: 4,
      hdu: hdu.index,
    }
    return { ...refused(refusal), isFrame: false }
  }
  if (shape.samples > MOST_SAMPLES) {
    const message = `image requires at most ${MOST_SAMPLES} samples a spectrum, got ${shape.samples}`
    return { ...refused({ code: 'too-large', message, weight: 9, hdu: hdu.index }), isFrame: false }
  }
  // Nothing is allocated for data that are not there.
  if (hdu.kind === 'image') requireData(container.source, hdu, hdu.dataByte, (Math.abs(hdu.bitpix) / 8) * shape.samples)
  const image: ImageInput = { container, hdu, headers, shape }
  const layout = shape.rows > 1 ? (rowLayout(headers, shape.rows) ?? unnamedLayout(image)) : undefined
  const why = shape.rows === 1 ? 'one row' : rowsEvidence(image, layout)
  if (why === undefined) {
    const message = `image requires rows that are spectra, got a frame of ${shape.samples} x ${shape.rows} without one dispersion solution a row`
    return { ...refused({ code: 'two-dimensional', message, weight: 4, hdu: hdu.index }), isFrame: true }
  }
  const answer = layout ? planeRows(image, layout) : apertureRows(image, why)
  return { ...answer, isFrame: false }
}

/** The headers that may give the axis: an extension takes over the primary's only when it says nothing itself. */
function axisHeaders(container: Container, hdu: Hdu): Headers {
  const headers = headersOf(container.file, hdu)
  const says = ['CRVAL1', 'CD1_1', 'CDELT1', 'COEFF0', 'CTYPE1', 'WAT0_001'].some((keyword) => hdu.header.get(keyword))
  const primary = container.file.hdus[0]
  const fits = primary.dimensions.length === 0 || primary.dimensions[0] === hdu.dimensions[0]
  return says || !fits ? [hdu.header] : headers
}

/** One spectrum whose flux, uncertainty and wavelengths are rows of one image. */
function planeRows(image: ImageInput, layout: RowLayout): HduAnswer {
  const { container, hdu, headers, shape } = image
  const at = (role: string): number => layout.roles.findIndex((found) => found === role)
  const wave = Math.max(at('wavelength'), at('log wavelength'))
  let answer: AxisAnswer
  let label: WavelengthLabel | undefined
  if (wave >= 0) {
    const name = `image row ${wave}`
    answer = listedAxis(readRow(image, wave), {
      name,
      unit: '',
      role: layout.roles[wave] ?? 'wavelength',
      keyword: 'BUNIT',
    })
    label = { name, ucd: '', utype: '' }
  } else answer = headerAxis(headers, 1, shape.samples)
  if ('refusal' in answer) return refused({ ...answer.refusal, hdu: hdu.index })
  const errors = ['sigma', 'inverse variance', 'variance', 'relative'].map(at).find((row) => row >= 0)
  const kind = errors === undefined ? undefined : uncertaintyKind(layout.roles[errors])
  const sky = at('sky')
  const notes = layout.isNamed ? [] : [{ code: 'layout-guessed', text: `${layout.words}; the file does not name them` }]
  const found: FoundSpectrum = {
    hdu: hdu.index,
    axis: answer.axis,
    ...(label ? { label } : {}),
    flux: readRow(image, at('flux')),
    fluxUnit: fluxUnitCard(headersOf(container.file, hdu)),
    ...(errors !== undefined && kind ? { uncertainty: { values: readRow(image, errors), kind } } : {}),
    ...(sky >= 0 ? { sky: readRow(image, sky) } : {}),
    headers: headersOf(container.file, hdu),
    convention: `${placeWords(hdu)}, ${layout.words}, ${answer.axis.words}`,
    notes,
  }
  return { spectra: [found], refusals: [], notes: [] }
}

function apertureRows(image: ImageInput, why: string): HduAnswer {
  const { container, hdu, shape } = image
  const spectra: FoundSpectrum[] = []
  const refusals: Refusal[] = []
  const planes = imagePlanes(container, hdu)
  const solutions = isMultispec(hdu.header) ? apertureSolutions(hdu.header) : undefined
  let shared: FoundAxis | undefined
  const fibres = fibreTable(container, hdu, shape.rows)
  const most = room(container, shape.samples)
  let row = 0
  for (; row < shape.rows && spectra.length < most; row++) {
    const answer: FoundAxis = solutions
      ? apertureAxis(hdu.header, row, solutions.get(row), shape.samples)
      : (shared ??= findAxis(image, row))
    if ('refusal' in answer) {
      refusals.push({ ...answer.refusal, hdu: answer.refusal.hdu ?? hdu.index, ...(shape.rows > 1 ? { row } : {}) })
      if (!solutions) break
      continue
    }
    if (answer.perRow) shared = undefined
    const label = answer.label ? { label: answer.label } : {}
    spectra.push(apertureRow(image, { planes, row, axis: answer.axis, why, fibres, ...label }))
  }
  return { spectra, refusals, notes: limitNotes(hdu, row, shape.rows) }
}

type FoundAxis =
  { readonly axis: Axis; readonly label?: WavelengthLabel; readonly perRow?: boolean } | { readonly refusal: Refusal }

/** An extension named for it comes first, then the image's own axis, then tables and the companion file. */
function findAxis({ container, hdu, headers, shape }: ImageInput, row: number): FoundAxis {
  const sibling = siblingAxis(container, hdu, shape.samples, row)
  if (sibling) return sibling
  const own = tabulatedAxis({ container, hdu, headers }, shape.axis, shape.samples) ?? ownAxis(headers, shape)
  if ('axis' in own) return own
  return companionAxis(container, hdu, shape.samples, row) ?? own
}

function ownAxis(headers: Headers, { axis, samples }: ImageShape): AxisAnswer {
  const plain = headerAxis(headers, axis, samples)
  return 'axis' in plain ? plain : (alternateAxis(headers, axis, samples) ?? plain)
}

function apertureRow(
  image: ImageInput,
  given: {
    planes: ImagePlanes
    row: number
    axis: Axis
    label?: WavelengthLabel
    why: string
    fibres: Hdu | undefined
  },
): FoundSpectrum {
  const { container, hdu, shape } = image
  const { planes, row, axis, label, why, fibres } = given
  const headers = headersOf(container.file, hdu)
  const length = axis.wavelength.length
  const band = (number: number): number => number * shape.rows + row
  const bands = Array.from({ length: shape.bands }, (_, i) => cardText([hdu.header], `BANDID${i + 1}`) ?? '')
  const sigmaBand = bands.findIndex((text) => /^\s*(sigma|error|uncertainty)/i.test(text))
  const skyBand = bands.findIndex((text) => /^\s*(background|sky)/i.test(text))
  const uncertainty =
    sigmaBand > 0
      ? { values: readRow(image, band(sigmaBand), length), kind: 'sigma' as const }
      : planes.uncertainty(row, shape.samples, length)
  const flags = planes.flags(row, shape.samples, length)
  const sky = skyBand > 0 ? readRow(image, band(skyBand), length) : planes.sky(row, shape.samples, length)
  const role = imageRole(hdu.name)
  const own = fibres ? rowFacts(container, fibres, row) : undefined
  const title = shape.rows > 1 ? cardText([hdu.header], `APID${row + 1}`) : undefined
  const isSky = role === 'sky' || isBackgroundBand(hdu)
  const rows = shape.rows > 1 ? `, rows are spectra (${why})` : ''
  return {
    hdu: hdu.index,
    ...(shape.rows > 1 ? { row } : {}),
    axis,
    ...(label ? { label } : {}),
    flux: readRow(image, row, length),
    fluxUnit: fluxUnitCard(headers),
    ...(role === 'normalised' ? { isNormalised: true } : {}),
    ...(uncertainty ? { uncertainty } : {}),
    ...(flags ? { flags } : {}),
    ...(sky ? { sky } : {}),
    headers,
    convention: `${placeWords(hdu)}${rows}${shape.bands > 1 ? ', bands' : ''}, ${axis.words}`,
    ...(own ? { own: own.facts } : title === undefined ? {} : { own: { object: title } }),
    ...(isSky ? { role: 'sky' as const } : own?.role ? { role: own.role } : {}),
    notes: why.startsWith('few rows')
      ? [
          {
            code: 'rows-guessed',
            text: `the ${shape.rows} rows are taken for spectra since they share a wavelength axis; the file does not say what they hold`,
          },
        ]
      : [],
  }
}

/** True for one band cut out of an extraction with several, when that band was the background. */
function isBackgroundBand(hdu: Hdu): boolean {
  if (hdu.dimensions.length > 2) return false
  const band = 1 - (cardNumber([hdu.header], 'LTV3') ?? 0)
  const text = cardText([hdu.header], `BANDID${band}`) ?? ''
  return planeRole(text.split(/[-:]/)[0]) === 'sky'
}
