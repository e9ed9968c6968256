/** What made a page or table, so that it can be made again. Given by the caller; nothing here is looked up. */
export interface Provenance {
  /** Of the program, '0.1.0'. */
  readonly version: string
  /** Hex digest of the settings in force. */
  readonly settingsDigest: string
  /** Name of the calibration that the types rest on; may end in its digest in brackets. */
  readonly calibration: string
  /** End of the night's data, so that the same input gives the same bytes; the epoch of Unix where no file has a time. */
  readonly date: Date
}

/** One line that says what made a page; of the calibration the digest in the brackets of its name. */
export function provenanceLine({ version, settingsDigest, calibration, date }: Provenance): string {
  const name = /\(([^()]+)\)$/.exec(calibration)?.[1] ?? calibration
  const data = date.getTime() === 0 ? 'data without a date' : `data of ${date.toISOString().slice(0, 10)}`
  return `darkline ${version}, settings ${settingsDigest.slice(0, 12)}, calibration ${name}, ${data}`
}
