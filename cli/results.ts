import { join } from 'node:path'
import { csvHead, csvLines } from '../src/report/csv.ts'
import { encodeFitsTable } from '../src/report/fitsTable.ts'
import { jsonLines } from '../src/report/jsonLines.ts'
import { encodeParquet } from '../src/report/parquet.ts'
import type { Row, TableName } from '../src/report/row.ts'
import { terminalTable } from '../src/report/terminalTable.ts'
import { encodeVotable } from '../src/report/votable.ts'
import type { Format } from './args.ts'
import { openWrite, type WriteStream } from './write.ts'

const SUFFIX: Readonly<Record<Format, string>> = {
  table: 'txt',
  csv: 'csv',
  jsonl: 'jsonl',
  fits: 'fits',
  votable: 'vot',
  parquet: 'parquet',
}

/** Where rows go as they come. */
export interface TableSink {
  add(rows: readonly Row[]): void
  finish(): Promise<void>
}

/** A sink that writes one table to standard output. CSV and JSON Lines flow; the other forms need all rows first. */
export function standardOutput(name: TableName, format: Format): TableSink {
  return sink(
    name,
    format,
    process.stdout.isTTY ? (process.stdout.columns ?? 100) : 160,
    process.stdout.isTTY === true,
    {
      write: (piece) => void process.stdout.write(piece),
      finish: () => undefined,
      abandon: () => undefined,
    },
  )
}

/** Sinks that write the tables into a folder, one file a table and format. */
export function folderOutput(
  folder: string,
  names: readonly TableName[],
  formats: readonly Format[],
): Readonly<Record<TableName, TableSink>> {
  const sinks = names.map((name) => {
    const each = formats.map((format) =>
      sink(name, format, 160, false, openWrite(join(folder, `${name}.${SUFFIX[format]}`))),
    )
    const all: TableSink = {
      add: (rows) => each.forEach((one) => one.add(rows)),
      finish: async () => {
        for (const one of each) await one.finish()
      },
    }
    return [name, all] as const
  })
  return Object.fromEntries(sinks) as Record<TableName, TableSink>
}

function sink(name: TableName, format: Format, width: number, isTerminal: boolean, stream: WriteStream): TableSink {
  if (format === 'csv' || format === 'jsonl') {
    // The head waits for the first rows: a command that cannot run prints nothing.
    let hasHead = format !== 'csv'
    const writeHead = (): void => {
      if (!hasHead) stream.write(csvHead(name))
      hasHead = true
    }
    return {
      add: (rows) => {
        writeHead()
        if (rows.length) stream.write(format === 'csv' ? csvLines(name, rows) : jsonLines(name, rows))
      },
      finish: () => {
        writeHead()
        return Promise.resolve(stream.finish())
      },
    }
  }
  const kept: Row[] = []
  return {
    add: (rows) => {
      for (const row of rows) kept.push(row)
    },
    async finish() {
      if (format === 'fits') stream.write(encodeFitsTable(name, kept))
      else if (format === 'votable') stream.write(encodeVotable([{ name, rows: kept }]))
      else if (format === 'parquet') stream.write(await encodeParquet(name, kept))
      else stream.write(terminalTable(name, kept, { width, colour: isTerminal && wantsColour() }))
      stream.finish()
    },
  }
}

/** Colours only where NO_COLOR is not set (no-color.org: any value that is not empty). */
export function wantsColour(): boolean {
  return !process.env.NO_COLOR
}
