import type { TypePosterior } from '../typing/types.ts'

const LETTERS = 'OBAFGKM'

/** 'G2' or 'F9.5' of a type number (O0 = 0 ... M0 = 60), to half a subclass; kept within O0 and M9.5. */
export function typeWord(number: number): string {
  const half = Math.min(139, Math.max(0, Math.round(number * 2))) / 2
  const letter = Math.floor(half / 10)
  return `${LETTERS[letter]}${half - 10 * letter}`
}

/** 'G1–G3', or one type where both ends are the same. */
export function typeRange(low: number, high: number): string {
  const [first, last] = [typeWord(low), typeWord(high)]
  return first === last ? first : `${first}–${last}`
}

/** A probability as a person reads it: '62 %', '>99 %', '0.3 %', '<0.1 %'. */
export function percent(probability: number): string {
  if (probability > 0.99 && probability < 1) return '>99 %'
  if (probability >= 0.095 || probability === 0) return `${Math.round(probability * 100)} %`
  if (probability >= 0.001) return `${(probability * 100).toPrecision(1)} %`
  return '<0.1 %'
}

/** A number with as many decimals as its error asks for (two significant digits of the error). */
export function withError(value: number, error: number | undefined): string {
  if (error === undefined || !(error > 0)) return shortNumber(value)
  const decimals = Math.min(4, Math.max(0, 1 - Math.floor(Math.log10(error))))
  return `${minus(value.toFixed(decimals))} ± ${error.toFixed(decimals)}`
}

/** Three significant digits, without a trailing exponent for everyday sizes. */
export function shortNumber(value: number): string {
  const size = Math.abs(value)
  if (value === 0) return '0'
  if (size >= 1e6 || size < 1e-4) return minus(value.toExponential(2))
  return minus(size >= 1000 ? value.toFixed(0) : String(Number(value.toPrecision(3))))
}

/** A time to expose as an observer plans it: '27 s', '35 min', '12 h'. */
export function duration(seconds: number): string {
  if (seconds < 600) return `${Math.round(seconds)} s`
  if (seconds < 2 * 3600) return `${Math.ceil(seconds / 60)} min`
  const hours = seconds / 3600
  return `${hours < 10 ? Number(hours.toFixed(1)) : Math.ceil(hours)} h`
}

/** A typographic minus sign in front of a negative number. */
export const minus = (text: string): string => text.replace(/^-/, '−')

/** A number with a sign, '+1.2' or '−0.4'; what rounds to nothing has none. */
export function signed(value: number, decimals: number): string {
  const text = value.toFixed(decimals)
  if (Number(text) === 0) return text.replace('-', '')
  return (value > 0 ? '+' : '') + minus(text)
}

/** The type found in as few words as possible: 'G2 V', 'about F8–G9', 'white dwarf', 'not typed'. */
export function typeFound(type: TypePosterior): string {
  if (type.state === 'none') return 'not typed'
  if (type.state === 'outside') return type.peculiar.map((p) => p.word).join(', ') || 'no ordinary star'
  const luminosity = type.luminosityClass ? ` ${type.luminosityClass}` : ''
  if (type.state === 'wide' && type.low68 !== undefined && type.high68 !== undefined)
    return typeRange(type.low68, type.high68) + luminosity
  return `${type.spectralType ?? (type.typeNumber === undefined ? '?' : typeWord(type.typeNumber))}${luminosity}`
}

/** A feature's key as a person writes it: 'Hβ', 'Ca K', 'Fe I 5270', 'TiO 7050'. */
export { featureName as featureWord } from '../features/featureName.ts'

/** Type number of a published type that begins 'G2', 'K0.5' ...; undefined when it does not. */
export function typeNumberOf(word: string): number | undefined {
  const match = /^\s*([OBAFGKM])\s*(\d(?:\.\d+)?)/.exec(word)
  return match ? LETTERS.indexOf(match[1]) * 10 + Number(match[2]) : undefined
}
