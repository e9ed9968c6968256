import { COMMAND_HELP, COMMANDS, OPTION_HELP } from '../../cli/args.ts'
import { FEATURE_RULES } from '../../src/findings/features.ts'
import { NIGHT_RULES } from '../../src/findings/night.ts'
import { QUALITY_RULES } from '../../src/findings/quality.ts'
import { READING_RULES } from '../../src/findings/reading.ts'
import type { FindingRule } from '../../src/findings/types.ts'
import { TYPING_RULES } from '../../src/findings/typing.ts'
import { VELOCITY_RULES } from '../../src/findings/velocity.ts'
import { SETTING_SPECS } from '../../src/pipeline/settingsTable.ts'
import { COLUMNS, TABLE_TITLES } from '../../src/report/columns.ts'
import { TABLE_NAMES } from '../../src/report/row.ts'
import { BANDS } from '../../src/tables/bands.ts'
import { ALL_LINES } from '../../src/tables/lines.ts'
import { SOURCES } from '../../src/tables/sources.ts'
import type { Source } from '../../src/tables/types.ts'

const cell = (text: string): string => text.replaceAll('|', '\\|').replaceAll('\n', ' ')
const table = (head: readonly string[], rows: readonly (readonly string[])[]): string =>
  [head, head.map(() => '---'), ...rows].map((row) => `| ${row.map(cell).join(' | ')} |`).join('\n')

/** Every column of every table with its unit and meaning. */
export function columnTables(): string {
  return TABLE_NAMES.map(
    (name) =>
      `**\`${name}\`** ${TABLE_TITLES[name]}.\n\n${table(
        ['column', 'unit', 'meaning'],
        COLUMNS[name].map((c) => [`\`${c.name}\``, c.unit || '–', c.description]),
      )}`,
  ).join('\n\n')
}

/** Commands and options as `--help` has them. */
export function commandTables(): string {
  const commands = COMMANDS.map((name) => [
    `\`darkline ${name} ${COMMAND_HELP[name].arguments}\``.replace(' `', '`'),
    COMMAND_HELP[name].describe,
  ])
  const options = Object.entries(OPTION_HELP).map(([name, help]) => [
    `\`--${name}\``,
    help.for ? help.for.map((c) => `\`${c}\``).join(', ') : 'all',
    `${help.describe}${help.choices ? ` (${help.choices.join(', ')})` : ''}`,
  ])
  return `${table(['command', 'what it does'], commands)}\n\n${table(['option', 'of', 'meaning'], options)}`
}

function findingTable(rules: Readonly<Record<string, FindingRule>>): string {
  return table(
    ['code', 'level', 'what it says', 'what to do', 'unit', 'source'],
    Object.entries(rules).map(([code, r]) => [
      `\`${code}\``,
      r.level,
      r.meaning,
      r.remedy ?? '–',
      r.unit ?? '–',
      r.source ?? '–',
    ]),
  )
}

const citation = (key: string): string => (SOURCES as Readonly<Record<string, Source>>)[key]?.citation ?? key

/** The whole longer reference. */
export function referencePage(): string {
  const settings = SETTING_SPECS.map((s) => [
    `\`${s.key}\``,
    JSON.stringify(s.default),
    s.unit ?? '–',
    s.meaning,
    s.source,
  ])
  const bands = BANDS.map((b) => [
    `\`${b.feature}\``,
    b.species,
    b.unit,
    range(b.blue),
    range(b.band),
    range(b.red),
    citation(b.source),
  ])
  const lines = ALL_LINES.map((l) => [
    `\`${l.feature}\``,
    l.species,
    l.wavelength.toFixed(3),
    l.levels || '–',
    `${citation(l.source)}${l.fromMemory ? ' (from memory)' : ''}`,
  ])
  const sources = Object.entries(SOURCES as Readonly<Record<string, Source>>).map(([key, s]) => [
    key,
    s.citation,
    s.doi ?? '–',
    `${s.changed ?? ''}${s.fromMemory ? ' from memory' : ''}`.trim() || '–',
  ])
  return `# Reference

Made by \`npm run reference\` from the tables the program uses; do not edit by hand.

## Commands and options

${commandTables()}

## Tables

An absent value is an empty cell (CSV), null (JSON Lines) or the format's own null. Equivalent widths are positive in absorption: W = ∫(1 − F/Fc) dλ. In CSV a text that begins with = + - @, tab or return has an apostrophe in front, so that no spreadsheet runs it.

${columnTables()}

## Settings

\`darkline settings\` prints these as TOML; \`--config FILE\` overrides any of them.

${table(['key', 'default', 'unit', 'meaning', 'source'], settings)}

## Findings

### Of reading

${findingTable(READING_RULES)}

### Of a spectrum or frame

${findingTable(QUALITY_RULES)}

${findingTable(FEATURE_RULES)}

${findingTable(VELOCITY_RULES)}

${findingTable(TYPING_RULES)}

### Of the night

${findingTable(NIGHT_RULES)}

## Side-band features (Å, air, rest)

${table(['feature', 'species', 'unit', 'blue side', 'band', 'red side', 'source'], bands)}

## Lines (Å, air, rest)

${table(['feature', 'species', 'wavelength', 'levels', 'source'], lines)}

## Sources

${table(['key', 'citation', 'DOI', 'what was changed'], sources)}
`
}

const range = ([low, high]: readonly [number, number]): string => `${low}–${high}`

const MARKED = /<!-- (columns|commands):begin -->[\s\S]*?<!-- \1:end -->/g

/** The README with its generated parts made anew; everything outside the marks stays as it is. */
export function readmeWith(text: string): string {
  return text.replace(
    MARKED,
    (_, part: string) =>
      `<!-- ${part}:begin -->\n${part === 'columns' ? columnTables() : commandTables()}\n<!-- ${part}:end -->`,
  )
}
