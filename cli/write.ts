import { closeSync, fsyncSync, mkdirSync, openSync, renameSync, rmSync, writeSync } from 'node:fs'
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

export function openWrite(path: string): WriteStream {
  mkdirSync(dirname(path), { recursive: true })
  const temporary = join(dirname(path), `.${process.pid}-${Math.floor(performance.now() * 1000)}.part`)
  const handle = openSync(temporary, 'w')
  let isOpen = true
  function close(): void {
    if (isOpen) closeSync(handle)
    isOpen = false
  }
  return {
    write(piece) {
      const bytes = typeof piece === 'string' ? Buffer.from(piece) : piece
      for (let done = 0; done < bytes.length;) done += writeSync(handle, bytes, done, bytes.length - done)
    },
    finish() {
      fsyncSync(handle)
      close()
      renameSync(temporary, path)
    },
    abandon() {
      close()
      rmSync(temporary, { force: true })
    },
  }
}
