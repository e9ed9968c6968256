import { statSync, type PathLike } from 'node:fs'
import { FormatError, placeAndMessage, UsageError } from '../src/errors.ts'
import { analyseFile, openBytes, type OpenedFile } from '../src/pipeline/analyseFile.ts'
import type { InForce } from '../src/pipeline/settingsInForce.ts'
import type { Outcome } from '../src/quality/types.ts'
import { reason } from './files.ts'
import { type NormalizedPlan, writeNormalized } from './normalized.ts'
import { openFile } from './source.ts'

/** One file to analyse; plain data, it crosses into a worker thread. */
export interface AnalyseTask {
  readonly file: string
  readonly path: PathLike
  readonly inForce: InForce
  readonly wantsCurves: boolean
  readonly wantsAllLines: boolean
  /** Where each normalised spectrum is written, if they are wanted. */
  readonly normalized?: NormalizedPlan
  /** File that holds the wavelengths. */
  readonly wavelengths?: string
}

/** Reads and analyses one file of the disk; whatever goes wrong with it becomes the error of its Outcome. */
export function analysePath(task: AnalyseTask): Outcome {
  const nothing = { file: task.file, size: 0, spectra: [], notes: [] }
  // A Buffer arrives from another thread as a plain Uint8Array.
  const path = task.path instanceof Uint8Array ? Buffer.from(task.path) : task.path
  let source: ReturnType<typeof openFile>
  try {
    source = openFile(path)
  } catch (error) {
    return {
      ...nothing,
      error: { code: 'cannot-open', message: `file requires to be readable, got ${reason(error)} from the system` },
    }
  }
  try {
    const outcome = analyseFile(source, task.file, {
      inForce: task.inForce,
      wantsCurves: task.wantsCurves,
      wantsAllLines: task.wantsAllLines,
      wantsNormalised: task.normalized !== undefined,
      companion: task.wavelengths === undefined ? undefined : companionFile(task.wavelengths),
    })
    const sha256 = source.size <= task.inForce.hashLimitBytes ? source.sha256() : undefined
    if (!source.isUnchanged()) {
      return {
        ...nothing,
        size: source.size,
        error: {
          code: 'file-changed',
          message:
            'file requires to stay as it is while it is read, got a change of size or time: it is still being written',
        },
      }
    }
    const hashed = sha256 === undefined ? outcome : { ...outcome, sha256 }
    return task.normalized ? writeNormalized(hashed, task.normalized) : hashed
  } catch (error) {
    return {
      ...nothing,
      size: source.size,
      error: { code: 'cannot-read', message: `file requires to be readable to its end, got ${reason(error)}` },
    }
  } finally {
    source.close()
  }
}

const companions = new Map<string, OpenedFile>()

/**
 * The file of --wavelengths, opened once a thread; it stays open.
 *
 * @throws UsageError where it cannot be opened or holds no FITS
 */
export function companionFile(path: string): OpenedFile {
  const known = companions.get(path)
  if (known) return known
  try {
    if (!statSync(path).isFile())
      throw new UsageError(`--wavelengths requires a FITS file, got ${path}, which is no file`)
    const opened = openBytes(openFile(path))
    companions.set(path, opened)
    return opened
  } catch (error) {
    if (error instanceof UsageError) throw error
    const why = error instanceof FormatError ? placeAndMessage(error) : reason(error)
    throw new UsageError(`--wavelengths requires a readable FITS file, got ${path}: ${why}`, { cause: error })
  }
}
