export type SettingValue = number | boolean | string

/** One setting: what it means, what it may be, and where its default comes from. */
export interface SettingSpec {
  /** 'section.name', both lower case with hyphens. */
  readonly key: string
  readonly default: SettingValue
  readonly unit?: string
  readonly min?: number
  readonly max?: number
  readonly choices?: readonly string[]
  /** One sentence: what the program does with it. */
  readonly meaning: string
  /** Citation of the default, or "common practice, no source". */
  readonly source: string
}

/** Where a value in force came from. */
export type SettingOrigin = 'default' | 'file' | 'command line'

/** One setting in force, and where its value came from. */
export interface Setting {
  readonly spec: SettingSpec
  readonly value: SettingValue
  readonly origin: SettingOrigin
  /** Line of the settings file, from 1. */
  readonly line?: number
}

/** All settings in force, in the order of their table. */
export type Settings = ReadonlyMap<string, Setting>
