import { sexagesimal } from './angle.ts'

/** Days from 1858-11-17 (MJD 0) to 1970-01-01. */
const MJD_OF_1970 = 40587

/** Modified Julian date of a calendar date (Gregorian) and seconds of its day; undefined for a date that does not exist. */
export function mjdOf(year: number, month: number, day: number, seconds = 0): number | undefined {
  const time = Date.UTC(year, month - 1, day)
  const back = new Date(time)
  if (back.getUTCFullYear() !== year || back.getUTCMonth() !== month - 1 || back.getUTCDate() !== day) return undefined
  return MJD_OF_1970 + time / 86_400_000 + seconds / 86400
}

/** A date as text means it: the MJD of its start, and whether it has a time of day of its own. */
export interface ParsedDate {
  readonly mjd: number
  readonly hasTime: boolean
}

/**
 * The date that a card's text means: 'YYYY-MM-DDThh:mm:ss.s' (FITS 4.0, section 9.1), with a blank instead of the T,
 * 'YYYY-MM-DD', 'YYYY/MM/DD', 'YYYY:MM:DD', 'YYYYMMDD', and 'DD/MM/YY' for the years 1900 to 1999; undefined for
 * other text and for dates that do not exist.
 */
export function parseDate(text: string): ParsedDate | undefined {
  const clean = text.trim().replace(/\s*(Z|UTC?|\+00:00)$/i, '')
  const iso = /^([+-]?\d{4})[-/:.](\d{1,2})[-/:.](\d{1,2})(?:[T ]\s*(.+))?$/i.exec(clean)
  if (iso) return dated(Number(iso[1]), Number(iso[2]), Number(iso[3]), iso[4])
  const packed = /^(\d{4})(\d{2})(\d{2})(?:[T ](.+))?$/.exec(clean)
  if (packed) return dated(Number(packed[1]), Number(packed[2]), Number(packed[3]), packed[4])
  const old = /^(\d{1,2})[/-](\d{1,2})[/-](\d{2}|\d{4})$/.exec(clean)
  if (!old) return undefined
  const year = old[3].length === 2 ? 1900 + Number(old[3]) : Number(old[3])
  return dated(year, Number(old[2]), Number(old[1]), undefined)
}

function dated(year: number, month: number, day: number, time: string | undefined): ParsedDate | undefined {
  const seconds = time === undefined ? 0 : secondsOfDay(time)
  if (seconds === undefined || year < 1850 || year > 2200) return undefined
  const mjd = mjdOf(year, month, day, seconds)
  return mjd === undefined ? undefined : { mjd, hasTime: time !== undefined }
}

/** Seconds of the day of 'hh:mm:ss.s', 'hh:mm' or a number of seconds; undefined for what is no time of day. */
export function secondsOfDay(value: string | number): number | undefined {
  if (typeof value === 'number') return value >= 0 && value <= 86400 ? value : undefined
  const text = value.trim().replace(/\s*(Z|UTC?)$/i, '')
  const hours = sexagesimal(text)
  if (hours !== undefined) return hours >= 0 && hours < 24.001 ? hours * 3600 : undefined
  const number = /^\d+(\.\d*)?$/.test(text) ? Number(text) : NaN
  return number >= 0 && number <= 86400 ? number : undefined
}
