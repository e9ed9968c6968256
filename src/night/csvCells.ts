/** One cell with where it begins, both from 1. */
export interface CsvCell {
  readonly text: string
  readonly line: number
  readonly column: number
}

/**
 * Cells of delimited text, row by row (RFC 4180: quotes, doubled quotes, line ends inside quotes). The delimiter is
 * whichever of comma, semicolon and tab stands most often in the first row; a byte-order mark, empty lines and lines
 * that begin with '#' are passed over. Blanks around a cell are cut off unless they are quoted.
 */
export function csvCells(text: string): readonly (readonly CsvCell[])[] {
  const body = text.replace(/^\uFEFF/, '')
  const delimiter = delimiterOf(body)
  const rows: CsvCell[][] = []
  let row: CsvCell[] = []
  let at = 0
  let line = 1
  let lineStart = 0
  while (at <= body.length) {
    const begin = { line, column: at - lineStart + 1 }
    if (row.length === 0 && body[at] === '#') {
      while (at < body.length && body[at] !== '\n') at++
      at++
      line++
      lineStart = at
      continue
    }
    let cell = ''
    while (body[at] === ' ') at++
    if (body[at] === '"') {
      at++
      while (at < body.length && (body[at] !== '"' || body[at + 1] === '"')) {
        if (body[at] === '"') at++
        if (body[at] === '\n') {
          line++
          lineStart = at + 1
        }
        cell += body[at++]
      }
      at++
      while (at < body.length && body[at] !== delimiter && body[at] !== '\n') at++
    } else {
      const from = at
      while (at < body.length && body[at] !== delimiter && body[at] !== '\n') at++
      cell = body.slice(from, at).trim()
    }
    row.push({ text: cell, ...begin })
    if (body[at] === delimiter) {
      at++
      continue
    }
    if (row.some((one) => one.text !== '')) rows.push(row)
    row = []
    at++
    line++
    lineStart = at
  }
  return rows
}

function delimiterOf(body: string): string {
  const first = body.split('\n').find((one) => one.trim() !== '' && !one.startsWith('#')) ?? ''
  const counted = [',', ';', '\t'].map((mark) => ({ mark, count: first.split(mark).length }))
  return counted.reduce((most, one) => (one.count > most.count ? one : most)).mark
}
