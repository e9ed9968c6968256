import { randomUUID } from 'node:crypto'
import { closeSync, fsyncSync, mkdirSync, openSync, renameSync, rmSync, statSync, writeSync } from 'node:fs'
import { dirname, join } from 'node:path'

/** Writes a whole file under a temporary name and renames it: a reader sees the old file or the new one, never half. */
export function writeWhole(path: string, content: Uint8Array | string): void {
  const stream = openWrite(path)
  try {
    stream.write(content)
    stream.finish()
  } catch (error) {
    stream.abandon()
    throw error
  }
}

/** A file that grows piece by piece under a temporary name. */
export interface WriteStream {
  write(piece: Uint8Array | string): void
  /** Gives the file its name. */
  finish(): void
  /** Removes what was written. */
  abandon(): void
}

/** Temporary files under way: what an early end of the program leaves is taken away. */
const unfinished = new Set<string>()
process.on('exit', () => {
  for (const temporary of unfinished) rmSync(temporary, { force: true })
})

/** Makes a folder and those above it. (The recursive form of the system library never ends below /proc.) */
export function makeFolder(folder: string): void {
  if (statSync(folder, { throwIfNoEntry: false })?.isDirectory()) return
  if (dirname(folder) !== folder) makeFolder(dirname(folder))
  try {
    mkdirSync(folder)
  } catch (error) {
    // another thread was quicker
    if (!statSync(folder, { throwIfNoEntry: false })?.isDirectory()) throw error
  }
}

/** A file under a temporary name in the folder of `path`, which is made where absent; it gets its name when finished. */
export function openWrite(path: string): WriteStream {
  makeFolder(dirname(path))
  const temporary = join(dirname(path), `.${randomUUID()}.part`)
  const handle = openSync(temporary, 'wx')
  unfinished.add(temporary)
  let isOpen = true
  function close(): void {
    if (isOpen) closeSync(handle)
    isOpen = false
  }
  function written(bytes: Uint8Array, done: number): number {
    try {
      return writeSync(handle, bytes, done, bytes.length - done)
    } catch (error) {
      // The system's error of a write names no file.
      throw error instanceof Error ? Object.assign(error, { path }) : error
    }
  }
  return {
    write(piece) {
      const bytes = typeof piece === 'string' ? Buffer.from(piece) : piece
      for (let done = 0; done < bytes.length;) done += written(bytes, done)
    },
    finish() {
      fsyncSync(handle)
      close()
      renameSync(temporary, path)
      unfinished.delete(temporary)
    },
    abandon() {
      close()
      rmSync(temporary, { force: true })
      unfinished.delete(temporary)
    },
  }
}
