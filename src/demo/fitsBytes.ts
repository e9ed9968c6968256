import type { MadeCard } from './headers.ts'

/** A column of a table to be written: one number a row. */
export interface MadeColumn {
  readonly name: string
  readonly letter: 'D' | 'E'
  readonly unit: string
  readonly ucd?: string
  readonly values: Float64Array
}

/** An image to be written; `zero` is taken off before storing (BZERO). */
export interface MadeImage {
  readonly bitpix: 16 | -32
  readonly dimensions: readonly number[]
  readonly values: Float64Array
  readonly zero?: number
}

/** An HDU to be written: an image, a table, or a header alone. */
export interface MadeHdu {
  readonly cards: readonly MadeCard[]
  readonly image?: MadeImage
  readonly columns?: readonly MadeColumn[]
}

const BLOCK = 2880
const BYTES = { D: 8, E: 4 } as const

function cardText(keyword: string, value: MadeCard[1], comment?: string): string {
  const text =
    typeof value === 'string'
      ? `'${value.replaceAll("'", "''").padEnd(8)}'`.padEnd(20)
      : (typeof value === 'boolean' ? (value ? 'T' : 'F') : String(value)).padStart(20)
  return `${keyword.padEnd(8)}= ${text}${comment === undefined ? '' : ` / ${comment}`}`.slice(0, 80).padEnd(80)
}

function structure({ image, columns }: MadeHdu, isPrimary: boolean): MadeCard[] {
  if (columns) {
    const width = columns.reduce((sum, { letter }) => sum + BYTES[letter], 0)
    return [
      ['XTENSION', 'BINTABLE'],
      ['BITPIX', 8],
      ['NAXIS', 2],
      ['NAXIS1', width],
      ['NAXIS2', columns[0].values.length],
      ['PCOUNT', 0],
      ['GCOUNT', 1],
      ['TFIELDS', columns.length],
      ...columns.flatMap(({ name, letter, unit, ucd }, i): MadeCard[] => [
        [`TTYPE${i + 1}`, name],
        [`TFORM${i + 1}`, letter],
        [`TUNIT${i + 1}`, unit],
        ...(ucd === undefined ? [] : [[`TUCD${i + 1}`, ucd] as const]),
      ]),
    ]
  }
  const { bitpix = 8, dimensions = [], zero } = image ?? {}
  return [
    isPrimary ? ['SIMPLE', true] : ['XTENSION', 'IMAGE'],
    ['BITPIX', bitpix],
    ['NAXIS', dimensions.length],
    ...dimensions.map((length, i): MadeCard => [`NAXIS${i + 1}`, length]),
    ...(isPrimary
      ? ([['EXTEND', true]] as const)
      : ([
          ['PCOUNT', 0],
          ['GCOUNT', 1],
        ] as const)),
    ...(zero === undefined
      ? []
      : ([
          ['BSCALE', 1],
          ['BZERO', zero],
        ] as const)),
  ]
}

function dataBytes({ image, columns }: MadeHdu): Uint8Array {
  if (image) {
    const { values, bitpix, zero = 0 } = image
    const view = new DataView(new ArrayBuffer((values.length * Math.abs(bitpix)) / 8))
    values.forEach((value, i) => (bitpix === 16 ? view.setInt16(2 * i, value - zero) : view.setFloat32(4 * i, value)))
    return new Uint8Array(view.buffer)
  }
  if (!columns) return new Uint8Array(0)
  const width = columns.reduce((sum, { letter }) => sum + BYTES[letter], 0)
  const view = new DataView(new ArrayBuffer(columns[0].values.length * width))
  let byte = 0
  for (let row = 0; row < columns[0].values.length; row++) {
    for (const { letter, values } of columns) {
      if (letter === 'D') view.setFloat64(byte, values[row])
      else view.setFloat32(byte, values[row])
      byte += BYTES[letter]
    }
  }
  return new Uint8Array(view.buffer)
}

function padded(bytes: Uint8Array, fill: number): Uint8Array {
  const out = new Uint8Array(Math.ceil(bytes.length / BLOCK) * BLOCK).fill(fill)
  out.set(bytes)
  return out
}

/** Bytes of a FITS file of these HDUs. */
export function fitsBytes(hdus: readonly MadeHdu[]): Uint8Array {
  const parts = hdus.flatMap((hdu, i) => {
    const cards = [...structure(hdu, i === 0), ...hdu.cards].map(([keyword, value, comment]) =>
      cardText(keyword, value, comment),
    )
    const header = new TextEncoder().encode([...cards, 'END'.padEnd(80)].join(''))
    return [padded(header, 0x20), padded(dataBytes(hdu), 0)]
  })
  const out = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0))
  let byte = 0
  for (const part of parts) {
    out.set(part, byte)
    byte += part.length
  }
  return out
}
