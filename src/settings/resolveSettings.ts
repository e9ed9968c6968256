import { parse, TomlError } from 'smol-toml'
import { UsageError } from '../errors.ts'
import type { Setting, Settings, SettingSpec, SettingValue } from './types.ts'

/** A settings file as text; `name` is used in messages only. */
export interface SettingsFile {
  readonly name: string
  readonly text: string
}

/**
 * The settings in force: defaults of `specs`, then the file (TOML 1.0), then `given` (from the command line).
 *
 * @throws UsageError with file, line, column, rule and value for the first thing that is wrong; an unknown key is
 *         wrong, since a misspelt threshold would otherwise be silently the default
 */
export function resolveSettings(
  specs: readonly SettingSpec[],
  file?: SettingsFile,
  given: Readonly<Record<string, SettingValue>> = {},
): Settings {
  const fromFile = file ? readFile(specs, file) : new Map<string, { value: SettingValue; line?: number }>()
  const settings = new Map<string, Setting>()
  for (const spec of specs) {
    const line = fromFile.get(spec.key)
    if (spec.key in given) {
      const problem = broken(spec, given[spec.key])
      if (problem) throw new UsageError(`${spec.key} requires ${problem}, got ${shown(given[spec.key])}`)
      settings.set(spec.key, { spec, value: given[spec.key], origin: 'command line' })
    } else if (line) settings.set(spec.key, { spec, value: line.value, origin: 'file', line: line.line })
    else settings.set(spec.key, { spec, value: spec.default, origin: 'default' })
  }
  return settings
}

/** One TOML document that gives every setting with its meaning, unit, source and value: a file to start from. */
export function settingsToml(settings: Settings): string {
  const lines: string[] = []
  let section = ''
  for (const { spec, value, origin } of settings.values()) {
    const [head, name] = splitKey(spec.key)
    if (head !== section) lines.push(...(section ? [''] : []), `[${head}]`)
    section = head
    const range = [
      spec.unit ? `unit ${spec.unit}` : '',
      spec.min === undefined ? '' : `from ${spec.min}`,
      spec.max === undefined ? '' : `to ${spec.max}`,
      spec.choices ? `one of ${spec.choices.join(', ')}` : '',
      origin === 'default' ? '' : `default ${JSON.stringify(spec.default)}`,
    ].filter(Boolean)
    lines.push(`# ${spec.meaning}${range.length ? ` (${range.join('; ')})` : ''}. Source: ${spec.source}`)
    lines.push(`${name} = ${JSON.stringify(value)}`)
  }
  return `${lines.join('\n')}\n`
}

function splitKey(key: string): [string, string] {
  const dot = key.indexOf('.')
  return [key.slice(0, dot), key.slice(dot + 1)]
}

function readFile(
  specs: readonly SettingSpec[],
  file: SettingsFile,
): Map<string, { value: SettingValue; line?: number }> {
  let document: Record<string, unknown>
  try {
    document = parse(file.text)
  } catch (error) {
    if (!(error instanceof TomlError)) throw error
    const [what] = error.message.split('\n')
    throw new UsageError(
      `${file.name}, line ${error.line}, column ${error.column}: ${what.replace(/^Invalid TOML document: /, 'TOML requires valid syntax, got ')}`,
      { cause: error },
    )
  }
  const known = new Map(specs.map((spec) => [spec.key, spec]))
  const sections = new Set(specs.map((spec) => splitKey(spec.key)[0]))
  const values = new Map<string, { value: SettingValue; line?: number }>()
  for (const [section, body] of Object.entries(document)) {
    if (sections.has(section) && (typeof body !== 'object' || body === null || Array.isArray(body))) {
      throw new UsageError(
        `${place(file, section)}: settings require [${section}] once as a table, got ${Array.isArray(body) ? 'a list of tables' : shown(body)}`,
      )
    }
    if (!sections.has(section) || typeof body !== 'object' || body === null) {
      throw new UsageError(
        `${place(file, section)}: settings require one of the sections ${[...sections].join(', ')}, got ${section}${nearest(section, [...sections])}`,
      )
    }
    for (const [name, value] of Object.entries(body)) {
      const key = `${section}.${name}`
      const spec = known.get(key)
      if (!spec)
        throw new UsageError(
          `${place(file, section, name)}: settings require a known key, got ${key}${nearest(key, [...known.keys()])}`,
        )
      const problem = broken(spec, value)
      if (problem)
        throw new UsageError(`${place(file, section, name)}: ${key} requires ${problem}, got ${shown(value)}`)
      values.set(key, { value: value as SettingValue, line: position(file.text, section, name)?.line })
    }
  }
  return values
}

/** A value as the user wrote it, near enough: JSON has no word for numbers that are not finite. */
function shown(value: unknown): string {
  return typeof value === 'number' ? String(value) : JSON.stringify(value)
}

/** What the rule is that a value breaks, or undefined when it is fine. */
function broken(spec: SettingSpec, value: unknown): string | undefined {
  if (typeof value !== typeof spec.default)
    return `a ${typeof spec.default === 'string' ? 'text' : typeof spec.default}`
  if (spec.choices && !spec.choices.includes(value as string)) return `one of ${spec.choices.join(', ')}`
  if (typeof value !== 'number') return undefined
  const unit = spec.unit ? ` ${spec.unit}` : ''
  if (!Number.isFinite(value)) return 'a finite number'
  if (spec.min !== undefined && value < spec.min) return `at least ${spec.min}${unit}`
  if (spec.max !== undefined && value > spec.max) return `at most ${spec.max}${unit}`
  return undefined
}

function place(file: SettingsFile, section: string, name?: string): string {
  const at = position(file.text, section, name)
  return at ? `${file.name}, line ${at.line}, column ${at.column}` : file.name
}

/** Line and column, from 1, of a section's head or of a key within it. */
function position(text: string, section: string, name?: string): { line: number; column: number } | undefined {
  let inside = ''
  for (const [i, raw] of text.split('\n').entries()) {
    const head = /^\s*\[\s*"?([^\]"]+?)"?\s*\]/.exec(raw)
    if (head) {
      inside = head[1]
      if (inside === section && name === undefined) return { line: i + 1, column: raw.indexOf('[') + 1 }
    }
    const key = /^\s*("?)([A-Za-z0-9_.-]+)\1\s*=/.exec(raw)
    if (!key) continue
    const full = inside ? `${inside}.${key[2]}` : key[2]
    const wanted = name === undefined ? section : `${section}.${name}`
    if (full === wanted || (name === undefined && full.startsWith(`${section}.`)))
      return { line: i + 1, column: raw.indexOf(key[2]) + 1 }
  }
  return undefined
}

/** ' (nearest: X)' when a known word is within a third of the letters. */
function nearest(word: string, known: readonly string[]): string {
  let best: string | undefined
  let least = Math.floor(word.length / 3) + 1
  for (const candidate of known) {
    const distance = editDistance(word, candidate)
    if (distance < least) [best, least] = [candidate, distance]
  }
  return best ? ` (nearest: ${best})` : ''
}

/** Levenshtein distance (Levenshtein 1966). */
function editDistance(a: string, b: string): number {
  let previous = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i++) {
    const row = [i]
    for (let j = 1; j <= b.length; j++)
      row[j] = Math.min(previous[j] + 1, row[j - 1] + 1, previous[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1))
    previous = row
  }
  return previous[b.length]
}
