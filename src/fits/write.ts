import { BLOCK_SIZE, CARD_SIZE } from './card.ts'
import { encodedChecksum, onesComplementSum } from './checksum.ts'
import { joinedBytes } from './joinedBytes.ts'
import { cardsOf } from './writeCard.ts'
import type { FitsCardInput } from './writeCard.ts'
import { imageBytes, imageCards } from './writeImage.ts'
import type { FitsImageInput } from './writeImage.ts'
import { tableBytes, tableCards } from './writeTable.ts'
import type { FitsTableInput } from './writeTable.ts'

/** An HDU to write. */
export type FitsHduInput = FitsImageInput | FitsTableInput

const BLANK = 32
const NO_DATA: FitsImageInput = { kind: 'image', bitpix: 8, dimensions: [] }

/** Announces continued text to readers older than FITS 4.0; verifiers ask for it. */
const LONG_TEXT: FitsCardInput = { keyword: 'LONGSTRN', value: 'OGIP 1.0', comment: 'long text is continued' }

const UNSET = '0'.repeat(16)

/**
 * The bytes of a FITS file (FITS 4.0) with CHECKSUM and DATASUM in every HDU. A primary HDU without data is put in
 * front where the first HDU is a table. The same input gives the same bytes.
 *
 * @throws RangeError when a card, a value or a count cannot be written
 */
export function encodeFits(hdus: readonly FitsHduInput[]): Uint8Array {
  const all = hdus[0]?.kind === 'image' ? hdus : [NO_DATA, ...hdus]
  return joinedBytes(all.flatMap((hdu, i) => encodeHdu(hdu, i === 0)))
}

function encodeHdu(hdu: FitsHduInput, primary: boolean): readonly Uint8Array[] {
  const data = padded(hdu.kind === 'image' ? imageBytes(hdu) : tableBytes(hdu), 0)
  const first: FitsCardInput = primary
    ? { keyword: 'SIMPLE', value: true, comment: 'conforms to FITS standard' }
    : { keyword: 'XTENSION', value: hdu.kind === 'image' ? 'IMAGE' : 'BINTABLE', comment: 'kind of extension' }
  const described = hdu.kind === 'image' ? imageCards(hdu, primary) : tableCards(hdu)
  const own = hdu.cards ?? []
  const long = own.some((card) => cardsOf(card).some((text) => text.startsWith('CONTINUE')))
  const sum = onesComplementSum(data)
  const header = (checksum: string): Uint8Array =>
    headerBytes([
      first,
      ...described,
      ...(long ? [LONG_TEXT] : []),
      ...own,
      { keyword: 'CHECKSUM', value: checksum, comment: 'all words of the HDU sum to ones' },
      { keyword: 'DATASUM', value: String(sum), comment: 'sum of the words of the data' },
    ])
  const checksum = encodedChecksum(onesComplementSum(header(UNSET), sum))
  return [header(checksum), data]
}

function headerBytes(cards: readonly FitsCardInput[]): Uint8Array {
  const text = cards.flatMap(cardsOf).join('') + 'END'.padEnd(CARD_SIZE)
  return padded(new Uint8Array(Buffer.from(text, 'latin1')), BLANK)
}

function padded(bytes: Uint8Array, filler: number): Uint8Array {
  const out = new Uint8Array(Math.ceil(bytes.length / BLOCK_SIZE) * BLOCK_SIZE)
  out.set(bytes)
  return out.fill(filler, bytes.length)
}
