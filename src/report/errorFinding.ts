import type { Finding } from '../findings/types.ts'
import type { ErrorFacts } from '../quality/types.ts'

/** The finding that says why a file gave nothing: level fault, the error's own code, its message with the place. */
export function errorFinding(error: ErrorFacts): Finding {
  const place = [
    error.hdu === undefined ? '' : `HDU ${error.hdu}`,
    error.row === undefined ? '' : `row ${error.row}`,
    error.keyword === undefined ? '' : `keyword ${error.keyword}`,
    error.byte === undefined ? '' : `byte ${error.byte}`,
  ].filter((part) => part !== '')
  return { level: 'fault', code: error.code, text: [...place, error.message].join(', ') }
}
