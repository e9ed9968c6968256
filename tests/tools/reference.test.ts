import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { COLUMNS } from '../../src/report/columns.ts'
import { TABLE_NAMES } from '../../src/report/row.ts'
import { readmeWith, referencePage } from './referenceText.ts'

const read = (path: string): string => readFileSync(fileURLToPath(new URL(`../../${path}`, import.meta.url)), 'utf8')

describe('README and reference', () => {
  it('say what the tables of the program say (npm run reference makes them anew)', () => {
    expect(read('reports/reference.md')).toBe(referencePage())
    const readme = read('README.md')
    expect(readme).toBe(readmeWith(readme))
  })

  it('give every column of every table', () => {
    const readme = read('README.md')
    for (const name of TABLE_NAMES)
      for (const column of COLUMNS[name]) expect(readme).toContain(`| \`${column.name}\` |`)
  })
})
