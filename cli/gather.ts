import { UsageError } from '../src/errors.ts'
import type { InForce } from '../src/pipeline/settingsInForce.ts'
import type { Outcome } from '../src/quality/types.ts'
import { companionFile } from './analyse.ts'
import type { Options } from './args.ts'
import { inOrder } from './batch.ts'
import type { Crew } from './crew.ts'
import { findFiles, type PathAnswer } from './files.ts'
import type { NormalizedPlan } from './normalized.ts'
import { startProgress } from './progress.ts'

/** What decides the exit status. */
export interface Tally {
  files: number
  unreadable: number
  unusable: number
}

/** What is wanted of every file. */
export interface Wanted {
  readonly inForce: InForce
  readonly wantsCurves: boolean
  readonly normalized?: NormalizedPlan
}

/** 1 when something could not be read or is unusable, else 0. */
export function exitStatus(tally: Tally): number {
  return tally.unreadable > 0 || tally.unusable > 0 ? 1 : 0
}

/** Counts an Outcome, with the night's view of its spectra where there is one. */
export function count(tally: Tally, outcome: Outcome): void {
  tally.files++
  if (outcome.error) tally.unreadable++
  if (outcome.spectra.some((s) => s.quality === 'unusable') || outcome.frame?.quality === 'unusable') tally.unusable++
}

/**
 * Yields the Outcome of every file below the paths, in order; a path that leads nowhere yields an Outcome with the
 * error.
 *
 * @throws UsageError when no path exists, or no file is found in those that do
 */
export async function* gather(
  options: Options,
  crew: Crew,
  { inForce, wantsCurves, normalized }: Wanted,
): AsyncGenerator<Outcome> {
  if (options.wavelengths !== undefined) companionFile(options.wavelengths)
  const answers = firstChecked(options.paths)
  const progress = startProgress(
    'files',
    options.quiet || !process.stderr.isTTY ? 0 : countFiles(options.paths),
    options.quiet,
  )
  try {
    yield* inOrder(answers, crew.atOnce, async (answer) => {
      const outcome = await outcomeOf(answer, options, crew, { inForce, wantsCurves, normalized })
      progress.step()
      return outcome
    })
  } finally {
    progress.stop()
  }
}

function outcomeOf(
  answer: PathAnswer,
  options: Options,
  crew: Crew,
  { inForce, wantsCurves, normalized }: Wanted,
): Promise<Outcome> {
  if ('problem' in answer) {
    const { file, code, message } = answer.problem
    return Promise.resolve({ file, size: 0, spectra: [], notes: [], error: { code, message } })
  }
  const { file, path } = answer.found
  return crew.analyse({
    file,
    path,
    inForce,
    wantsCurves,
    wantsAllLines: options.allLines,
    ...(normalized ? { normalized } : {}),
    wavelengths: options.wavelengths,
  })
}

/** The answers, after making sure that there is at least one file among them. */
function* firstChecked(paths: readonly string[]): Generator<PathAnswer> {
  const held: PathAnswer[] = []
  let hasFile = false
  for (const answer of findFiles(paths)) {
    if (hasFile) {
      yield answer
      continue
    }
    held.push(answer)
    if (!('found' in answer)) continue
    hasFile = true
    yield* held
  }
  if (hasFile) return
  const missing = held.flatMap((answer) =>
    'problem' in answer ? [`${answer.problem.file}: ${answer.problem.message}`] : [],
  )
  throw new UsageError(
    missing.length ? missing.join('\n') : `${paths.join(', ')}: folder requires at least one FITS file, got none`,
  )
}

function countFiles(paths: readonly string[]): number {
  let files = 0
  for (const _ of findFiles(paths)) if (++files >= 100_000) break
  return files
}
