import { basename, join, resolve } from 'node:path'
import { statSync } from 'node:fs'
import { UsageError } from '../../src/errors.ts'
import type { Finding } from '../../src/findings/types.ts'
import { parseTargets } from '../../src/night/parseTargets.ts'
import type { NightSummary, Target } from '../../src/night/types.ts'
import { nightOf } from '../../src/pipeline/nightOf.ts'
import type { InForce } from '../../src/pipeline/settingsInForce.ts'
import type { Outcome } from '../../src/quality/types.ts'
import { cutToWidth } from '../../src/report/columnWidth.ts'
import { nightSummaryText } from '../../src/report/nightText.ts'
import { TABLE_NAMES, type TableName } from '../../src/report/row.ts'
import { tableRows } from '../../src/report/tableRows.ts'
import type { Options } from '../args.ts'
import { startCrew, type Crew } from '../crew.ts'
import { count, exitStatus, gather, type Tally } from '../gather.ts'
import { type NormalizedPlan, normalizedPlan } from '../normalized.ts'
import { drawPages } from '../pages.ts'
import { printable } from '../printable.ts'
import { folderOutput, wantsColour } from '../results.ts'
import { inForceOf, readSettings, readText } from '../settingsFile.ts'
import { watchFolder } from '../watch.ts'
import { remark } from './tables.ts'

/** What a run of `night` needs beside the outcomes. */
interface Plan {
  readonly options: Options
  readonly version: string
  readonly inForce: InForce
  readonly targets?: readonly Target[]
  readonly targetFindings: readonly Finding[]
  readonly out: string
  readonly normalized?: NormalizedPlan
}

/** The whole job on one folder. */
export async function runNight(options: Options, version: string): Promise<number> {
  const [folder] = options.paths
  const status = statSync(folder, { throwIfNoEntry: false })
  if (!status) throw new UsageError(`${folder}: night requires a folder, got none of that name`)
  if (!status.isDirectory())
    throw new UsageError(`${folder}: night requires a folder, got a file (see: darkline classify)`)
  const inForce = inForceOf(readSettings(options))
  const list =
    options.targets === undefined ? undefined : parseTargets(readText(options.targets, '--targets'), options.targets)
  const out = options.out ?? join('reports', basename(resolve(folder)))
  const plan: Plan = {
    options,
    version,
    inForce,
    ...(list ? { targets: list.targets } : {}),
    targetFindings: list?.findings ?? [],
    out,
    normalized: normalizedPlan(options, out, inForce, version),
  }
  const crew = startCrew(options.workers)
  try {
    if (options.watch) return await watch(plan, crew)
    const outcomes: Outcome[] = []
    for await (const outcome of gather(options, crew, {
      inForce,
      wantsCurves: options.pages,
      normalized: plan.normalized,
    })) {
      remark(outcome, options)
      outcomes.push(outcome)
    }
    return await conclude(outcomes, plan, crew)
  } finally {
    await crew.close()
  }
}

/** The night's pass over all outcomes, then tables, pages and the summary on standard output. */
async function conclude(outcomes: readonly Outcome[], plan: Plan, crew: Crew): Promise<number> {
  const { options, out } = plan
  const night = nightOf(outcomes, { inForce: plan.inForce, targets: plan.targets, findings: plan.targetFindings })
  await writeTables(outcomes, night, plan)
  const pages = options.pages
    ? await drawPages(outcomes, night, {
        out,
        folder: options.paths[0],
        version: plan.version,
        inForce: plan.inForce,
        crew,
        isQuiet: options.quiet,
      })
    : undefined
  const width = process.stdout.isTTY ? Math.min(process.stdout.columns ?? 100, 160) : 100
  process.stdout.write(
    nightSummaryText(night, outcomes, { width, colour: process.stdout.isTTY === true && wantsColour() }),
  )
  process.stdout.write(
    `\n${pages ? `pages   ${join(out, 'night.pdf')}, ${join(out, 'night.html')}, ${pages.targets} in ${join(out, 'targets')}/\n` : ''}tables  ${join(out, 'spectra.csv').replace(/\.csv$/, options.format ? `.${options.format}` : '.csv')} and ${TABLE_NAMES.length - 2} more in ${out}/\n`,
  )
  // the last line is what stands on the screen when the rest has scrolled by
  const again = night.observeAgain.map(({ target }) => target).join(', ')
  if (again !== '') process.stdout.write(`${cutToWidth(printable(`again   ${again}`), width)}\n`)
  const tally: Tally = { files: 0, unreadable: 0, unusable: 0 }
  outcomes.forEach((outcome) => count(tally, outcome))
  tally.unusable += night.spectra.filter((s) => s.quality === 'unusable').length
  return exitStatus(tally)
}

async function writeTables(outcomes: readonly Outcome[], night: NightSummary, { options, out }: Plan): Promise<void> {
  const names: TableName[] = TABLE_NAMES.filter((name) => name !== 'lines' || options.allLines)
  const sinks = folderOutput(out, names, options.format ? [options.format] : ['csv', 'jsonl'])
  for (const name of names) {
    sinks[name].add(tableRows(name, outcomes, night))
    await sinks[name].finish()
  }
}

/** Handles files as they arrive until the user interrupts; tables and pages are renewed after each batch. */
async function watch(plan: Plan, crew: Crew): Promise<number> {
  const outcomes = new Map<string, Outcome>()
  let status = 0
  await watchFolder(plan.options.paths[0], async (files) => {
    const done = await Promise.all(
      files.map(({ file, path }) =>
        crew.analyse({
          file,
          path,
          inForce: plan.inForce,
          wantsCurves: plan.options.pages,
          wantsAllLines: false,
          normalized: plan.normalized,
          wavelengths: plan.options.wavelengths,
        }),
      ),
    )
    for (const outcome of done) {
      remark(outcome, plan.options)
      outcomes.set(outcome.file, outcome)
    }
    const inOrderOfPath = [...outcomes.values()].sort((a, b) =>
      Buffer.compare(Buffer.from(a.file), Buffer.from(b.file)),
    )
    status = await conclude(inOrderOfPath, plan, crew)
  })
  return status
}
