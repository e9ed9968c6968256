import { BLOCK_SIZE } from './card.ts'
import { readHeader } from './header.ts'
import { hduOf } from './hdu.ts'
import { memorySource } from './source.ts'
import { textOf } from './text.ts'
import { FormatError } from '../errors.ts'

/**
 * A function that, given the bytes known so far from the start of a file, says how many must be known before it can
 * say more: the end of the HDU under way, a longer header, or Infinity when nothing that follows can be wanted.
 * It walks on from where it was.
 */
export function announcedSize(): (known: Uint8Array) => number {
  let start = 0
  let index = 0
  return (known) => {
    for (;;) {
      if (known.length < start + BLOCK_SIZE) return start + BLOCK_SIZE
      const first = textOf(known, start, start + 9).toUpperCase()
      if (!first.startsWith(index === 0 ? 'SIMPLE' : 'XTENSION=')) return Infinity
      try {
        const { header, size } = readHeader(memorySource(known), start, index)
        const hdu = hduOf(header, { index, headerByte: start, dataByte: start + size }, [])
        start = hdu.dataByte + Math.ceil(hdu.dataSize / BLOCK_SIZE) * BLOCK_SIZE
        index++
      } catch (error) {
        if (!(error instanceof FormatError) || error.code !== 'truncated-header') return Infinity
        return known.length + Math.max(BLOCK_SIZE, known.length - start)
      }
    }
  }
}
