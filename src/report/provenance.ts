/** What made a page or table, so that it can be made again. Given by the caller; nothing here is looked up. */
export interface Provenance {
  /** Of the program, '0.1.0'. */
  readonly version: string
  /** Hex digest of the settings in force. */
  readonly settingsDigest: string
  /** Name of the calibration that the types rest on. */
  readonly calibration: string
  /** When the run was made; the only date in the output that is not of the data. */
  readonly date: Date
}

/** One line that says what made a page. */
export function provenanceLine({ version, settingsDigest, calibration, date }: Provenance): string {
  return `darkline ${version}, settings ${settingsDigest.slice(0, 12)}, calibration ${calibration}, ${date.toISOString().slice(0, 10)}`
}
