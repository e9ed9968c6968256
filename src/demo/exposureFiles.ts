import { gzipSync } from 'node:zlib'
import { DEMO_INSTRUMENT, DEMO_SETUPS } from '../tables/demoNight.ts'
import type { DemoForm, DemoSetupName } from '../tables/demoNight.ts'
import { encodeFits } from '../fits/write.ts'
import type { FitsCardInput } from '../fits/writeCard.ts'
import { airToVacuum } from '../spectrum/air.ts'
import type { MadeCard } from './headers.ts'
import type { QuickLook } from './quickLook.ts'

/** A file of the demo night; `path` is below the night's folder, with '/' between folders. */
export interface DemoFile {
  readonly path: string
  readonly bytes: Uint8Array
}

function written(cards: readonly MadeCard[]): readonly FitsCardInput[] {
  return cards.map(([keyword, value, comment]) => ({ keyword, value, ...(comment === undefined ? {} : { comment }) }))
}

/** Bytes of a raw frame: unsigned 16-bit counts in the primary image, dispersion along the rows. */
export function rawFile(counts: Float64Array, cards: readonly MadeCard[]): Uint8Array {
  const { width, height, saturation } = DEMO_INSTRUMENT
  const own: readonly MadeCard[] = [
    ...cards,
    ['BUNIT', 'adu'],
    ['SATURATE', saturation, '[adu]'],
    ['DISPAXIS', 1, 'dispersion along rows'],
  ]
  const image = { kind: 'image', bitpix: 16, dimensions: [width, height], values: counts, zero: 32768 } as const
  return encodeFits([{ ...image, cards: written(own) }])
}

/** Name of a quick-look file by its form. */
export function quickLookName(number: number, setup: DemoSetupName, form: DemoForm): string {
  return `quicklook/vs${String(number).padStart(4, '0')}_${setup}.fits${form === 'gzip' ? '.gz' : ''}`
}

/** Bytes of a quick-look spectrum in one of the forms of the demo night. */
export function quickLookFile(
  look: QuickLook,
  setup: DemoSetupName,
  form: DemoForm,
  cards: readonly MadeCard[],
): Uint8Array {
  const shared: readonly MadeCard[] = [
    ...cards,
    ['SPECSYS', 'TOPOCENT', 'no velocity taken out'],
    ['WAVRESOL', DEMO_SETUPS[setup].fwhm, '[Angstrom] width of arc lines'],
    ['SATURATE', Number(look.ceiling.toFixed(0)), '[adu] extracted counts at saturation'],
  ]
  if (form === 'image' || form === 'image with sigma') return imageFile(look, setup, form, shared)
  const bytes = tableFile(look, form === 'vacuum table', shared)
  return form === 'gzip' ? new Uint8Array(gzipSync(bytes, { level: 9 })) : bytes
}

function imageFile(
  look: QuickLook,
  setup: DemoSetupName,
  form: 'image' | 'image with sigma',
  shared: readonly MadeCard[],
): Uint8Array {
  const axis: readonly MadeCard[] = [
    ['BUNIT', 'adu'],
    ['CTYPE1', 'AWAV', 'wavelength in air'],
    ['CUNIT1', 'Angstrom'],
    ['CRPIX1', 1],
    ['CRVAL1', look.wavelength[0]],
    ['CDELT1', DEMO_SETUPS[setup].step],
  ]
  const plane = (values: Float64Array, cards: readonly MadeCard[], name?: string) =>
    ({
      kind: 'image',
      bitpix: -32,
      dimensions: [values.length],
      values,
      cards: written(cards),
      ...(name === undefined ? {} : { name }),
    }) as const
  const primary = plane(look.flux, [...shared, ...axis])
  if (form === 'image') return encodeFits([primary])
  return encodeFits([primary, plane(look.sigma, axis, 'SIGMA'), plane(look.sky, axis, 'SKY')])
}

function tableFile(look: QuickLook, inVacuum: boolean, shared: readonly MadeCard[]): Uint8Array {
  const wavelength = {
    name: 'WAVELENGTH',
    letter: 'D',
    unit: 'Angstrom',
    ucd: inVacuum ? 'em.wl' : 'em.wl;obs.atmos',
    values: inVacuum ? look.wavelength.map((x) => airToVacuum(x)) : look.wavelength,
  } as const
  const counts = (name: string, values: Float64Array) => ({ name, letter: 'E', unit: 'adu', values }) as const
  return encodeFits([
    { kind: 'image', bitpix: 8, dimensions: [], cards: written(shared) },
    {
      kind: 'table',
      name: 'SPECTRUM',
      rows: look.flux.length,
      columns: [wavelength, counts('FLUX', look.flux), counts('SIGMA', look.sigma), counts('SKY', look.sky)],
      cards: written([['VACUUM', inVacuum, 'wavelengths in vacuum']]),
    },
  ])
}
