import { FormatError } from '../../src/errors.ts'
import { verifyChecksums } from '../../src/fits/checksum.ts'
import type { Column } from '../../src/fits/types.ts'
import { openBytes, spectraOf, type OpenedFile } from '../../src/pipeline/analyseFile.ts'
import { describeSpectrum } from '../../src/spectrum/describe.ts'
import type { Options } from '../args.ts'
import { companionFile } from '../analyse.ts'
import { findFiles, reason, type FoundFile } from '../files.ts'
import { printable } from '../printable.ts'
import { openFile } from '../source.ts'
import { UsageError } from '../../src/errors.ts'

type Entry = Record<string, unknown>

/** Prints how each file was understood, one entry a spectrum or HDU; as words or as JSON Lines. */
export function runDescribe(options: Options): number {
  const format = options.format ?? 'table'
  if (format !== 'table' && format !== 'jsonl')
    throw new UsageError(`describe requires --format table or jsonl, got ${format}`)
  if (options.wavelengths !== undefined) companionFile(options.wavelengths)
  let files = 0
  let isAnyUnreadable = false
  const problems: string[] = []
  for (const answer of findFiles(options.paths)) {
    let entries: Entry[]
    if ('problem' in answer) {
      const { file, code, message } = answer.problem
      entries = [{ file, error: { code, message } }]
      problems.push(`${file}: ${message}`)
    } else {
      files++
      entries = describeFile(answer.found, options)
    }
    isAnyUnreadable ||= entries.some((entry) => 'error' in entry)
    for (const entry of entries)
      process.stdout.write(format === 'jsonl' ? `${JSON.stringify(entry)}\n` : inWords(entry))
  }
  if (files === 0)
    throw new UsageError(
      problems.length
        ? 'describe requires at least one file that exists, got none'
        : `${options.paths.join(', ')}: folder requires at least one FITS file, got none`,
    )
  return isAnyUnreadable ? 1 : 0
}

function describeFile({ file, path }: FoundFile, options: Options): Entry[] {
  let source: ReturnType<typeof openFile>
  try {
    source = openFile(path)
  } catch (error) {
    return [
      {
        file,
        error: { code: 'cannot-open', message: `file requires to be readable, got ${reason(error)} from the system` },
      },
    ]
  }
  try {
    const opened = openBytes(source)
    if (options.hdus || options.verify) return describeHdus(file, opened, options.verify)
    const result = spectraOf(opened, file, {
      companion: options.wavelengths === undefined ? undefined : companionFile(options.wavelengths),
    })
    if (result.spectra.length)
      return result.spectra.map((spectrum) => describeSpectrum(file, spectrum) as unknown as Entry)
    const { code, message, where } = result.error ?? {
      code: 'frame-2d',
      message: `spectrum requires one axis of wavelength, got a frame of ${opened.file.hdus[result.frame2d?.hdu ?? 0].dimensions.join(' × ')} pixels`,
      where: { hdu: result.frame2d?.hdu },
    }
    return [{ file, error: { code, message, ...where, file: undefined } }]
  } catch (error) {
    if (error instanceof UsageError) throw error
    if (error instanceof FormatError)
      return [{ file, error: { code: error.code, message: error.message, ...error.where, file: undefined } }]
    if (error instanceof RangeError || error instanceof TypeError)
      return [{ file, error: { code: 'unforeseen', message: error.message } }]
    return [
      {
        file,
        error: { code: 'cannot-read', message: `file requires to be readable to its end, got ${reason(error)}` },
      },
    ]
  } finally {
    source.close()
  }
}

function describeHdus(file: string, { file: fits, source }: OpenedFile, wantsChecksums: boolean): Entry[] {
  return fits.hdus.map((hdu) => {
    // A compressed table is shown as it lies in the file; a compressed image as the image it holds.
    const shown = hdu.kind === 'compressed table' && hdu.stored ? { ...hdu, ...hdu.stored } : hdu
    return {
      file,
      hdu: hdu.index,
      type: hdu.kind,
      name: hdu.name,
      cards: shown.header.cards.length,
      bitpix: hdu.bitpix,
      dimensions: shown.dimensions,
      rows: hdu.kind.includes('table') ? shown.rows : undefined,
      columns: shown.columns.length ? shown.columns.map(columnEntry) : undefined,
      checksums: wantsChecksums ? verifyChecksums(source, hdu) : undefined,
      fault: hdu.fault,
      notes: [...hdu.notes, ...(hdu.index === 0 ? fits.notes : [])],
    }
  })
}

function columnEntry({ name, form, unit, shape }: Column): Entry {
  return { name, form, unit: unit || undefined, shape: shape.length ? shape : undefined }
}

/** An entry as a few indented lines for a person. */
function inWords(entry: Entry): string {
  const { file, error, ...rest } = entry
  const at =
    rest.hdu === undefined
      ? ''
      : ` [HDU ${String(rest.hdu)}${rest.row === undefined || rest.row === null ? '' : `, row ${String(rest.row)}`}]`
  if (error) {
    const { message, hdu, row, keyword, byte } = error as {
      message: string
      hdu?: number
      row?: number
      keyword?: string
      byte?: number
    }
    const place = [
      hdu === undefined ? '' : `HDU ${hdu}, `,
      row === undefined ? '' : `row ${row}, `,
      keyword === undefined ? '' : `keyword ${keyword}, `,
      byte === undefined ? '' : `byte ${byte}, `,
    ].join('')
    return `${printable(`${String(file)}: ${place.replace(/, $/, ': ')}${message}`)}\n`
  }
  const lines = Object.entries(rest)
    .filter(
      ([key, value]) =>
        key !== 'hdu' &&
        key !== 'row' &&
        value !== undefined &&
        value !== null &&
        !(Array.isArray(value) && value.length === 0),
    )
    .map(([key, value]) => `  ${key.padEnd(12)} ${valueInWords(value)}`)
  return `${printable(String(file))}${at}\n${lines.join('\n')}\n`
}

function valueInWords(value: unknown): string {
  if (Array.isArray(value)) {
    const items = value.map((item) =>
      typeof item === 'object' && item !== null
        ? 'text' in item
          ? printable(String(item.text))
          : valueInWords(item)
        : printable(String(item)),
    )
    return items.some((item) => item.length > 20) ? items.join(`\n${' '.repeat(15)}`) : items.join(' × ')
  }
  if (typeof value === 'object' && value !== null) {
    return Object.entries(value)
      .filter(([, v]) => v !== undefined && v !== '')
      .map(
        ([k, v]) =>
          `${k} ${typeof v === 'object' && v !== null && 'state' in v ? String(v.state) : printable(String(v))}`,
      )
      .join(', ')
  }
  return printable(String(value))
}
