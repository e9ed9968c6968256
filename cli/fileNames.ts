/**
 * A file name for each target: letters, digits, + - . kept, the rest as '-', at most 80 characters; names that would
 * fall together, in capitals or not, get a number.
 */
export function fileNames(names: readonly string[]): string[] {
  const used = new Set<string>()
  return names.map((name) => {
    const plain =
      name
        .normalize('NFKC')
        .replace(/[^\p{L}\p{N}+.-]+/gu, '-')
        .slice(0, 80)
        .replace(/^[-.]+|[-.\p{Cs}]+$/gu, '') || 'target'
    let own = plain
    for (let k = 2; used.has(own.toLowerCase()); k++) own = `${plain}-${k}`
    used.add(own.toLowerCase())
    return own
  })
}
