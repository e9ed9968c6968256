import { READING_RULES } from '../findings/reading.ts'
import { finding } from '../findings/rules.ts'
import type { Finding, FindingRule, Note } from '../findings/types.ts'

const RULES: Readonly<Record<string, FindingRule>> = READING_RULES

/** The notes of the reader as findings, each with the level of its rule; a code without a rule is a plain note. */
export function readingFindings(notes: readonly Note[]): readonly Finding[] {
  return notes.map(({ code, text }) => {
    const isKnown = RULES[code] !== undefined
    // A reason that stopped one HDU is, beside a spectrum from another, only a remark.
    const level = isKnown && RULES[code].level === 'fault' ? { level: 'note' as const } : {}
    return finding(RULES, isKnown ? code : 'format-note', text, level)
  })
}
