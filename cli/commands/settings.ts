import { SETTING_SPECS } from '../../src/pipeline/settingsTable.ts'
import { settingsToml } from '../../src/settings/resolveSettings.ts'
import type { Settings } from '../../src/settings/types.ts'
import type { Options } from '../args.ts'
import { UsageError } from '../../src/errors.ts'
import { inForceOf, readSettings } from '../settingsFile.ts'

/** Prints every setting in force: as TOML to start a file from, or one a line with its origin. */
export function runSettings(options: Options): number {
  const settings = readSettings(options)
  inForceOf(settings)
  const format = options.format ?? 'toml'
  if (format === 'toml') process.stdout.write(settingsToml(settings))
  else if (format === 'jsonl') for (const line of records(settings)) process.stdout.write(`${JSON.stringify(line)}\n`)
  else if (format === 'table') process.stdout.write(table(settings))
  else throw new UsageError(`settings requires --format table or jsonl (or none for TOML), got ${format}`)
  return 0
}

function records(settings: Settings): Record<string, unknown>[] {
  return [...settings.values()].map(({ spec, value, origin, line }) => ({
    key: spec.key,
    value,
    unit: spec.unit ?? null,
    origin: line === undefined ? origin : `${origin}, line ${line}`,
    default: spec.default,
    meaning: spec.meaning,
    source: spec.source,
  }))
}

function table(settings: Settings): string {
  const widest = Math.max(...SETTING_SPECS.map((spec) => spec.key.length))
  return records(settings)
    .map(
      (r) =>
        `${String(r.key).padEnd(widest)}  ${JSON.stringify(r.value)}${r.unit ? ` ${String(r.unit)}` : ''}  (${String(r.origin)})  ${String(r.meaning)}\n`,
    )
    .join('')
}
