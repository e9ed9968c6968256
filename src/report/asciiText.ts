const WORDS: Readonly<Record<string, string>> = {
  Å: 'Angstrom',
  '\u212b': 'Angstrom',
  '−': '-',
  '–': '-',
  '—': '-',
  '…': '...',
  '×': 'x',
  '÷': '/',
  '±': '+-',
  '≤': '<=',
  '≥': '>=',
  '°': 'deg',
  '″': '"',
  '′': "'",
  '’': "'",
  '‘': "'",
  '“': '"',
  '”': '"',
  α: 'alpha',
  β: 'beta',
  γ: 'gamma',
  δ: 'delta',
  ε: 'epsilon',
  λ: 'lambda',
  σ: 'sigma',
  Δ: 'Delta',
}

/**
 * The text in printable ASCII, for formats that allow no other: Å, Greek letters and signs in words, accents dropped
 * (Unicode NFKD), '?' for what is left.
 */
export function asciiText(text: string): string {
  let out = ''
  for (const letter of text.normalize('NFC')) {
    const point = letter.codePointAt(0) ?? 0
    out += WORDS[letter] ?? (point < 128 ? letter : letter.normalize('NFKD').replace(/\p{M}/gu, ''))
  }
  return out.replace(/[^ -~]/gu, '?')
}
