const LETTERS = 'OBAFGKM'

/**
 * Subclasses that observers use, by letter. A6, A8, K6, K8 and K9 have no standards (Morgan, Keenan & Kellman 1943;
 * Keenan's revised types use K0 to K5 and K7); O and early B have half steps.
 */
const SUBCLASSES: Readonly<Record<string, readonly number[]>> = {
  O: [2, 3, 4, 5, 5.5, 6, 6.5, 7, 7.5, 8, 8.5, 9, 9.5],
  B: [0, 0.5, 1, 1.5, 2, 2.5, 3, 4, 5, 6, 7, 8, 9, 9.5],
  A: [0, 1, 2, 3, 4, 5, 7, 9],
  F: [0, 1, 2, 3, 4, 5, 6, 7, 8, 9],
  G: [0, 1, 2, 3, 4, 5, 6, 7, 8, 9],
  K: [0, 1, 2, 3, 4, 5, 7],
  M: [0, 1, 2, 3, 4, 5, 6, 7, 8, 9],
}

/** Type numbers of the types in use, increasing (O0 = 0, B0 = 10 … M9 = 69). */
export const TYPES_IN_USE: readonly number[] = [...LETTERS].flatMap((letter, i) =>
  SUBCLASSES[letter].map((subclass) => 10 * i + subclass),
)

/** The name of the type in use that lies nearest to a type number: 'G2', 'B2.5'; the earlier of two equally near. */
export function typeName(typeNumber: number): string {
  if (!Number.isFinite(typeNumber)) throw new RangeError(`typeName requires a finite number, got ${typeNumber}`)
  let best = TYPES_IN_USE[0]
  for (const type of TYPES_IN_USE) if (Math.abs(type - typeNumber) < Math.abs(best - typeNumber)) best = type
  const letter = Math.floor(best / 10)
  return `${LETTERS[letter]}${best - 10 * letter}`
}

/** What a written type says. Absent parts are undefined. */
export interface ParsedType {
  /** O0 = 0 … M9 = 69; L0 = 70. Undefined for kinds off the sequence (white dwarfs, carbon stars). */
  readonly typeNumber?: number
  /** 1 σ of the writing: 0.5 where a subclass is given, half of the span for a range ('K0-3'), 3 for a bare letter. */
  readonly typeError?: number
  /** I = 1 … V = 5; a range is its middle ('IV-V' = 4.5). */
  readonly luminosity?: number
  /** True where the sort of star is no ordinary O–M star: 'DA', 'sdB', 'C5', 'L3', 'WN6'. */
  readonly isOutside: boolean
  /** 'white dwarf', 'hot subdwarf', 'carbon', 'brown dwarf', 'metal-weak' where the name says so. */
  readonly kind?: 'white dwarf' | 'hot subdwarf' | 'carbon' | 'brown dwarf' | 'metal-weak' | 'other'
  /** The letters after the class: 'e', 'n', 'p', 'm' … */
  readonly suffix: string
}

const CLASS_NUMBERS: Readonly<Record<string, number>> = {
  '0': 1,
  'Ia+': 1,
  Ia: 1,
  Iab: 1,
  Ib: 1,
  I: 1,
  II: 2,
  III: 3,
  IV: 4,
  V: 5,
  VI: 6,
}
const ONE_CLASS = '(?:Ia\\+|Iab|Ia|Ib|III|II|IV|VI|V|I)'
const CLASS = new RegExp(`^(${ONE_CLASS})(?:\\s*[-/]\\s*(${ONE_CLASS}))?`)
const MAIN = /^([OBAFGKM])\s*(\d(?:\.\d+)?|10(?:\.0+)?)?(?:\s*[-/–]\s*([OBAFGKM])?(\d(?:\.\d+)?))?/

/**
 * The type and class that a written spectral type holds ('G2V', 'K0 III', 'B2.5 Iab', 'F5 IV-V', 'A0Vn', 'sdB', 'DA3.5');
 * undefined where the text is no spectral type. A companion after '+' is passed over.
 */
export function parseType(text: string): ParsedType | undefined {
  const plain = text.trim().replace(/[:?()[\]]/g, '')
  const [first] = plain.split(/\s*\+\s*(?=[OBAFGKMD])/)
  if (/^D[ABCOQZX]/.test(first)) return { isOutside: true, kind: 'white dwarf', suffix: '' }
  if (/^(?:sd|esd|usd)?[LTY]\d/.test(first)) return { isOutside: true, kind: 'brown dwarf', suffix: '' }
  if (/^(?:C|N|R)-?[A-Z]?\d|^C$|^CH/.test(first)) return { isOutside: true, kind: 'carbon', suffix: '' }
  if (/^(?:W[NCRO]|S\d)/.test(first)) return { isOutside: true, kind: 'other', suffix: '' }
  const dwarfWord = /^(usd|esd|sd|d|g|c)\s*(?=[OBAFGKM])/.exec(first)
  const body = dwarfWord ? first.slice(dwarfWord[0].length) : first
  if (dwarfWord && dwarfWord[1].endsWith('sd') && /^[OB]/.test(body))
    return { isOutside: true, kind: 'hot subdwarf', suffix: '' }
  return parseOrdinary(body, dwarfWord?.[1])
}

const WORD_CLASS: Readonly<Record<string, number>> = { d: 5, g: 3, c: 1 }

function parseOrdinary(body: string, word: string | undefined): ParsedType | undefined {
  const main = MAIN.exec(body)
  if (!main) return undefined
  const [whole, letter, subclass, otherLetter, otherSubclass] = main
  const rest = body.slice(whole.length).trim()
  const start = 10 * LETTERS.indexOf(letter)
  if (subclass === undefined && /^[a-z]{2,}/.test(rest)) return undefined
  let typeNumber = start + (subclass === undefined ? 4.5 : Number(subclass))
  let typeError = subclass === undefined ? 3 : 0.5
  if (subclass !== undefined && otherSubclass !== undefined) {
    const other = 10 * LETTERS.indexOf(otherLetter ?? letter) + Number(otherSubclass)
    typeError = Math.max(0.5, Math.abs(other - typeNumber) / 2)
    typeNumber = (typeNumber + other) / 2
  }
  const found = CLASS.exec(rest)
  const luminosity = found ? classNumber(found[1], found[2]) : word ? WORD_CLASS[word] : undefined
  const isWeak = word?.endsWith('sd') ?? false
  return {
    typeNumber,
    typeError,
    ...(luminosity === undefined ? {} : { luminosity }),
    isOutside: false,
    ...(isWeak ? { kind: 'metal-weak' as const } : {}),
    suffix: found ? rest.slice(found[0].length).trim() : rest,
  }
}

function classNumber(one: string, other: string | undefined): number {
  const first = CLASS_NUMBERS[one]
  return other === undefined ? first : (first + CLASS_NUMBERS[other]) / 2
}
