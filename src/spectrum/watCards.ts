import type { Header } from '../fits/types.ts'

/**
 * Text of the numbered cards `WATn_001`, `WATn_002` ... joined; '' when there is none. Each card but the last is 68
 * characters long, trailing blanks included, since a word may be broken at its end.
 */
export function attributeText(header: Header, axis: number): string {
  const parts: string[] = []
  for (let i = 1; ; i++) {
    const value = header.get(`WAT${axis}_${String(i).padStart(3, '0')}`)?.value
    if (typeof value !== 'string') break
    parts.push(value)
  }
  return parts.map((part, i) => (i < parts.length - 1 ? part.padEnd(68) : part)).join('')
}

/** The pairs `key=value` of an attribute text, keys in lower case; values may stand in double quotes. */
export function attributes(text: string): ReadonlyMap<string, string> {
  const found = new Map<string, string>()
  for (const [, key, quoted, plain] of text.matchAll(/([A-Za-z_]\w*)\s*=\s*(?:"([^"]*)"?|(\S+))/g))
    found.set(key.toLowerCase(), quoted ?? plain)
  return found
}
