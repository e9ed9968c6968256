import { closeSync, fstatSync, openSync, readSync, type PathLike } from 'node:fs'
import { createHash } from 'node:crypto'
import type { ByteSource } from '../src/fits/types.ts'

/** An open file as a source of bytes; `close` gives the handle back. */
export interface FileSource extends ByteSource {
  readonly modifiedMs: number
  /** True when size and time of change are still what they were at opening. */
  isUnchanged(): boolean
  /** Hex SHA-256 of the whole file, in pieces of 1 MiB. */
  sha256(): string
  close(): void
}

/** Files up to this size are read in one go: one system call is cheaper than many small ones. */
const WHOLE_BYTES = 16 * 1024 * 1024
const PIECE_BYTES = 1024 * 1024

/** Opens a file for reading by ranges; throws the system's error when it cannot be opened. */
export function openFile(path: PathLike): FileSource {
  const handle = openSync(path, 'r')
  const status = fstatSync(handle)
  const size = status.size
  let whole: Uint8Array | undefined

  function readAt(offset: number, length: number): Uint8Array {
    const bytes = Buffer.allocUnsafeSlow(length)
    let done = 0
    while (done < length) {
      const got = readSync(handle, bytes, done, length - done, offset + done)
      if (got === 0)
        throw new RangeError(`file requires ${offset + length} bytes, got ${offset + done}: it shrank while being read`)
      done += got
    }
    return new Uint8Array(bytes.buffer, bytes.byteOffset, length)
  }

  function read(offset: number, length: number): Uint8Array {
    if (!(offset >= 0 && length >= 0 && offset + length <= size)) {
      throw new RangeError(`read requires a range within ${size} bytes, got ${offset} to ${offset + length}`)
    }
    if (size > WHOLE_BYTES) return readAt(offset, length)
    whole ??= readAt(0, size)
    return whole.subarray(offset, offset + length)
  }

  return {
    size,
    modifiedMs: status.mtimeMs,
    read,
    isUnchanged() {
      const now = fstatSync(handle)
      return now.size === size && now.mtimeMs === status.mtimeMs
    },
    sha256() {
      const hash = createHash('sha256')
      for (let offset = 0; offset < size; offset += PIECE_BYTES)
        hash.update(read(offset, Math.min(PIECE_BYTES, size - offset)))
      return hash.digest('hex')
    },
    close() {
      closeSync(handle)
    },
  }
}
