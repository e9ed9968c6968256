/** How one aperture of a multi-spectrum image maps its pixels to wavelengths: the words of one `specN` attribute. */
export interface ApertureSolution {
  readonly aperture: number
  /** Order or fibre. */
  readonly beam: number
  readonly kind: 'none' | 'linear' | 'log10' | 'function'
  /** [Å] or log10 of it. */
  readonly first: number
  readonly step: number
  /** Number of good samples. */
  readonly samples: number
  /** Redshift that was taken out: the wavelengths are divided by 1 + z. */
  readonly redshift: number
  readonly functions: readonly DispersionFunction[]
}

/** One term of a dispersion solution: weight × (offset + W(p)). */
export interface DispersionFunction {
  readonly weight: number
  readonly offset: number
  readonly kind: 'chebyshev' | 'legendre' | 'cubic spline' | 'linear spline' | 'pixel array' | 'sampled array'
  /** Number of pieces of a spline. */
  readonly pieces: number
  readonly low: number
  readonly high: number
  readonly coefficients: Float64Array
}

const KINDS = ['none', 'linear', 'log10', 'function'] as const
const FUNCTIONS = [
  '',
  'chebyshev',
  'legendre',
  'cubic spline',
  'linear spline',
  'pixel array',
  'sampled array',
] as const

/**
 * The solution that the text of a `specN` attribute describes:
 * `aperture beam type first step samples redshift low high [weight offset function parameters]...`;
 * undefined when the text breaks off or holds what is no number.
 */
export function parseSolution(text: string): ApertureSolution | undefined {
  // Numbers may run together where a value fills its field: '-0.138356777-1.2' does not occur, '1.E3' does.
  const words = text.trim().split(/\s+/)
  const numbers = words.map((word) => (word === 'INDEF' ? 0 : Number(word.replace(/d/i, 'e'))))
  if (words.length < 6 || numbers.some((value) => !Number.isFinite(value))) return undefined
  const [aperture, beam, type, first, step, samples] = numbers
  const redshift = numbers[6] ?? 0
  if (!Number.isInteger(type) || type < -1 || type > 2 || 1 + redshift <= 0) return undefined
  const functions: DispersionFunction[] = []
  let at = 9
  while (type === 2 && at < numbers.length) {
    const term = parseFunction(numbers, at)
    if (!term) return undefined
    functions.push(term.function)
    at = term.next
  }
  if (type === 2 && functions.length === 0) return undefined
  return { aperture, beam, kind: KINDS[type + 1], first, step, samples, redshift, functions }
}

function parseFunction(
  numbers: readonly number[],
  at: number,
): { readonly function: DispersionFunction; readonly next: number } | undefined {
  const [weight, offset, type, size] = numbers.slice(at, at + 4)
  const kind = FUNCTIONS[type]
  if (!kind || !Number.isInteger(size) || size < 1) return undefined
  const isArray = type >= 5
  const count = type <= 2 ? size : type === 3 ? size + 3 : type === 4 ? size + 1 : type === 5 ? size : 2 * size
  const start = at + (isArray ? 4 : 6)
  const coefficients = Float64Array.from(numbers.slice(start, start + count))
  if (coefficients.length < count) return undefined
  const low = isArray ? 1 : numbers[at + 4]
  const high = isArray ? size : numbers[at + 5]
  if (!isArray && low === high) return undefined
  return {
    function: { weight, offset, kind, pieces: type === 3 || type === 4 ? size : 0, low, high, coefficients },
    next: start + count,
  }
}

/**
 * Wavelength [Å] that a solution gives a pixel, or NaN where it has none. Beyond the fitted range polynomials are
 * extrapolated and splines continue their last piece.
 *
 * @param pixel  physical pixel coordinate, 1 at the centre of the first pixel of the detector
 */
export function solutionWavelength(solution: ApertureSolution, pixel: number): number {
  const { kind, first, step, redshift, functions } = solution
  let wavelength = NaN
  if (kind === 'linear') wavelength = first + step * (pixel - 1)
  else if (kind === 'log10') wavelength = 10 ** (first + step * (pixel - 1))
  else if (kind === 'function') {
    wavelength = 0
    for (const term of functions) wavelength += term.weight * (term.offset + functionValue(term, pixel))
  }
  return wavelength / (1 + redshift)
}

/** W(p) of one dispersion function, without its weight and offset. */
export function functionValue(term: DispersionFunction, pixel: number): number {
  if (term.kind === 'chebyshev' || term.kind === 'legendre') return polynomialValue(term, pixel)
  if (term.kind === 'linear spline' || term.kind === 'cubic spline') return splineValue(term, pixel)
  return term.kind === 'pixel array' ? arrayValue(term.coefficients, pixel) : sampledValue(term.coefficients, pixel)
}

function polynomialValue({ kind, low, high, coefficients }: DispersionFunction, pixel: number): number {
  const x = (2 * pixel - (high + low)) / (high - low)
  let before = 1
  let current = x
  let sum = coefficients[0]
  for (let i = 1; i < coefficients.length; i++) {
    sum += coefficients[i] * current
    const next = kind === 'chebyshev' ? 2 * x * current - before : ((2 * i + 1) * x * current - i * before) / (i + 1)
    before = current
    current = next
  }
  return sum
}

function splineValue({ kind, low, high, pieces, coefficients }: DispersionFunction, pixel: number): number {
  const s = ((pixel - low) / (high - low)) * pieces
  const piece = Math.min(Math.max(Math.floor(s), 0), pieces - 1)
  const b = s - piece
  const a = 1 - b
  if (kind === 'linear spline') return coefficients[piece] * a + coefficients[piece + 1] * b
  return (
    coefficients[piece] * a ** 3 +
    coefficients[piece + 1] * (1 + 3 * a * (1 + a * b)) +
    coefficients[piece + 2] * (1 + 3 * b * (1 + a * b)) +
    coefficients[piece + 3] * b ** 3
  )
}

function arrayValue(values: Float64Array, pixel: number): number {
  if (values.length === 1) return values[0]
  const i = Math.min(Math.max(Math.floor(pixel), 1), values.length - 1)
  return values[i - 1] + (values[i] - values[i - 1]) * (pixel - i)
}

function sampledValue(pairs: Float64Array, pixel: number): number {
  const count = pairs.length / 2
  if (count === 1) return pairs[1]
  let i = 0
  while (i < count - 2 && pixel > pairs[2 * (i + 1)]) i++
  const [x0, y0, x1, y1] = pairs.subarray(2 * i, 2 * i + 4)
  return y0 + ((y1 - y0) * (pixel - x0)) / (x1 - x0)
}
