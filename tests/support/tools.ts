import { spawnSync } from 'node:child_process'

/**
 * True where the outside tool runs. Where it does not, a test skips itself, except under CI=true, where the missing
 * tool is an error: the run would be green without having checked anything.
 */
export function requireTool(command: string, args: readonly string[] = ['--version']): boolean {
  const found = spawnSync(command, [...args], { stdio: 'ignore' }).error === undefined
  if (!found && process.env.CI === 'true')
    throw new Error(`tests require ${command} when CI=true, got none on this machine`)
  return found
}

/** True where Debian's own Python has the module (the reference libraries for FITS, times and numerics). */
export function requirePython(module: string): boolean {
  const found = spawnSync('/usr/bin/python3', ['-c', `import ${module}`], { stdio: 'ignore' }).status === 0
  if (!found && process.env.CI === 'true') throw new Error(`tests require Python's ${module} when CI=true, got none`)
  return found
}

/** Standard output of a short program run by Debian's Python; throws with its standard error when it fails. */
export function runPython(program: string, args: readonly string[] = []): string {
  const result = spawnSync('/usr/bin/python3', ['-c', program, ...args], { encoding: 'utf8', maxBuffer: 1 << 28 })
  if (result.status !== 0) throw new Error(`python3 requires status 0, got ${result.status}: ${result.stderr}`)
  return result.stdout
}
