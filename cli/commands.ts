import type { Options } from './args.ts'

/** Runs the command; returns the exit status. Each command is loaded only when it is asked for. */
export async function runCommand(options: Options, version: string): Promise<number> {
  switch (options.command) {
    case 'night':
      return (await import('./commands/night.ts')).runNight(options, version)
    case 'classify':
    case 'measure':
    case 'check':
      return (await import('./commands/tables.ts')).runTables(options, version)
    case 'describe':
      return (await import('./commands/describe.ts')).runDescribe(options)
    case 'settings':
      return (await import('./commands/settings.ts')).runSettings(options)
    case 'demo':
      return (await import('./commands/demo.ts')).runDemo(options)
  }
}
