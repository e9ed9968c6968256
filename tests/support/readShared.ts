import { readFileSync } from 'node:fs'
import { inflateSource } from '../../src/fits/inflate.ts'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import { readSpectra } from '../../src/spectrum/readSpectra.ts'
import type { Spectrum } from '../../src/spectrum/types.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'
import { sharedPath } from './shared.ts'

/** The first spectrum of a file of the shared data, as the program reads it. */
export function readShared(relative: string): Spectrum {
  const source = inflateSource(memorySource(readFileSync(sharedPath(relative))))
  const [spectrum] = readSpectra(openFits(source), source, { keywords: KEYWORDS, fileName: relative }).spectra
  if (!spectrum) throw new RangeError(`${relative} requires a spectrum, got none`)
  return spectrum
}

/** Rows of a tab-separated table of the shared data by column name; lines that begin with # are left out. */
export function readSharedTable(relative: string): Record<string, string>[] {
  const [head, ...rows] = readFileSync(sharedPath(relative), 'utf8')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'))
    .map((line) => line.split('\t'))
  return rows.map((cells) => Object.fromEntries(head.map((name, k) => [name, cells[k] ?? ''])))
}
