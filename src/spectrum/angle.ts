const SEXAGESIMAL =
  /^\s*([+-]?)\s*(\d{1,3})\s*(?:[:hdH°]|\s)\s*(\d{1,2})\s*(?:[:m'M]|\s|$)\s*(\d{1,2}(?:\.\d*)?)?\s*(?:s|"|'')?\s*$/

/** The number that sexagesimal text means ('05:23:25.1', '-00 03 10', '12h30m'); undefined when the text is none. */
export function sexagesimal(text: string): number | undefined {
  const match = SEXAGESIMAL.exec(text)
  if (!match) return undefined
  const [, sign, whole, minutes, seconds = '0'] = match
  if (Number(minutes) >= 60 || Number(seconds) > 60) return undefined
  const size = Number(whole) + Number(minutes) / 60 + Number(seconds) / 3600
  return sign === '-' ? -size : size
}

/** The number that packed digits mean: 130836.9 is 13:08:36.9. */
export function packedSexagesimal(value: number): number | undefined {
  const size = Math.abs(value)
  const whole = Math.floor(size / 10000)
  const minutes = Math.floor((size - whole * 10000) / 100)
  const seconds = size - whole * 10000 - minutes * 100
  if (minutes >= 60 || seconds >= 60) return undefined
  return Math.sign(value) * (whole + minutes / 60 + seconds / 3600)
}

/** An angle as a card gives it, in degrees, with a word on what was judged. */
export interface JudgedAngle {
  readonly degrees: number
  /** How the unit was judged when the card does not say: 'hours by its form', 'radians by its comment' ... */
  readonly judged?: string
}

/**
 * Right ascension in degrees of a card: sexagesimal text is in hours, a plain number in degrees, unless its comment
 * names another unit or repeats the value in hours. Undefined when the value is no angle.
 */
export function rightAscension(value: unknown, comment: string): JudgedAngle | undefined {
  const text = typeof value === 'string' ? sexagesimal(value) : undefined
  const saysDegrees = /\bdeg(ree)?s?\b|\[d\]/i.test(comment)
  if (text !== undefined) {
    // Above 24 the text can only be degrees; hours is the custom below.
    const isDegrees = Math.abs(text) >= 24
    return isDegrees ? { degrees: text, judged: 'sexagesimal degrees, since above 24' } : { degrees: text * 15 }
  }
  const number = plainNumber(value)
  if (number === undefined) return undefined
  if (/radian/i.test(comment)) return { degrees: (number * 180) / Math.PI, judged: 'radians by its comment' }
  const repeated = /(?:^|[^\d.])(\d{1,2}[: ]\d{1,2}[: ]\d{1,2}(?:\.\d*)?)/.exec(comment)
  const hours = repeated ? sexagesimal(repeated[1]) : undefined
  if (hours !== undefined && Math.abs(hours - number) < 0.01 && Math.abs(hours * 15 - number) > 0.01)
    return { degrees: number * 15, judged: 'hours, since its comment repeats them' }
  if (/\bhours?\b|\bhrs?\b|\[h\]/i.test(comment) && !saysDegrees && number >= 0 && number < 24)
    return { degrees: number * 15, judged: 'hours by its comment' }
  return { degrees: number }
}

/** Declination (or another angle) in degrees of a card: sexagesimal text or a number, radians where the comment says so. */
export function angleDegrees(value: unknown, comment: string): JudgedAngle | undefined {
  const text = typeof value === 'string' ? sexagesimal(value) : undefined
  if (text !== undefined) return { degrees: text }
  const number = plainNumber(value)
  if (number === undefined) return undefined
  if (/radian/i.test(comment)) return { degrees: (number * 180) / Math.PI, judged: 'radians by its comment' }
  return { degrees: number }
}

function plainNumber(value: unknown): number | undefined {
  if (typeof value === 'number') return Number.isFinite(value) ? value : undefined
  if (typeof value === 'bigint') return Number(value)
  if (typeof value !== 'string' || !/^\s*[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?\s*$/i.test(value)) return undefined
  return Number(value)
}
