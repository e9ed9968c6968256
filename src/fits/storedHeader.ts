import { headerOf } from './header.ts'
import type { Card, Header } from './types.ts'

/**
 * Keywords of a tile-compressed image's table that are no part of the image (FITS 4.0, section 10.1): the table's own
 * structure and the parameters of the compression.
 */
const IMAGE_LEFT_OUT =
  /^(XTENSION|BITPIX|NAXIS\d*|PCOUNT|GCOUNT|TFIELDS|THEAP|CHECKSUM|DATASUM|ZIMAGE|ZTILE\d+|ZCMPTYPE|ZNAME\d+|ZVAL\d+|ZMASKCMP|ZQUANTIZ|ZDITHER0|ZSCALE|ZZERO|ZBLANK|(TTYPE|TFORM|TUNIT|TSCAL|TZERO|TNULL|TDISP|TDIM)\d+)$/

const IMAGE_RENAMED: Readonly<Record<string, string>> = {
  ZSIMPLE: 'SIMPLE',
  ZTENSION: 'XTENSION',
  ZBITPIX: 'BITPIX',
  ZNAXIS: 'NAXIS',
  ZEXTEND: 'EXTEND',
  ZBLOCKED: 'BLOCKED',
  ZPCOUNT: 'PCOUNT',
  ZGCOUNT: 'GCOUNT',
  ZHECKSUM: 'CHECKSUM',
  ZDATASUM: 'DATASUM',
}

const TABLE_LEFT_OUT =
  /^(NAXIS1|NAXIS2|PCOUNT|CHECKSUM|DATASUM|THEAP|ZTABLE|ZTILELEN|ZCMPTYPE|ZCTYP\d+|FZALGOR|FZTILELN|FZALG\d+|TFORM\d+)$/

const TABLE_RENAMED: Readonly<Record<string, string>> = {
  ZNAXIS1: 'NAXIS1',
  ZNAXIS2: 'NAXIS2',
  ZPCOUNT: 'PCOUNT',
  ZTHEAP: 'THEAP',
  ZHECKSUM: 'CHECKSUM',
  ZDATASUM: 'DATASUM',
}

/** The header of the image that a tile-compressed table holds. */
export function imageHeader(header: Header): Header {
  return rewritten(header, IMAGE_LEFT_OUT, (keyword) => {
    const axis = /^ZNAXIS(\d+)$/.exec(keyword)
    return axis ? `NAXIS${axis[1]}` : IMAGE_RENAMED[keyword]
  })
}

/** The header of the table that a compressed table holds. */
export function tableHeader(header: Header): Header {
  return rewritten(header, TABLE_LEFT_OUT, (keyword) => {
    const form = /^ZFORM(\d+)$/.exec(keyword)
    return form ? `TFORM${form[1]}` : TABLE_RENAMED[keyword]
  })
}

function rewritten(header: Header, leftOut: RegExp, renamed: (keyword: string) => string | undefined): Header {
  const cards: Card[] = []
  for (const card of header.cards) {
    if (leftOut.test(card.keyword)) continue
    const keyword = renamed(card.keyword)
    cards.push(keyword === undefined ? card : { ...card, keyword })
  }
  return headerOf(cards)
}
