import { FormatError } from '../errors.ts'
import { BLOCK_SIZE } from './card.ts'
import { hduOf } from './hdu.ts'
import { readHeader } from './header.ts'
import { lineEndFault } from './lineEnds.ts'
import { requireFits } from './signature.ts'
import { textOf } from './text.ts'
import type { ByteSource, FitsFile, FitsNote, Hdu } from './types.ts'

/** HDUs above which the walk ends with a note; files met hold some thousands at most. */
const MOST_HDUS = 100_000

/**
 * The HDUs of a FITS file, found by headers alone. A last HDU that is cut off, bytes after the last HDU and missing
 * padding leave the rest whole and are noted; data that are not there are refused when somebody reads them.
 *
 * @throws FormatError 'not-fits' when the file does not begin as FITS; 'truncated-header', 'header-without-end',
 *   'bitpix', 'naxis' or 'too-large' when the first header cannot be understood
 */
export function openFits(source: ByteSource): FitsFile {
  requireFits(source)
  const hdus: Hdu[] = []
  const notes: FitsNote[] = [...(source.notes ?? [])]
  let at = 0
  while (at < source.size) {
    const index = hdus.length
    if (index > 0 && !beginsExtension(source, at)) {
      notes.push(leftover(source, at))
      break
    }
    if (index >= MOST_HDUS) {
      notes.push({ code: 'too-many-hdus', text: `reading stops after ${MOST_HDUS} HDUs at byte ${at}` })
      break
    }
    let hdu: Hdu
    try {
      const { header, size, notes: found } = readHeader(source, at, index)
      hdu = hduOf(header, { index, headerByte: at, dataByte: at + size }, found)
    } catch (error) {
      if (index === 0 || !(error instanceof FormatError)) throw error
      notes.push({ code: error.code, text: `HDU ${index} at byte ${at} cannot be read: ${error.message}` })
      break
    }
    const end = hdu.dataByte + hdu.dataSize
    hdus.push(end > source.size ? { ...hdu, notes: [...hdu.notes, cutNote(hdu, source.size)] } : hdu)
    at = hdu.dataByte + Math.ceil(hdu.dataSize / BLOCK_SIZE) * BLOCK_SIZE
    if (at > source.size && end <= source.size) {
      notes.push({
        code: 'no-padding',
        text: `last block is ${at - source.size} bytes short of ${BLOCK_SIZE}; no data are lost`,
      })
    }
  }
  const grown = at < source.size && source.size % BLOCK_SIZE !== 0
  return { hdus: grown ? checked(source, hdus) : hdus, notes }
}

/** The HDUs with a fault in those whose data were changed as text is; asked of files of no whole number of blocks. */
function checked(source: ByteSource, hdus: readonly Hdu[]): readonly Hdu[] {
  return hdus.map((hdu) => {
    const fault = hdu.fault ?? lineEndFault(source, hdu)
    return fault === undefined ? hdu : { ...hdu, fault }
  })
}

function beginsExtension(source: ByteSource, at: number): boolean {
  if (source.size - at < 80) return false
  return textOf(source.read(at, 9)).toUpperCase() === 'XTENSION='
}

function cutNote(hdu: Hdu, size: number): FitsNote {
  const there = Math.max(0, size - hdu.dataByte)
  return {
    code: 'truncated-data',
    text: `data require ${hdu.dataSize} bytes from byte ${hdu.dataByte}, the file holds ${there}`,
  }
}

function leftover(source: ByteSource, at: number): FitsNote {
  const length = source.size - at
  const sample = source.read(at, Math.min(length, BLOCK_SIZE))
  const zeros = sample.every((byte) => byte === 0)
  const what = zeros ? 'zero bytes' : 'bytes that begin no extension'
  return {
    code: zeros ? 'zero-padding' : 'trailing-bytes',
    text: `${length} ${what} follow the last HDU from byte ${at}`,
  }
}
