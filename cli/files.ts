import { closeSync, openSync, readdirSync, readSync, realpathSync, statSync, type Dirent, type PathLike } from 'node:fs'

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
    const status = statSync(given, { throwIfNoEntry: false })
    if (!status) {
      yield {
        problem: { file, code: 'no-such-path', message: 'path requires a file or folder, got none of that name' },
      }
    } else if (status.isDirectory()) {
      yield* walk(Buffer.from(given), Buffer.from(file), new Set())
    } else if (status.isFile()) {
      yield { found: { file, path: given, named: true } }
    } else {
      yield {
        problem: {
          file,
          code: 'not-a-file',
          message: 'path requires a regular file or folder, got a device, pipe or socket',
        },
      }
    }
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
    const followed = entry.isSymbolicLink() ? statSync(path, { throwIfNoEntry: false }) : entry
    const isFolder = followed?.isDirectory() ?? false
    return {
      path,
      shown:
        file === '.' ? entry.name : Buffer.concat([shown, shown.at(-1) === 47 ? Buffer.alloc(0) : slash, entry.name]),
      isFolder,
      isFile: followed?.isFile() ?? false,
      key: isFolder ? Buffer.concat([entry.name, slash]) : entry.name,
    }
  })
  items.sort((a, b) => Buffer.compare(a.key, b.key))
  for (const item of items) {
    if (item.isFolder) yield* walk(item.path, item.shown, here)
    else if (item.isFile) {
      const name = item.shown.toString()
      if (FITS_NAME.test(name) || beginsAsFits(item.path))
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
