/** Characters that move a terminal's cursor, colour it or turn its writing round: C0, C1 and the marks of direction. */
const UNPRINTABLE = /[\p{Cc}\u2028-\u202e\u2066-\u2069]/gu

/** The text on one line, safe for a terminal: whatever would steer it becomes '?'. */
export function printable(text: string): string {
  return text.replace(UNPRINTABLE, '?')
}
