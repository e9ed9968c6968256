import type { ByteSource, FitsFault, Hdu } from './types.ts'

const LINE_FEED = 10
const CARRIAGE_RETURN = 13

/** Line feeds that must all follow a carriage return: by chance one in 256 does, so three are one in 16 million. */
const FEWEST = 3
const MOST_BYTES = 4 << 20

/**
 * The fault of data whose bytes 0x0A were all turned into 0x0D 0x0A, as copying a file as text does; undefined
 * otherwise. Worth asking only of a file that is longer than its HDUs by less than a block.
 */
export function lineEndFault(source: ByteSource, hdu: Hdu): FitsFault | undefined {
  const length = Math.min(hdu.dataSize, source.size - hdu.dataByte, MOST_BYTES)
  if (length <= 0) return undefined
  const bytes = source.read(hdu.dataByte, length)
  let feeds = 0
  for (let i = 0; i < bytes.length; i++) {
    if (bytes[i] !== LINE_FEED) continue
    if (i === 0 || bytes[i - 1] !== CARRIAGE_RETURN) return undefined
    feeds++
  }
  if (feeds < FEWEST) return undefined
  const message = `data require bytes as they were written, got a carriage return before each of ${feeds} line feeds, as copying as text puts there`
  return { code: 'copied-as-text', message }
}
