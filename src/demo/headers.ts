import { DEMO_INSTRUMENT, DEMO_SETUPS, DEMO_SITE } from '../tables/demoNight.ts'
import type { DemoPointing } from './pointing.ts'
import type { DemoExposure } from './schedule.ts'
import { isoTime } from './schedule.ts'

/** A header card to be written: keyword, value, comment. */
export type MadeCard = readonly [keyword: string, value: string | number | boolean, comment?: string]

/** Rounded so that a card holds the same digits on every machine. */
function rounded(value: number, digits: number): number {
  return Number(value.toFixed(digits))
}

/** Degrees as 'hh:mm:ss.ss' (divided by 15) or '±dd:mm:ss.s'. */
export function sexagesimal(degrees: number, kind: 'hours' | 'degrees'): string {
  const digits = kind === 'hours' ? 2 : 1
  const scale = 10 ** digits
  const total = Math.round(Math.abs(kind === 'hours' ? degrees / 15 : degrees) * 3600 * scale)
  const seconds = ((total / scale) % 60).toFixed(digits).padStart(3 + digits, '0')
  const minutes = String(Math.floor(total / (60 * scale)) % 60).padStart(2, '0')
  const whole = String(Math.floor(total / (3600 * scale))).padStart(2, '0')
  return `${kind === 'degrees' ? (degrees < 0 ? '-' : '+') : ''}${whole}:${minutes}:${seconds}`
}

/** Words of the header for each kind of step. */
const IMAGE_TYPES = {
  bias: 'bias',
  dark: 'dark',
  flat: 'flat',
  skyflat: 'sky flat',
  arc: 'arc',
  focus: 'focus',
  acquisition: 'acquisition',
  standard: 'standard',
  science: 'science',
} as const

/**
 * Cards that the frames and the quick-look spectra of an exposure share.
 *
 * @param clockError  days by which the clock of the header is off
 */
export function exposureCards(exposure: DemoExposure, pointing: DemoPointing | undefined, clockError = 0): MadeCard[] {
  const { step, star, number } = exposure
  const setup = DEMO_SETUPS[step.setup]
  const mjd = exposure.mjdStart + clockError
  const noGrating = step.kind === 'acquisition' || step.kind === 'focus'
  const lamp = step.kind === 'arc' ? setup.lamp : step.kind === 'flat' ? 'tungsten' : undefined
  return [
    [
      'OBJECT',
      star && step.kind !== 'acquisition' ? star.name : star ? `acq ${star.name}` : IMAGE_TYPES[step.kind],
      'as typed by the observer',
    ],
    ['IMAGETYP', IMAGE_TYPES[step.kind], 'kind of exposure'],
    ['DATE-OBS', isoTime(mjd), 'UTC at start of exposure'],
    ['TIMESYS', 'UTC'],
    ['MJD-OBS', rounded(mjd, 6), 'the same as Modified Julian Date'],
    ['EXPTIME', step.exposure, '[s]'],
    ...(pointing
      ? ([
          ['RA', sexagesimal(pointing.ra, 'hours'), '[h] right ascension'],
          ['DEC', sexagesimal(pointing.dec, 'degrees'), '[deg] declination'],
          ['RADESYS', 'ICRS'],
          ['EQUINOX', 2000],
          ['AIRMASS', rounded(pointing.airmass, 3), 'at mid-exposure'],
          ['HA', sexagesimalHourAngle(pointing.hourAngle), '[h] hour angle at mid-exposure'],
        ] satisfies MadeCard[])
      : []),
    ['OBSERVAT', DEMO_SITE.observatory, 'invented'],
    ['TELESCOP', DEMO_SITE.telescope],
    ['INSTRUME', DEMO_INSTRUMENT.name],
    ['DETECTOR', DEMO_INSTRUMENT.detector],
    ['OBSERVER', DEMO_SITE.observer],
    ['SITELAT', DEMO_SITE.latitude, '[deg] north positive'],
    ['SITELONG', DEMO_SITE.longitude, '[deg] east positive'],
    ['SITEELEV', DEMO_SITE.height, '[m]'],
    ['GRATING', noGrating ? 'mirror' : setup.grating],
    ...(noGrating ? [] : ([['GRTILT', setup.tilt, '[deg] grating tilt']] satisfies MadeCard[])),
    ['FILTER', noGrating ? 'open' : setup.filter],
    ['SLIT', noGrating ? 'open' : setup.slit, '[arcsec] width'],
    ...(lamp === undefined ? [] : ([['LAMP', lamp]] satisfies MadeCard[])),
    ['CCDSUM', '1 1', 'binning'],
    ['GAIN', DEMO_INSTRUMENT.gain, '[electron/adu]'],
    ['RDNOISE', DEMO_INSTRUMENT.readNoise, '[electron]'],
    ['FRAMENO', number, 'number of the exposure'],
    ['ORIGIN', 'darkline demo', 'invented data'],
  ]
}

/** An hour angle in degrees as '±hh:mm:ss.ss', west positive. */
function sexagesimalHourAngle(degrees: number): string {
  return `${degrees < 0 ? '-' : '+'}${sexagesimal(Math.abs(degrees), 'hours')}`
}
