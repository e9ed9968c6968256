/**
 * A file as bytes, read by ranges. Synchronous, since every file is handled in a worker thread of its own.
 * `read` returns exactly `length` bytes or throws RangeError when the range leaves [0, size).
 */
export interface ByteSource {
  readonly size: number
  read(offset: number, length: number): Uint8Array
}

export type CardValue = string | number | bigint | boolean | { readonly re: number; readonly im: number } | undefined

/** One header card. `value` is undefined for COMMENT, HISTORY, blank and for an undefined value. */
export interface Card {
  readonly keyword: string
  readonly value: CardValue
  readonly comment: string
  /** Byte of the card in the (inflated) file. */
  readonly byte: number
}

/**
 * The header of an HDU. Keywords are upper case; HIERARCH keywords are kept as 'HIERARCH ESO TEL AIRM START'
 * without the leading word: 'ESO TEL AIRM START'.
 */
export interface Header {
  readonly cards: readonly Card[]
  /** First card of that keyword, if any. */
  get(keyword: string): Card | undefined
}

export type HduKind = 'image' | 'table' | 'ascii table' | 'compressed image' | 'compressed table' | 'unknown'

export type Bitpix = 8 | 16 | 32 | 64 | -32 | -64

/** Where an HDU lies and what it announces; no data are read for it. */
export interface Hdu {
  readonly index: number
  readonly kind: HduKind
  /** EXTNAME, or '' . */
  readonly name: string
  readonly version: number
  readonly header: Header
  /** Of the array as a user sees it (a compressed image: its ZBITPIX and ZNAXISn), fastest axis first. */
  readonly bitpix: Bitpix
  readonly dimensions: readonly number[]
  readonly headerByte: number
  readonly dataByte: number
  /** Bytes of the data without padding. */
  readonly dataSize: number
  readonly columns: readonly Column[]
  readonly rows: number
  /** Rule breaches that do not stop reading. */
  readonly notes: readonly { readonly code: string; readonly text: string }[]
}

/** A table column as its header describes it. `repeat` counts elements a cell; -1 for a variable-length array. */
export interface Column {
  readonly index: number
  readonly name: string
  /** FITS letter: L X B I J K A E D C M (element type of the heap for P and Q). */
  readonly letter: string
  readonly repeat: number
  readonly unit: string
  /** TDIMn, fastest first; empty when absent. */
  readonly shape: readonly number[]
  readonly scale: number
  readonly zero: number
  /** Stored value that means "undefined" (integers), or text for ASCII tables. */
  readonly nullValue?: bigint | string
  /** UCD and utype where the file gives them (TUCDn, TUTYPn or TUTYPEn). */
  readonly ucd: string
  readonly utype: string
}

/** An opened file: the HDUs found, and why the walk ended early if it did (a truncated last HDU, junk after it). */
export interface FitsFile {
  readonly hdus: readonly Hdu[]
  readonly notes: readonly { readonly code: string; readonly text: string }[]
}
