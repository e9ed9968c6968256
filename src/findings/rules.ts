import type { Finding, FindingRule } from './types.ts'

/** Makes a finding of a rule: the level and unit are the rule's unless given. Its text begins with a capital. */
export function finding(
  rules: Readonly<Record<string, FindingRule>>,
  code: string,
  text: string,
  given: { readonly value?: number; readonly limit?: number; readonly level?: Finding['level'] } = {},
): Finding {
  const rule = rules[code]
  if (!rule) throw new RangeError(`finding requires a known code, got ${code}`)
  const { value, limit, level } = given
  return {
    level: level ?? rule.level,
    code,
    text: sentence(text),
    ...(value === undefined ? {} : { value }),
    ...(limit === undefined ? {} : { limit }),
    ...(rule.unit === undefined ? {} : { unit: rule.unit }),
  }
}

/** The text with a capital where it begins with a plain word; names of files, keywords and columns stay as they are. */
function sentence(text: string): string {
  return /^[a-z]+(?=[ ,:]|$)/.test(text) ? text.charAt(0).toUpperCase() + text.slice(1) : text
}
