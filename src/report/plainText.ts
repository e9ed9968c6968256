/** Control, format, surrogate, private and unassigned characters, and every kind of line or space separator. */
const UNPRINTABLE = /[\p{C}\p{Z}]+/gu

/**
 * Text that can stand on one line of a page: canonically composed (Unicode NFC), every run of control characters,
 * direction marks and spaces as one space, none at the ends.
 */
export function plainText(text: string): string {
  return text.normalize('NFC').replace(UNPRINTABLE, ' ').trim()
}
