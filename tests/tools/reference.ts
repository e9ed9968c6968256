// Writes what README.md and reports/reference.md say of columns, options, settings, findings, lines and sources, from
// the tables the program itself uses. `npm run reference`; a test fails when the papers and the tables differ.
import { readFileSync, writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { readmeWith, referencePage } from './referenceText.ts'

const at = (path: string): string => fileURLToPath(new URL(`../../${path}`, import.meta.url))
writeFileSync(at('reports/reference.md'), referencePage())
writeFileSync(at('README.md'), readmeWith(readFileSync(at('README.md'), 'utf8')))
