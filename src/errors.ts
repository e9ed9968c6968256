/** Where in a file a rule is broken; what is not known is left out. `byte` counts from 0 in the (inflated) file. */
export interface Place {
  readonly file?: string
  readonly hdu?: number
  readonly row?: number
  readonly keyword?: string
  readonly byte?: number
}

/**
 * The file breaks its format, or holds no spectrum. `message` follows one grammar, without the place:
 * `NAME requires RULE, got VALUE`.
 */
export class FormatError extends Error {
  readonly code: string
  readonly where: Place

  constructor(code: string, message: string, where: Place = {}, options?: { cause?: unknown }) {
    super(message, options)
    this.name = 'FormatError'
    this.code = code
    this.where = where
  }
}

/** The command, an option or a settings file is wrong; nothing was run. */
export class UsageError extends Error {
  constructor(message: string, options?: { cause?: unknown }) {
    super(message, options)
    this.name = 'UsageError'
  }
}

/** One line of plain text for a person: `file, HDU 1, keyword CRVAL1: message`. */
export function placeAndMessage(error: FormatError): string {
  const { file, hdu, row, keyword, byte } = error.where
  const place = [
    file,
    hdu === undefined ? undefined : `HDU ${hdu}`,
    row === undefined ? undefined : `row ${row}`,
    keyword === undefined ? undefined : `keyword ${keyword}`,
    byte === undefined ? undefined : `byte ${byte}`,
  ].filter((part) => part !== undefined)
  return place.length ? `${place.join(', ')}: ${error.message}` : error.message
}
