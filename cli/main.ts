#!/usr/bin/env node
import { readFileSync } from 'node:fs'
import { FormatError, placeAndMessage, UsageError } from '../src/errors.ts'
import { readArguments } from './args.ts'
import { printable } from './printable.ts'
import { runCommand } from './commands.ts'

const version = (
  JSON.parse(
    readFileSync(
      new URL(import.meta.url.endsWith('.ts') ? '../package.json' : '../../package.json', import.meta.url),
      'utf8',
    ),
  ) as { version: string }
).version

/** Exit status: 0 done, nothing unusable; 1 done, something unreadable or unusable; 2 the command could not run. */
async function main(words: readonly string[]): Promise<number> {
  const request = await readArguments(words, version, process.stdout.columns ?? 100)
  if ('text' in request) {
    process.stdout.write(`${request.text}\n`)
    return 0
  }
  return runCommand(request.options, version)
}

// A reader that has seen enough (`| head`) closes the pipe: that is no error.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0)
  process.stderr.write(`darkline: standard output: the system answers ${error.code}\n`)
  process.exit(2)
})
// Nobody listens to the remarks any more: the results are still wanted.
process.stderr.on('error', () => undefined)

try {
  process.exitCode = await main(process.argv.slice(2))
} catch (error) {
  process.exitCode = 2
  if (error instanceof UsageError)
    process.stderr.write(`darkline: ${error.message.split('\n').map(printable).join('\n')}\n`)
  else if (error instanceof FormatError) process.stderr.write(`darkline: ${printable(placeAndMessage(error))}\n`)
  else if (error instanceof Error && 'code' in error && 'syscall' in error)
    process.stderr.write(
      `darkline: ${'path' in error ? String(error.path) : String(error.syscall)}: the system answers ${String(error.code)}\n`,
    )
  else {
    process.stderr.write(
      `darkline: this is a fault of the program itself; please report it with the file that caused it\n${error instanceof Error ? error.stack : String(error)}\n`,
    )
  }
}
