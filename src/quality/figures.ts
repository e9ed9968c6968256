/** A number as a person reads it: three significant digits, no exponent between 0.001 and 99,999. */
export function figure(value: number, digits = 3): string {
  if (!Number.isFinite(value)) return 'no value'
  const size = Math.abs(value)
  if (size >= 1000 && size < 1e6) return String(Math.round(value))
  if (size !== 0 && (size < 0.001 || size >= 1e6)) return value.toExponential(1)
  return String(Number(value.toPrecision(digits)))
}

/** A value with its standard error, both to the second digit of the error: '251.3 ± 7.5'. */
export function withError(value: number, error: number): string {
  if (!(error > 0) || !Number.isFinite(error)) return figure(value)
  const decimals = Math.min(4, Math.max(0, 1 - Math.floor(Math.log10(error))))
  return `${value.toFixed(decimals)} ± ${error.toFixed(decimals)}`
}

/** A share as a percentage with at most two significant digits. */
export function percent(share: number): string {
  return `${figure(100 * share, 2)} %`
}

/** A small probability in words: two digits, or 'below 0.001'. */
export function chance(probability: number): string {
  return probability < 0.001 ? 'below 0.001' : figure(probability, 2)
}
