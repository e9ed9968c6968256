import { readFileSync } from 'node:fs'
import { UsageError } from '../src/errors.ts'
import { SETTING_SPECS } from '../src/pipeline/settingsTable.ts'
import { settingsInForce, type InForce } from '../src/pipeline/settingsInForce.ts'
import { resolveSettings } from '../src/settings/resolveSettings.ts'
import type { Settings, SettingValue } from '../src/settings/types.ts'
import type { Options } from './args.ts'
import { reason } from './files.ts'

/** The settings in force: defaults, then the file of --config, then the command line. */
export function readSettings(options: Options): Settings {
  const given: Record<string, SettingValue> = options.paper ? { 'pages.paper': options.paper } : {}
  return resolveSettings(
    SETTING_SPECS,
    options.config === undefined ? undefined : { name: options.config, text: readText(options.config, '--config') },
    given,
  )
}

/** The settings as the stages take them. */
export function inForceOf(settings: Settings): InForce {
  return settingsInForce(Object.fromEntries([...settings].map(([key, { value }]) => [key, value])))
}

/** A text file the user named with an option. */
export function readText(path: string, option: string): string {
  try {
    return readFileSync(path, 'utf8').replace(/^\uFEFF/, '')
  } catch (error) {
    throw new UsageError(`${option} requires a readable file, got ${reason(error)} for ${path}`, { cause: error })
  }
}
