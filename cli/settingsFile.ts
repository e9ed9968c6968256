import { createHash } from 'node:crypto'
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

/** What site.longitude and site.latitude are where nobody gave them. */
const NOT_KNOWN = 999

/** The settings as the stages take them. */
export function inForceOf(settings: Settings): InForce {
  const [longitude, latitude] = [
    Number(settings.get('site.longitude')?.value),
    Number(settings.get('site.latitude')?.value),
  ]
  const [isLongitude, isLatitude] = [Math.abs(longitude) <= 360, Math.abs(latitude) <= 90]
  if (!isLongitude && longitude !== NOT_KNOWN)
    throw new UsageError(`site.longitude requires -180 to 360 °, or ${NOT_KNOWN} for not known, got ${longitude}`)
  if (!isLatitude && latitude !== NOT_KNOWN)
    throw new UsageError(`site.latitude requires -90 to 90 °, or ${NOT_KNOWN} for not known, got ${latitude}`)
  if (isLongitude !== isLatitude)
    throw new UsageError(
      `site requires longitude and latitude together, got ${isLongitude ? 'longitude' : 'latitude'} alone`,
    )
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

/** Hex SHA-256 of the settings in force: two outputs with one digest were made by the same limits. */
export function settingsDigest(inForce: InForce): string {
  return createHash('sha256').update(JSON.stringify(inForce)).digest('hex')
}
