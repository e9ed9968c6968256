/** MJD of 1970-01-01, where the time of the language begins. */
const MJD_1970 = 40587
const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
]

const dateOf = (mjd: number): Date => new Date(Math.round((mjd - MJD_1970) * 86_400_000))

/** '2026-11-30 03:21' of a Modified Julian Date, UTC, to the nearest minute. */
export function dateAndTime(mjd: number): string {
  return dateOf(mjd + 0.5 / 1440)
    .toISOString()
    .slice(0, 16)
    .replace('T', ' ')
}

/** '03:21' of a Modified Julian Date, UTC. */
export function clockTime(mjd: number): string {
  return dateAndTime(mjd).slice(11)
}

/** '29 to 30 November 2026' of the first and last time of a night, UTC; one date where both fall on it. */
export function nightDates(first: number, last: number): string {
  const [a, b] = [dateOf(first), dateOf(last)]
  const full = (d: Date): string => `${d.getUTCDate()} ${MONTHS[d.getUTCMonth()]} ${d.getUTCFullYear()}`
  if (full(a) === full(b)) return full(a)
  if (a.getUTCFullYear() !== b.getUTCFullYear()) return `${full(a)} to ${full(b)}`
  if (a.getUTCMonth() !== b.getUTCMonth()) return `${a.getUTCDate()} ${MONTHS[a.getUTCMonth()]} to ${full(b)}`
  return `${a.getUTCDate()} to ${full(b)}`
}
