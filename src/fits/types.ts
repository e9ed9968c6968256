/**
 * A file as bytes, read by ranges. Synchronous, since every file is handled in a worker thread of its own.
 * `read` returns exactly `length` bytes or throws RangeError when the range leaves [0, size).
 */
export interface ByteSource {
  readonly size: number
  read(offset: number, length: number): Uint8Array
  /** What was noticed while the bytes were made (a damaged or cut compressed stream). */
  readonly notes?: readonly FitsNote[]
}

/** A rule breach that does not stop reading, or a remark on how something was understood. */
export interface FitsNote {
  readonly code: string
  readonly text: string
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
  readonly notes: readonly FitsNote[]
  /** XTENSION as written, or 'PRIMARY'. */
  readonly extension: string
  /** BSCALE, BZERO and BLANK of an image (1, 0 and undefined elsewhere). */
  readonly scale: number
  readonly zero: number | bigint
  readonly blank?: bigint
  /** Bytes of a table row as stored, and where the heap of variable-length arrays begins (a byte of the file). */
  readonly rowSize: number
  readonly heapByte: number
  /** The stored table of a compressed image or table: its own header, columns and rows. */
  readonly stored?: StoredTable
  /** Why the data cannot be read although the header could: reading them throws this. */
  readonly fault?: FitsFault
}

/** The binary table in which a compressed image or table is stored. */
export interface StoredTable {
  readonly header: Header
  readonly columns: readonly Column[]
  readonly rows: number
  readonly rowSize: number
  readonly dimensions: readonly number[]
}

/** A breach that makes the data of an HDU unreadable, kept until somebody wants them. */
export interface FitsFault {
  readonly code: string
  readonly message: string
  readonly keyword?: string
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
  /** TFORMn as written, and TDISPn or ''. */
  readonly form: string
  readonly display: string
  /** Where the cell begins in a row and how many bytes it takes there. */
  readonly offset: number
  readonly width: number
  /** Descriptor of a variable-length array: 32-bit (P) or 64-bit (Q) counts. */
  readonly descriptor?: 'P' | 'Q'
  /** UCD and utype where the file gives them (TUCDn, TUTYPn or TUTYPEn). */
  readonly ucd: string
  readonly utype: string
}

/** An opened file: the HDUs found, and why the walk ended early if it did (a truncated last HDU, junk after it). */
export interface FitsFile {
  readonly hdus: readonly Hdu[]
  readonly notes: readonly FitsNote[]
}

/**
 * Values of a column, row after row, `repeat` elements a row. `numbers` are scaled (TZEROn + TSCALn x stored) with
 * NaN for nulls; `integers` are 64-bit ones kept exact (unsigned where TZEROn is 2^63), `nulls` marks the undefined.
 * A logical is undefined where the file stores neither T nor F. `variable` holds one entry a row, of any other kind.
 */
export type ColumnValues =
  | { readonly kind: 'numbers'; readonly repeat: number; readonly values: Float64Array }
  | {
      readonly kind: 'integers'
      readonly repeat: number
      readonly values: BigInt64Array | BigUint64Array
      readonly nulls?: Uint8Array
    }
  | { readonly kind: 'text'; readonly repeat: number; readonly values: readonly string[] }
  | { readonly kind: 'logicals'; readonly repeat: number; readonly values: readonly (boolean | undefined)[] }
  | { readonly kind: 'complex'; readonly repeat: number; readonly re: Float64Array; readonly im: Float64Array }
  | { readonly kind: 'bits'; readonly repeat: number; readonly values: Uint8Array }
  | { readonly kind: 'variable'; readonly cells: readonly ColumnValues[] }
