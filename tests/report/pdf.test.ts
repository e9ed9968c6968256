import { spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pixelmatch from 'pixelmatch'
import { PNG } from 'pngjs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { compactPdf } from '../../src/report/compactPdf.ts'
import type { Drawing } from '../../src/report/drawing.ts'
import { encodePdf } from '../../src/report/pdf.ts'
import { layoutTargetPages } from '../../src/report/targetPages.ts'
import { GOLDEN_DRAWINGS, madeNightPages } from '../support/goldenDrawings.ts'
import { ODD_TARGETS } from '../support/oddTargets.ts'
import { FACE, FONTS, PROVENANCE } from '../support/pageFonts.ts'
import { requireTool } from '../support/tools.ts'

const META = { date: PROVENANCE.date, version: PROVENANCE.version }
const DRAWINGS: Readonly<Record<string, () => Drawing>> = {
  ...GOLDEN_DRAWINGS,
  hostile: () => layoutTargetPages(ODD_TARGETS.hostile(), { face: FACE, paper: 'A4', provenance: PROVENANCE }),
}

const folder = mkdtempSync(join(tmpdir(), 'pages-'))
const path = (name: string): string => join(folder, `${name}.pdf`)
const sizes = new Map<string, number>()
beforeAll(async () => {
  for (const [name, draw] of Object.entries(DRAWINGS)) {
    const bytes = await encodePdf(draw(), FONTS, META)
    sizes.set(name, bytes.length)
    writeFileSync(path(name), bytes)
  }
})
afterAll(() => rmSync(folder, { recursive: true }))

const run = (command: string, args: readonly string[]): { status: number | null; text: string } => {
  const { status, stdout, stderr } = spawnSync(command, [...args], { encoding: 'utf8', maxBuffer: 1 << 28 })
  return { status, text: stdout + stderr }
}
const names = Object.keys(DRAWINGS)

describe('encodePdf', () => {
  it('gives the same bytes for the same drawing, fonts and date', async () => {
    const once = await encodePdf(DRAWINGS['target-typed'](), FONTS, META)
    expect(Buffer.compare(once, readFileSync(path('target-typed')))).toBe(0)
    const later = await encodePdf(DRAWINGS['target-typed'](), FONTS, { ...META, date: new Date(0) })
    expect(Buffer.compare(once, later)).not.toBe(0)
  })

  it('keeps a target within 100 KB, also one with 65 features and three exposures', () => {
    for (const name of names.filter((n) => n !== 'night-5')) expect(sizes.get(name), name).toBeLessThan(100_000)
  })

  it.skipIf(!requireTool('qpdf'))('passes the checks of an independent reader', () => {
    for (const name of names) {
      const { status, text } = run('qpdf', ['--check', path(name)])
      expect(text).not.toMatch(/warning/i)
      expect(status, name).toBe(0)
    }
  })

  it.skipIf(!requireTool('pdffonts', ['-v']))('embeds subsets of all its fonts, with their characters', () => {
    for (const name of names) {
      const lines = run('pdffonts', [path(name)])
        .text.trim()
        .split('\n')
        .slice(2)
      expect(lines, name).toHaveLength(2)
      for (const line of lines) expect(line).toMatch(/^[A-Z]{6}\+DejaVuSans\S* .* yes yes yes /)
    }
  })

  it.skipIf(!requireTool('pdfinfo', ['-v']))('is tagged, titled and made on the date given', () => {
    const { text } = run('pdfinfo', [path('target-typed')])
    expect(text).toMatch(/Title:\s+Made 2: A8 III/)
    expect(text).toMatch(/Tagged:\s+yes/)
    expect(text).toMatch(/PDF version:\s+1\.7/)
    expect(run('pdfinfo', ['-isodates', path('target-typed')]).text).toMatch(/CreationDate:\s+2026-12-01T08:00:00Z/)
    expect(run('pdfinfo', ['-meta', path('hostile')]).text).toContain('pdfuaid:part')
  })

  it.skipIf(!requireTool('pdfinfo', ['-v']))('reads out in the order of its questions, words apart', () => {
    const { text } = run('pdfinfo', ['-struct-text', path('target-typed')])
    const parts = [
      'H1',
      'Made 2',
      'A8 III ± 1.1 subclasses',
      'What is it',
      'Is it what',
      'Can the data',
      'Figure',
      'What to watch',
      'H2',
      'Features',
      'Table',
      'TH',
      'Findings',
      'Provenance',
    ]
    let at = -1
    for (const part of parts) {
      const next = text.indexOf(part, at + 1)
      expect(next, part).toBeGreaterThan(at)
      at = next
    }
    expect(text).toContain('Å')
    expect(text).toContain('Hβ')
  })

  it.skipIf(!requireTool('pdftotext', ['-v']))('gives its text back, special characters and all', () => {
    const { text } = run('pdftotext', ['-raw', path('hostile'), '-'])
    expect(text).toContain('finding 15 says quite a lot')
    expect(text).toContain('÷')
    expect(text).toContain('±')
    expect(text).not.toContain('\u0007')
  })

  it.skipIf(!requireTool('qpdf'))('holds bookmarks, links to pages and files, and words for every figure', () => {
    const json = run('qpdf', ['--json', '--json-key=qpdf', path('night-5')]).text
    expect(json).toContain('/GoToR')
    expect(json).toContain('u:targets/Made 4.pdf')
    expect(json).toContain('/Outlines')
    const figures = [...json.matchAll(/"\/S": "\/Figure"/g)].length
    const alternatives = [...json.matchAll(/"\/Alt": "u:/g)].length
    expect(figures).toBeGreaterThan(3)
    expect(alternatives).toBe(figures)
  })

  it.skipIf(!requireTool('pdftoppm', ['-v']))('looks as its golden picture, but for smoothing at edges', () => {
    spawnSync('pdftoppm', [
      '-r',
      '48',
      '-f',
      '1',
      '-l',
      '1',
      '-singlefile',
      '-png',
      path('target-typed'),
      join(folder, 'page'),
    ])
    const seen = PNG.sync.read(readFileSync(join(folder, 'page.png')))
    const golden = PNG.sync.read(readFileSync(new URL('../golden/target-typed.png', import.meta.url)))
    expect([seen.width, seen.height]).toEqual([golden.width, golden.height])
    const off = pixelmatch(seen.data, golden.data, undefined, seen.width, seen.height, { threshold: 0.2 })
    // Another release of the renderer smooths edges otherwise; a moved label or curve is far more than 1 % of pixels.
    expect(off / (seen.width * seen.height)).toBeLessThan(0.01)
  })
})

describe('compactPdf', () => {
  it('asks for a file with a classical cross-reference table', () => {
    expect(() => compactPdf(new TextEncoder().encode('%PDF-1.7\nstartxref\n0\n%%EOF'))).toThrow(
      'compactPdf requires one classical cross-reference table, got none',
    )
  })

  it('keeps every page of a long night', async () => {
    const drawing = madeNightPages(60)
    writeFileSync(path('long'), await encodePdf(drawing, FONTS, META))
    if (!requireTool('pdfinfo', ['-v'])) return
    expect(run('pdfinfo', [path('long')]).text).toMatch(new RegExp(`Pages:\\s+${drawing.pages.length}\\n`))
  })
})
