const GREEK: Readonly<Record<string, string>> = { alpha: 'α', beta: 'β', gamma: 'γ', delta: 'δ', epsilon: 'ε' }

/** A feature's key as a person writes it: 'Hβ', 'Ca K', 'Fe I 5270', 'TiO 7050'. */
export function featureName(feature: string): string {
  return feature
    .replace(/^H(alpha|beta|gamma|delta|epsilon)/, (_, name: string) => `H${GREEK[name]}`)
    .replace(/^([A-Z][a-z]?)(IV|I{1,3})(?=\d|$)/, '$1 $2')
    .replace(/([A-Za-z])(\d{4})/, '$1 $2')
    .replace(/^(Ca|Na)([A-Z])$/, '$1 $2')
    .replace(/^Gband$/, 'G band')
    .replace(/^CaHHepsilon$/, 'Ca H + Hε')
    .replace(/(Core|core|Wide|Narrow)$/, (word) => ` ${word.toLowerCase()}`)
    .replace(/^Ca([HK]) /, 'Ca $1 ')
    .replace(/^Paschen(\d)/, 'Paschen $1')
    .replace(/^Mgb$/, 'Mg b')
}
