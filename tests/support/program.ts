import { spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const MAIN = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url))

/** What a run of the built program gave. */
export interface Run {
  readonly status: number | null
  readonly stdout: string
  readonly stderr: string
}

/** Runs the built program as a user would, with a bare environment. `npm test` builds before it tests. */
export function darkline(
  words: readonly string[],
  options: { readonly cwd?: string; readonly env?: Record<string, string> } = {},
): Run {
  if (!existsSync(MAIN))
    throw new Error('tests of the command line require the built program, got none: run npm run build')
  const { status, stdout, stderr } = spawnSync(process.execPath, [MAIN, ...words], {
    encoding: 'utf8',
    cwd: options.cwd,
    env: { PATH: process.env.PATH ?? '', NO_COLOR: '1', ...options.env },
    maxBuffer: 1 << 28,
  })
  return { status, stdout, stderr }
}
