import { closeSync, existsSync, openSync, readdirSync, readSync, realpathSync, statSync } from 'node:fs'
import type { Dirent, PathLike, Stats } from 'node:fs'
import { basename, dirname } from 'node:path'

/** A file to be answered for. `path` is what the system opens (bytes when the name is not valid UTF-8). */
export interface FoundFile {
  /** As given, without a leading './', the part below a folder appended. */
  readonly file: string
  readonly path: PathLike
  /** True when the user named it: then it is answered for whatever it holds. */
  readonly named: boolean
}

/** A path that gave nothing: it does not exist, cannot be read, or leads back into itself. */
export interface PathProblem {
  readonly file: string
  readonly code: 'no-such-path' | 'unreadable' | 'link-in-a-circle' | 'not-a-file'
  readonly message: string
}

export type PathAnswer = { readonly found: FoundFile } | { readonly problem: PathProblem }

const FITS_NAME = /\.(fits|fit|fts|fz|tfits)(\.gz|\.z)?$/i
const FITS_START = Buffer.from('SIMPLE  =')

/**
 * Yields every file below the given paths, in the order given and in byte order of the path within a folder, without
 * reading ahead: a folder of any size costs one directory listing at a time. In folders only files with a FITS-like
 * name, or that begin as FITS does, are yielded.
 */
export function* findFiles(paths: readonly string[]): Generator<PathAnswer> {
  for (const given of paths) {
    const file = given.replace(/^(\.\/+)+/, '') || '.'
    const path = asOnDisk(given)
    const status = statusOf(path)
    if (typeof status === 'string') {
      yield { problem: missing(file, status) }
    } else if (status.isDirectory()) {
      yield* walk(Buffer.from(path), Buffer.from(file), new Set())
    } else if (status.isFile()) {
      yield { found: { file, path, named: true } }
    } else {
      yield { problem: notAFile(file) }
    }
  }
}

/** What the system says of a path, links followed; its word for what went wrong where it says nothing else. */
function statusOf(path: PathLike): Stats | string {
  try {
    return statSync(path)
  } catch (error) {
    return reason(error)
  }
}

function missing(file: string, word: string): PathProblem {
  return word === 'ENOENT'
    ? { file, code: 'no-such-path', message: 'path requires a file or folder, got none of that name' }
    : { file, code: 'unreadable', message: `path requires a file or folder, got ${word} from the system` }
}

function notAFile(file: string): PathProblem {
  return {
    file,
    code: 'not-a-file',
    message: 'path requires a regular file or folder, got a device, pipe or socket',
  }
}

/** The bytes of a named path whose last part is no valid UTF-8 and so arrived with replacement characters. */
function asOnDisk(given: string): string | Buffer {
  if (!given.includes('\uFFFD') || existsSync(given)) return given
  const folder = dirname(given)
  try {
    const name = readdirSync(folder, { encoding: 'buffer' }).filter((entry) => entry.toString() === basename(given))
    return name.length === 1 ? Buffer.concat([Buffer.from(`${folder}/`), name[0]]) : given
  } catch {
    return given
  }
}

function* walk(folder: Buffer, shown: Buffer, above: ReadonlySet<string>): Generator<PathAnswer> {
  const file = shown.toString()
  let real: string
  let entries: Dirent<Buffer>[]
  try {
    real = realpathSync(folder)
    if (above.has(real)) {
      yield {
        problem: {
          file,
          code: 'link-in-a-circle',
          message: `folder requires to lie outside itself, got a link back to ${real}`,
        },
      }
      return
    }
    entries = readdirSync(folder, { withFileTypes: true, encoding: 'buffer' })
  } catch (error) {
    yield { problem: { file, code: 'unreadable', message: `folder requires to be readable, got ${reason(error)}` } }
    return
  }
  const here = new Set(above).add(real)
  const slash = Buffer.from('/')
  const items = entries.map((entry) => {
    const path = Buffer.concat([folder, folder.at(-1) === 47 ? Buffer.alloc(0) : slash, entry.name])
    const followed = entry.isSymbolicLink() ? statusOf(path) : entry
    const isFolder = typeof followed !== 'string' && followed.isDirectory()
    return {
      path,
      shown:
        file === '.' ? entry.name : Buffer.concat([shown, shown.at(-1) === 47 ? Buffer.alloc(0) : slash, entry.name]),
      isFolder,
      isFile: typeof followed !== 'string' && followed.isFile(),
      word: typeof followed === 'string' ? followed : undefined,
      key: isFolder ? Buffer.concat([entry.name, slash]) : entry.name,
    }
  })
  items.sort((a, b) => Buffer.compare(a.key, b.key))
  for (const item of items) {
    if (item.isFolder) yield* walk(item.path, item.shown, here)
    else {
      const name = item.shown.toString()
      if (!item.isFile) {
        if (FITS_NAME.test(name)) yield { problem: item.word === undefined ? notAFile(name) : missing(name, item.word) }
      } else if (FITS_NAME.test(name) || beginsAsFits(item.path))
        yield { found: { file: name, path: openable(item.path), named: false } }
    }
  }
}

/** The path as text where text gives back the same bytes, else the bytes. */
function openable(path: Buffer): PathLike {
  const text = path.toString()
  return Buffer.from(text).equals(path) ? text : path
}

function beginsAsFits(path: PathLike): boolean {
  let handle: number | undefined
  try {
    handle = openSync(path, 'r')
    const start = Buffer.alloc(FITS_START.length)
    return readSync(handle, start, 0, start.length, 0) === start.length && start.equals(FITS_START)
  } catch {
    return false
  } finally {
    if (handle !== undefined) closeSync(handle)
  }
}

/** The system's own word for what went wrong: 'EACCES', 'EIO'. */
export function reason(error: unknown): string {
  return error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : String(error)
}
