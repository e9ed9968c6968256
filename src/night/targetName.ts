/** Catalogues whose numbers carry the sign of a declination zone. */
const ZONES = /^(?:bd|cd|cpd)$/

/**
 * A star's name by which its spellings are one: 'HD 12345', 'HD12345', 'hd_12345' and 'HD012345' give 'hd12345'. A sign
 * that belongs to a declination zone or a coordinate ('BD-00 3227', 'J0324+3410') is kept, others are separators.
 */
export function plainName(name: string): string {
  const letters = name
    .normalize('NFKD')
    .toLowerCase()
    .replace(/[−–]/g, '-')
    .replace(/[^a-z0-9+.-]/g, '')
  let plain = ''
  for (let i = 0; i < letters.length; i++) {
    const letter = letters[i]
    const isBeforeDigit = /\d/.test(letters[i + 1] ?? '')
    const isAfterDigit = /\d/.test(plain.slice(-1))
    if (letter === '.' && !(isBeforeDigit && isAfterDigit)) continue
    if ((letter === '+' || letter === '-') && !(isBeforeDigit && (isAfterDigit || ZONES.test(plain)))) continue
    plain += letter
  }
  return plain.replace(/^([a-z]+[+-]?)0+(?=\d)/, '$1')
}
