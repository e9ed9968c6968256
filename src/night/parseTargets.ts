import { FormatError } from '../errors.ts'
import { NIGHT_RULES } from '../findings/night.ts'
import { finding } from '../findings/rules.ts'
import type { Finding } from '../findings/types.ts'
import { csvCells } from './csvCells.ts'
import type { CsvCell } from './csvCells.ts'
import { parseType } from '../typing/typeName.ts'
import { plainName } from './targetName.ts'
import type { Target } from './types.ts'

/** Columns of a target list; only `object` is required. */
export const TARGET_COLUMNS = [
  'object',
  'ra',
  'dec',
  'mag',
  'pm_ra_mas',
  'pm_dec_mas',
  'epoch',
  'expected_type',
  'wanted_snr',
  'priority',
  'note',
] as const

type TargetColumn = (typeof TARGET_COLUMNS)[number]

interface Rule {
  readonly words: string
  read(text: string): number | undefined
}

const NUMERIC: Readonly<Partial<Record<TargetColumn, Rule>>> = {
  ra: { words: 'degrees from 0 to 360 or hours as hh:mm:ss', read: (text) => within(angle(text, 15), 0, 360) },
  dec: { words: 'degrees from -90 to 90 or dd:mm:ss', read: (text) => within(angle(text, 1), -90, 90) },
  mag: { words: 'a magnitude from -30 to 40', read: (text) => within(decimal(text), -30, 40) },
  pm_ra_mas: { words: 'milliarcseconds a year, at most 20000', read: (text) => within(decimal(text), -20000, 20000) },
  pm_dec_mas: { words: 'milliarcseconds a year, at most 20000', read: (text) => within(decimal(text), -20000, 20000) },
  epoch: { words: 'a year from 1800 to 2200', read: (text) => within(decimal(text.replace(/^[JB]/i, '')), 1800, 2200) },
  wanted_snr: { words: 'a number above 0', read: (text) => within(decimal(text), Number.MIN_VALUE, 1e6) },
  priority: {
    words: 'a number above 0 (1 is the most urgent)',
    read: (text) => within(decimal(text), Number.MIN_VALUE, 1e6),
  },
}

/**
 * Targets of a list in delimited text with one row of column names, and what is wrong with it. A cell that breaks its
 * rule is left out and reported with line, column and value; a row without a name is left out. Positions are decimal
 * degrees or sexagesimal (right ascension then in hours).
 *
 * @param name  of the list, for messages
 * @throws      FormatError when there is no row of names or no column `object`
 */
export function parseTargets(
  text: string,
  name: string,
): { readonly targets: readonly Target[]; readonly findings: readonly Finding[] } {
  const [head, ...rows] = csvCells(text)
  const names = (head ?? []).map((cell) => cell.text.trim().toLowerCase())
  if (!names.includes('object'))
    throw new FormatError('target-list', `target list requires a column object, got ${names.join(', ') || 'nothing'}`, {
      file: name,
    })
  const findings: Finding[] = []
  for (const [i, column] of names.entries()) {
    if ((TARGET_COLUMNS as readonly string[]).includes(column)) continue
    const cell = (head ?? [])[i]
    const text = `${name}, line ${cell.line}, column ${cell.column}: the column '${column}' is not known and was passed over`
    findings.push(finding(NIGHT_RULES, 'target-list-column', text))
  }
  const seen = new Map<string, number>()
  const targets = rows.flatMap((cells) => {
    const target = targetOf(cells, names, name, findings)
    if (!target) return []
    const key = plainName(target.object)
    const before = seen.get(key)
    if (before !== undefined)
      findings.push(
        finding(
          NIGHT_RULES,
          'target-listed-twice',
          `${name}, line ${cells[0].line}: ${target.object} is listed on line ${before} too`,
        ),
      )
    else seen.set(key, cells[0].line)
    return [target]
  })
  return { targets, findings }
}

function targetOf(
  cells: readonly CsvCell[],
  names: readonly string[],
  list: string,
  findings: Finding[],
): Target | undefined {
  const say = (cell: CsvCell, column: string, rule: string): void => {
    const text = `${list}, line ${cell.line}, column ${cell.column}: ${column} requires ${rule}, got '${cell.text}'`
    findings.push(finding(NIGHT_RULES, 'target-list-cell', text))
  }
  const cellOf = (column: TargetColumn): CsvCell | undefined => {
    const cell = cells[names.indexOf(column)]
    return cell && cell.text.trim() !== '' ? cell : undefined
  }
  const typeOf = (cell: CsvCell | undefined): string | undefined => {
    const text = cell?.text.trim()
    // Kept all the same: it is shown beside the type found, though no probability can be given for it.
    if (cell && text && !parseType(text)) {
      const said = `${list}, line ${cell.line}, column ${cell.column}: '${text}' is no spectral type the program knows, so no probability is given for it`
      findings.push(finding(NIGHT_RULES, 'expected-type-unknown', said))
    }
    return text
  }
  const object = cellOf('object')
  if (!object) {
    say(cells[0], 'object', 'a name')
    return undefined
  }
  const numberOf = (column: TargetColumn): number | undefined => {
    const cell = cellOf(column)
    const rule = NUMERIC[column]
    if (!cell || !rule) return undefined
    const value = rule.read(cell.text.trim())
    if (value === undefined) say(cell, column, rule.words)
    return value
  }
  return dropAbsent({
    object: object.text.trim(),
    ra: numberOf('ra'),
    dec: numberOf('dec'),
    mag: numberOf('mag'),
    pmRa: numberOf('pm_ra_mas'),
    pmDec: numberOf('pm_dec_mas'),
    epoch: numberOf('epoch'),
    expectedType: typeOf(cellOf('expected_type')),
    wantedSnr: numberOf('wanted_snr'),
    priority: numberOf('priority'),
    note: cellOf('note')?.text.trim(),
  })
}

function dropAbsent(target: Target): Target {
  return Object.fromEntries(Object.entries(target).filter(([, value]) => value !== undefined)) as unknown as Target
}

function within(value: number | undefined, from: number, to: number): number | undefined {
  return value !== undefined && value >= from && value <= to ? value : undefined
}

function decimal(text: string): number | undefined {
  return /^[+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?$/i.test(text) ? Number(text) : undefined
}

/** Degrees of 'a', 'a:b:c', 'a b c', '12h30m5.2s' or '-1d20m3s'; sexagesimal parts count `perUnit` degrees each. */
function angle(text: string, perUnit: number): number | undefined {
  const plain = decimal(text)
  if (plain !== undefined) return plain
  const parts =
    /^([+-]?)\s*(\d{1,3})(?:[:hd°\s]+)(\d{1,2}(?:\.\d*)?)(?:[:m'′\s]+(\d{1,2}(?:\.\d*)?)?)?(?:[s"″]?)$/i.exec(
      text.replace(/−/g, '-'),
    )
  if (!parts) return undefined
  const [, sign, whole, minutes, seconds = '0'] = parts
  if (Number(minutes) >= 60 || Number(seconds) >= 60) return undefined
  const size = Number(whole) + Number(minutes) / 60 + Number(seconds) / 3600
  return (sign === '-' ? -1 : 1) * size * perUnit
}
