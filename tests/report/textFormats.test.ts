import { parse } from 'csv-parse/sync'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { asciiText } from '../../src/report/asciiText.ts'
import { COLUMNS } from '../../src/report/columns.ts'
import { csvHead, csvLines } from '../../src/report/csv.ts'
import { jsonLines } from '../../src/report/jsonLines.ts'
import type { Row } from '../../src/report/row.ts'
import { tidyRow } from '../../src/report/row.ts'
import { HOSTILE_NAME } from '../support/oddTargets.ts'

const row = (values: Row): Row => tidyRow(COLUMNS.findings, values)

describe('csvLines', () => {
  it('writes records that end in CRLF, with quotes only where RFC 4180 asks for them', () => {
    const line = csvLines('findings', [row({ file: 'a,b', object: 'say "x"', value: -1.5, text: 'two\nlines' })])
    expect(line).toBe('"a,b",,,"say ""x""",,,-1.5,,,"two\nlines"\r\n')
  })

  // OWASP, "CSV Injection": the characters that make a spreadsheet take a cell for a formula.
  it.each(['=', '+', '-', '@', '\t', '\r'])('lets no text cell begin with %j', (start) => {
    const cell = parse(csvLines('findings', [row({ object: `${start}1+1` })]))[0][3]
    expect(cell).toBe(`'${start}1+1`)
  })

  it('gives back any text through an independent reader, but for the apostrophe', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), fc.double({ noNaN: true, noDefaultInfinity: true }), (text, value) => {
        const [head, cells] = parse(csvHead('findings') + csvLines('findings', [row({ object: text, value })]))
        expect(head).toEqual(COLUMNS.findings.map((c) => c.name))
        expect(cells[3].replace(/^'(?=[=+\-@\t\r])/, '')).toBe(text)
        expect(Number(cells[6])).toBe(Number(value.toPrecision(6)) + 0)
      }),
      { seed: 7, numRuns: 300 },
    )
  })
})

describe('jsonLines', () => {
  it('writes one object a line with every column in order, null where absent', () => {
    const text = jsonLines('findings', [row({ file: HOSTILE_NAME }), row({ value: 2 })])
    const lines = text
      .trimEnd()
      .split('\n')
      .map((line) => JSON.parse(line) as Record<string, unknown>)
    expect(lines).toHaveLength(2)
    expect(Object.keys(lines[0])).toEqual(COLUMNS.findings.map((c) => c.name))
    expect(lines[0].file).toBe(HOSTILE_NAME)
    expect(lines[1]).toMatchObject({ file: null, value: 2 })
  })
})

describe('asciiText', () => {
  it('says in words what ASCII lacks', () => {
    expect(asciiText('12 per Å, 3 σ, −5 … ü × 日')).toBe('12 per Angstrom, 3 sigma, -5 ... u x ?')
  })
  it('holds printable ASCII only', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        expect(asciiText(text)).toMatch(/^[ -~]*$/)
      }),
      { seed: 8 },
    )
  })
})
