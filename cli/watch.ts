import { statSync } from 'node:fs'
import { setTimeout as wait } from 'node:timers/promises'
import { takeInterrupt } from './interrupt.ts'
import { findFiles, type FoundFile } from './files.ts'

/** A file counts as complete when size and time of change stood still for this long. */
const STILL_MS = 2000
const LOOK_EVERY_MS = 1000

interface Seen {
  readonly size: number
  readonly modifiedMs: number
  readonly since: number
  readonly isDone: boolean
}

/**
 * Looks at a folder every second and hands over files that are complete and new, or complete and changed; ends when
 * the user interrupts. Looking, not asking the system for events, works on network folders too.
 */
export async function watchFolder(
  folder: string,
  handle: (files: readonly FoundFile[]) => Promise<void>,
): Promise<void> {
  const seen = new Map<string, Seen>()
  const stop = new AbortController()
  const giveBack = takeInterrupt(() => stop.abort())
  try {
    while (!stop.signal.aborted) {
      const ready = completeFiles(folder, seen, Date.now())
      if (ready.length) await handle(ready)
      await wait(LOOK_EVERY_MS, undefined, { signal: stop.signal }).catch(() => undefined)
    }
  } finally {
    giveBack()
  }
}

function completeFiles(folder: string, seen: Map<string, Seen>, now: number): FoundFile[] {
  const ready: FoundFile[] = []
  for (const answer of findFiles([folder])) {
    if (!('found' in answer)) continue
    const { found } = answer
    const status = statSync(found.path, { throwIfNoEntry: false })
    if (!status) continue
    const known = seen.get(found.file)
    const isSame = known !== undefined && known.size === status.size && known.modifiedMs === status.mtimeMs
    if (!isSame) {
      seen.set(found.file, { size: status.size, modifiedMs: status.mtimeMs, since: now, isDone: false })
    } else if (!known.isDone && now - known.since >= STILL_MS) {
      seen.set(found.file, { ...known, isDone: true })
      ready.push(found)
    }
  }
  return ready
}
