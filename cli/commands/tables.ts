import type { Outcome } from '../../src/quality/types.ts'
import { featureRows } from '../../src/report/featureRows.ts'
import { findingRows } from '../../src/report/findingRows.ts'
import { frameRows } from '../../src/report/frameRows.ts'
import { lineRows } from '../../src/report/lineRows.ts'
import type { Row, TableName } from '../../src/report/row.ts'
import { spectraRows } from '../../src/report/spectraRows.ts'
import { whyText } from '../../src/report/whyText.ts'
import { UsageError } from '../../src/errors.ts'
import type { Options } from '../args.ts'
import { startCrew } from '../crew.ts'
import { count, exitStatus, gather, type Tally } from '../gather.ts'
import { normalizedPlan } from '../normalized.ts'
import { printable } from '../printable.ts'
import { folderOutput, standardOutput, type TableSink } from '../results.ts'
import { inForceOf, readSettings } from '../settingsFile.ts'

const ROWS: Readonly<Partial<Record<TableName, (outcome: Outcome) => Row[]>>> = {
  spectra: (outcome) => spectraRows(outcome),
  features: featureRows,
  lines: lineRows,
  findings: (outcome) => findingRows(outcome),
  frames: (outcome) => frameRows(outcome),
}

/** `classify`, `measure` and `check`: one table on standard output, or all of them in a folder, row by row. */
export async function runTables(options: Options, version: string): Promise<number> {
  if (options.saveNormalized && options.out === undefined)
    throw new UsageError('--save-normalized requires --out FOLDER, got none')
  const inForce = inForceOf(readSettings(options))
  const main = mainTable(options)
  const names: TableName[] =
    options.out === undefined
      ? [main]
      : ['spectra', 'features', ...(options.allLines ? (['lines'] as const) : []), 'findings', 'frames']
  const sinks: Partial<Record<TableName, TableSink>> =
    options.out === undefined
      ? options.why
        ? {}
        : { [main]: standardOutput(main, options.format ?? 'table') }
      : folderOutput(options.out, names, options.format ? [options.format] : ['csv', 'jsonl'])
  const normalized = normalizedPlan(options, options.out, inForce, version)
  const crew = startCrew(options.workers)
  const tally: Tally = { files: 0, unreadable: 0, unusable: 0 }
  try {
    for await (const outcome of gather(options, crew, { inForce, wantsCurves: false, normalized })) {
      count(tally, outcome)
      remark(outcome, options)
      for (const name of names) sinks[name]?.add(ROWS[name]?.(outcome) ?? [])
      if (options.why)
        for (const spectrum of outcome.spectra) process.stdout.write(`${whyText(printable(outcome.file), spectrum)}\n`)
    }
  } finally {
    await crew.close()
  }
  for (const name of names) await sinks[name]?.finish()
  return exitStatus(tally)
}

function mainTable(options: Options): TableName {
  if (options.command === 'check') return 'findings'
  if (options.command === 'classify') return 'spectra'
  return options.allLines ? 'lines' : 'features'
}

/** One line on standard error for a file that gives no row: an error always, a 2-D frame unless --quiet. */
export function remark(outcome: Outcome, options: Options): void {
  const { error, frame, file } = outcome
  if (error) {
    const place = [
      error.hdu === undefined ? '' : `, HDU ${error.hdu}`,
      error.row === undefined ? '' : `, row ${error.row}`,
      error.keyword ? `, keyword ${error.keyword}` : '',
      error.byte === undefined ? '' : `, byte ${error.byte}`,
    ].join('')
    process.stderr.write(`${printable(`${file}${place}: ${error.message}`)}\n`)
  } else if (frame?.statistics && options.command !== 'check' && options.command !== 'night' && !options.quiet) {
    process.stderr.write(
      `${printable(file)}: passed over, a 2-D ${frame.kind} frame of ${frame.statistics.width} × ${frame.statistics.height} pixels\n`,
    )
  }
}
