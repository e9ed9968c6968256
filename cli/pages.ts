import { basename, join, relative, resolve } from 'node:path'
import type { NightSummary } from '../src/night/types.ts'
import type { InForce } from '../src/pipeline/settingsInForce.ts'
import type { Outcome } from '../src/quality/types.ts'
import { nightHtml } from '../src/report/nightHtml.ts'
import { layoutNightPages } from '../src/report/nightPages.ts'
import { encodePdf } from '../src/report/pdf.ts'
import type { Provenance } from '../src/report/provenance.ts'
import { targetViews } from '../src/report/targetView.ts'
import { CALIBRATION_NAME } from '../src/pipeline/nightOf.ts'
import { inOrder } from './batch.ts'
import type { Crew } from './crew.ts'
import { pageTypeface, type DrawTask } from './draw.ts'
import { fileNames } from './fileNames.ts'
import { pageFonts } from './pageFonts.ts'
import { printable } from './printable.ts'
import { startProgress } from './progress.ts'
import { settingsDigest } from './settingsFile.ts'
import { writeWhole } from './write.ts'

/** What the pages of a night need beside its outcomes. */
export interface PagesPlan {
  readonly out: string
  readonly folder: string
  readonly version: string
  readonly inForce: InForce
  readonly crew: Crew
  readonly isQuiet: boolean
}

/** Writes one PDF a target, the night's PDF and the page to look around in. */
export async function drawPages(
  outcomes: readonly Outcome[],
  night: NightSummary,
  plan: PagesPlan,
): Promise<{ targets: number }> {
  const { out, crew, inForce } = plan
  const provenance: Provenance = {
    version: plan.version,
    settingsDigest: settingsDigest(inForce),
    calibration: CALIBRATION_NAME,
    date: dateOf(night),
  }
  const views = targetViews(outcomes, night)
  const names = fileNames(views.map((view) => view.name))
  const progress = startProgress('pages', views.length, plan.isQuiet)
  const tasks = views.map((view, i) => ({
    view,
    path: join(out, 'targets', `${names[i]}.pdf`),
    paper: inForce.paper,
    provenance,
  }))
  for await (const problem of inOrder(tasks, crew.atOnce, (task) => drawn(task, crew))) {
    progress.step()
    if (problem !== undefined) process.stderr.write(`${printable(problem)}\n`)
  }
  progress.stop()

  const pages = new Map(views.map((view, i) => [view.name, `targets/${names[i]}.pdf`]))
  const options = {
    provenance,
    name: basename(resolve(plan.folder)),
    pagesOf: (target: string) => pages.get(target),
    fileOf: (file: string) => relative(out, file),
  }
  const drawing = layoutNightPages(outcomes, night, { face: pageTypeface(), paper: inForce.paper, ...options })
  writeWhole(
    join(out, 'night.pdf'),
    await encodePdf(drawing, pageFonts(), { date: provenance.date, version: plan.version }),
  )
  writeWhole(join(out, 'night.html'), nightHtml(outcomes, night, options))
  return { targets: views.length }
}

/** Draws the pages of one target; what goes wrong with them, where the disk is not to blame, stops no other's. */
async function drawn(task: DrawTask, crew: Crew): Promise<string | undefined> {
  try {
    await crew.draw(task)
    return undefined
  } catch (error) {
    if (error instanceof Error && 'syscall' in error) throw error
    return `${task.path}: pages require a target that can be drawn, got ${error instanceof Error ? error.message : String(error)}`
  }
}

/**
 * The date that pages carry: SOURCE_DATE_EPOCH where it is set, else the end of the night's data, so that the same
 * input gives the same bytes whenever it is run.
 */
function dateOf(night: NightSummary): Date {
  const fixed = process.env.SOURCE_DATE_EPOCH
  if (fixed !== undefined && /^\d+$/.test(fixed)) return new Date(Number(fixed) * 1000)
  const MJD_OF_UNIX_EPOCH = 40587
  const mjd = night.mjdLast ?? night.mjdFirst
  return new Date(mjd === undefined ? 0 : Math.round((mjd - MJD_OF_UNIX_EPOCH) * 86400) * 1000)
}
