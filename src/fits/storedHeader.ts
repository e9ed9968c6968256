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
  const shown = rewritten(header, IMAGE_LEFT_OUT, (keyword) => {
    const axis = /^ZNAXIS(\d+)$/.exec(keyword)
    return axis ? `NAXIS${axis[1]}` : IMAGE_RENAMED[keyword]
  }).cards.filter((card) => card.keyword !== 'EXTNAME' || card.value !== DEFAULT_NAME)
  if (shown.some((card) => card.keyword === 'SIMPLE')) return headerOf(shown)
  // the file keeps nothing of the first card and of PCOUNT and GCOUNT: those of every image extension stand in
  const byte = header.cards[0]?.byte ?? 0
  const missing = IMAGE_FIRST.filter(({ keyword }) => !shown.some((card) => card.keyword === keyword))
  return headerOf([...missing.map((card) => ({ ...card, comment: '', byte })), ...shown])
}

const IMAGE_FIRST = [
  { keyword: 'XTENSION', value: 'IMAGE' },
  { keyword: 'PCOUNT', value: 0 },
  { keyword: 'GCOUNT', value: 1 },
] as const

/** EXTNAME that a table of tiles bears when the image had none. */
const DEFAULT_NAME = 'COMPRESSED_IMAGE'

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
