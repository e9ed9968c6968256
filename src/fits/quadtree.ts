import { FormatError } from '../errors.ts'

/** Bits of a code, read from the most significant down. */
export interface BitReader {
  bits(count: number): number
  /** Goes on at the next whole byte. */
  align(): void
}

/** A reader of bits from a byte on. Throws FormatError 'compression' past the end. */
export function bitReader(code: Uint8Array, start: number): BitReader {
  let at = start
  let buffer = 0
  let held = 0
  return {
    bits(count) {
      while (held < count) {
        if (at >= code.length) {
          throw new FormatError('compression', `code requires more than ${code.length} bytes, got the end of the tile`)
        }
        buffer = ((buffer << 8) | (code[at++] as number)) & 0xffffff
        held += 8
      }
      held -= count
      return (buffer >> held) & ((1 << count) - 1)
    },
    align() {
      held = 0
    },
  }
}

/** Values of the prefix code by the number of bits (FITS 4.0, section 10.4.4; White 1992). */
const THREE = [1, 2, 4, 8]
const FOUR: Readonly<Record<number, number>> = { 8: 3, 9: 5, 10: 10, 11: 12, 12: 15 }
const FIVE: Readonly<Record<number, number>> = { 26: 6, 27: 7, 28: 9, 29: 11, 30: 13 }
const SIX_ZERO = 62
const LAST = 14

function prefixCoded(reader: BitReader): number {
  let code = reader.bits(3)
  if (code < THREE.length) return THREE[code] as number
  code = (code << 1) | reader.bits(1)
  const four = FOUR[code]
  if (four !== undefined) return four
  code = (code << 1) | reader.bits(1)
  const five = FIVE[code]
  if (five !== undefined) return five
  code = (code << 1) | reader.bits(1)
  return code === SIX_ZERO ? 0 : LAST
}

/** A rectangle of an array of coefficients: where it begins, the array's row length, its height and width. */
export interface Quadrant {
  readonly first: number
  readonly stride: number
  readonly height: number
  readonly width: number
}

const PLAIN = 0
const QUADTREE = 0xf

/**
 * Adds the bit planes of one quadrant to the coefficients: each plane is written plainly, four pixels a nybble, or as a
 * quadtree whose nodes tell which of their four parts hold a bit.
 */
export function addBitPlanes(reader: BitReader, out: Float64Array, quadrant: Quadrant, planes: number): void {
  const { height, width } = quadrant
  const rows = (height + 1) >> 1
  const columns = (width + 1) >> 1
  const levels = Math.ceil(Math.log2(Math.max(height, width, 1)))
  for (let plane = planes - 1; plane >= 0; plane--) {
    const form = reader.bits(4)
    let nodes: Uint8Array
    if (form === PLAIN) nodes = Uint8Array.from({ length: rows * columns }, () => reader.bits(4))
    else if (form === QUADTREE) nodes = quadtree(reader, height, width, levels)
    else throw new FormatError('compression', `bit plane requires form 0 or 15, got ${form}`)
    insertBits(nodes, out, quadrant, 2 ** plane)
  }
}

function quadtree(reader: BitReader, height: number, width: number, levels: number): Uint8Array {
  let nodes: Uint8Array = Uint8Array.of(prefixCoded(reader))
  for (let level = levels - 1; level >= 1; level--) {
    const rows = Math.ceil(height / 2 ** level)
    const columns = Math.ceil(width / 2 ** level)
    nodes = expanded(nodes, rows, columns)
    for (let i = nodes.length - 1; i >= 0; i--) if (nodes[i] !== 0) nodes[i] = prefixCoded(reader)
  }
  return nodes
}

/** Nodes of the next level: 1 where a node says that its part holds a bit. */
function expanded(nodes: Uint8Array, rows: number, columns: number): Uint8Array {
  const parents = (columns + 1) >> 1
  const out = new Uint8Array(rows * columns)
  for (let y = 0; y < rows; y++) {
    for (let x = 0; x < columns; x++) {
      const node = nodes[(y >> 1) * parents + (x >> 1)] as number
      out[y * columns + x] = (node >> (3 - 2 * (y & 1) - (x & 1))) & 1
    }
  }
  return out
}

function insertBits(
  nodes: Uint8Array,
  out: Float64Array,
  { first, stride, height, width }: Quadrant,
  bit: number,
): void {
  const columns = (width + 1) >> 1
  for (let y = 0; y < height; y++) {
    const row = first + y * stride
    for (let x = 0; x < width; x++) {
      const node = nodes[(y >> 1) * columns + (x >> 1)] as number
      if ((node >> (3 - 2 * (y & 1) - (x & 1))) & 1) out[row + x] = (out[row + x] as number) + bit
    }
  }
}
