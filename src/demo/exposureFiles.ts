import { gzipSync } from 'node:zlib'
import { DEMO_INSTRUMENT, DEMO_SETUPS } from '../tables/demoNight.ts'
import type { DemoForm, DemoSetupName } from '../tables/demoNight.ts'
import { airToVacuum } from '../spectrum/air.ts'
import { fitsBytes } from './fitsBytes.ts'
import type { MadeCard } from './headers.ts'
import type { QuickLook } from './quickLook.ts'

/** A file of the demo night; `path` is below the night's folder, with '/' between folders. */
export interface DemoFile {
  readonly path: string
  readonly bytes: Uint8Array
}

/** Bytes of a raw frame: unsigned 16-bit counts in the primary image, dispersion along the rows. */
export function rawFile(counts: Float64Array, cards: readonly MadeCard[]): Uint8Array {
  const { width, height, saturation } = DEMO_INSTRUMENT
  return fitsBytes([
    {
      cards: [...cards, ['BUNIT', 'adu'], ['SATURATE', saturation, '[adu]'], ['DISPAXIS', 1, 'dispersion along rows']],
      image: { bitpix: 16, dimensions: [width, height], values: counts, zero: 32768 },
    },
  ])
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
  const { step, fwhm } = DEMO_SETUPS[setup]
  const shared: MadeCard[] = [
    ...cards,
    ['SPECSYS', 'TOPOCENT', 'no velocity taken out'],
    ['FWHM_A', fwhm, '[Angstrom] width of arc lines'],
    ['SATURATE', Number(look.ceiling.toFixed(0)), '[adu] extracted counts at saturation'],
  ]
  if (form === 'image' || form === 'image with sigma') {
    const axis: MadeCard[] = [
      ['CTYPE1', 'AWAV', 'wavelength in air'],
      ['CUNIT1', 'Angstrom'],
      ['CRPIX1', 1],
      ['CRVAL1', look.wavelength[0]],
      ['CDELT1', step],
    ]
    const plane = (values: Float64Array) => ({ bitpix: -32 as const, dimensions: [values.length], values })
    const primary = { cards: [...shared, ['BUNIT', 'adu'] as const, ...axis], image: plane(look.flux) }
    if (form === 'image') return fitsBytes([primary])
    const extension = (name: string, values: Float64Array) => ({
      cards: [['EXTNAME', name] as const, ['BUNIT', 'adu'] as const, ...axis],
      image: plane(values),
    })
    return fitsBytes([primary, extension('SIGMA', look.sigma), extension('SKY', look.sky)])
  }
  const inVacuum = form === 'vacuum table'
  const wavelength = inVacuum ? look.wavelength.map((x) => airToVacuum(x)) : look.wavelength
  const bytes = fitsBytes([
    { cards: shared },
    {
      cards: [
        ['EXTNAME', 'SPECTRUM'],
        ['VACUUM', inVacuum, 'wavelengths in vacuum'],
      ],
      columns: [
        {
          name: 'WAVELENGTH',
          letter: 'D',
          unit: 'Angstrom',
          ucd: inVacuum ? 'em.wl' : 'em.wl;obs.atmos',
          values: wavelength,
        },
        { name: 'FLUX', letter: 'E', unit: 'adu', values: look.flux },
        { name: 'SIGMA', letter: 'E', unit: 'adu', values: look.sigma },
        { name: 'SKY', letter: 'E', unit: 'adu', values: look.sky },
      ],
    },
  ])
  return form === 'gzip' ? new Uint8Array(gzipSync(bytes, { level: 9 })) : bytes
}
