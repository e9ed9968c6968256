import { existsSync, readFileSync, writeFileSync, rmSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { Drawing, TextItem } from '../../src/report/drawing.ts'
import { MARGIN } from '../../src/report/flow.ts'
import { layoutNightPages } from '../../src/report/nightPages.ts'
import { layoutTargetPages } from '../../src/report/targetPages.ts'
import { targetViews } from '../../src/report/targetView.ts'
import { drawingText, itemsOf } from '../support/drawingText.ts'
import { GOLDEN_DRAWINGS, madeNightPages } from '../support/goldenDrawings.ts'
import { madeNight, madeOutcome } from '../support/madeNight.ts'
import { ODD_TARGETS } from '../support/oddTargets.ts'
import { FACE, PROVENANCE } from '../support/pageFonts.ts'

const options = { face: FACE, paper: 'A4', provenance: PROVENANCE } as const
const everyPage = (): [string, Drawing][] => [
  ...targetViews(
    ...(() => {
      const { outcomes, night } = madeNight(9)
      return [outcomes, night] as const
    })(),
  ).flatMap((view): [string, Drawing][] => [
    [`${view.name} A4`, layoutTargetPages(view, options)],
    [`${view.name} Letter`, layoutTargetPages(view, { ...options, paper: 'Letter' })],
  ]),
  ...Object.entries(ODD_TARGETS).flatMap(([name, view]): [string, Drawing][] => [
    [`${name} A4`, layoutTargetPages(view(), options)],
    [`${name} Letter`, layoutTargetPages(view(), { ...options, paper: 'Letter' })],
  ]),
  ['night of 5', madeNightPages(5)],
  ['night of 60 Letter', madeNightPages(60, 'Letter')],
]
const PAGES = everyPage()

const edges = ({ x, width, anchor }: TextItem): readonly [number, number] => {
  const left = anchor === 'end' ? x - width : anchor === 'middle' ? x - width / 2 : x
  return [left, left + width]
}

describe('drawings of pages', () => {
  it.each(Object.keys(GOLDEN_DRAWINGS))('%s is as its golden file', (name) => {
    const path = new URL(`../golden/${name}.txt`, import.meta.url)
    const changed = new URL(`../golden/${name}-changed.txt`, import.meta.url)
    const text = drawingText(GOLDEN_DRAWINGS[name]())
    if (readFileSync(path, 'utf8') !== text) writeFileSync(changed, text)
    else if (existsSync(changed)) rmSync(changed)
    expect(text).toBe(readFileSync(path, 'utf8'))
  })

  it('keep every text, line and box within the margins of the page', () => {
    for (const [name, drawing] of PAGES)
      for (const { page, item } of itemsOf(drawing)) {
        const { width, height } = drawing.pages[page]
        if (item.draw === 'text' && !item.upright) {
          const [left, right] = edges(item)
          expect(left, `${name}: ${item.text}`).toBeGreaterThanOrEqual(MARGIN.left - 1)
          expect(right, `${name}: ${item.text}`).toBeLessThanOrEqual(width - MARGIN.right + 1)
          expect(item.y, `${name}: ${item.text}`).toBeLessThan(height - 20)
        }
        if (item.draw !== 'path') continue
        for (let i = 0; i < item.points.length; i += 2) {
          if (Number.isNaN(item.points[i])) continue
          expect(item.points[i], name).toBeGreaterThan(MARGIN.left - 5)
          expect(item.points[i], name).toBeLessThan(width - MARGIN.right + 5)
          expect(item.points[i + 1], name).toBeLessThan(height - 20)
        }
      }
  })

  it('set no two texts over each other', () => {
    for (const [name, drawing] of PAGES)
      drawing.pages.forEach((_, page) => {
        const texts = itemsOf(drawing).flatMap(({ page: at, item }) =>
          at === page && item.draw === 'text' && !item.upright ? [item] : [],
        )
        for (let i = 0; i < texts.length; i++)
          for (let j = i + 1; j < texts.length; j++) {
            const [a, b] = [texts[i], texts[j]]
            // A line of text takes up about 0.7 of its size above the base line (cap height of the font: 0.73).
            if (b.y - b.size * 0.7 >= a.y || a.y - a.size * 0.7 >= b.y) continue
            const [aLeft, aRight] = edges(a)
            const [bLeft, bRight] = edges(b)
            expect(Math.min(aRight, bRight) - Math.max(aLeft, bLeft), `${name}: ${a.text} / ${b.text}`).toBeLessThan(
              0.5,
            )
          }
      })
  })

  it('set no text below 6.5 points', () => {
    for (const [name, drawing] of PAGES)
      for (const { item } of itemsOf(drawing))
        if (item.draw === 'text') expect(item.size, name).toBeGreaterThanOrEqual(6.5)
  })

  it('hold no control character, and say every figure in words', () => {
    for (const [name, drawing] of PAGES) {
      for (const { item } of itemsOf(drawing)) if (item.draw === 'text') expect(item.text, name).not.toMatch(/\p{C}/u)
      for (const block of drawing.pages.flatMap((p) => p.blocks))
        if (block.role === 'Figure') expect(block.alt?.length, name).toBeGreaterThan(20)
    }
  })
})

describe('layoutTargetPages', () => {
  const textOf = (drawing: Drawing): string =>
    itemsOf(drawing)
      .flatMap(({ item }) => (item.draw === 'text' ? [item.text] : []))
      .join('\n')

  it('answers what it is, whether it was expected, and whether it can be trusted, in this order', () => {
    const { outcomes, night } = madeNight(9)
    const text = textOf(layoutTargetPages(targetViews(outcomes, night)[4], options))
    const found = [
      'F7 V ± 1.1 subclasses; not the expected A2; data doubtful',
      'What is it',
      'Is it what',
      'Can the data',
    ].map((part) => text.indexOf(part))
    expect(found.every((at) => at >= 0)).toBe(true)
    expect(found).toEqual([...found].sort((a, b) => a - b))
  })

  it('says what is absent and why, without an empty frame', () => {
    const drawing = layoutTargetPages(ODD_TARGETS.bare(), options)
    const text = textOf(drawing)
    for (const part of [
      'no curves were kept',
      'signal-to-noise of 3',
      'not trusted: no pattern of lines matched',
      'No feature was measured',
    ])
      expect(text).toContain(part)
    expect(drawing.pages[0].blocks.filter((block) => block.role === 'Figure')).toEqual([])
  })

  it('puts several exposures of one star into one document', () => {
    const text = textOf(layoutTargetPages(ODD_TARGETS.crowded(), options))
    for (const part of ['3 exposures', 'night/e0.fits', 'night/e1.fits', 'night/e2.fits']) expect(text).toContain(part)
  })

  it('gives file, checksum, version, settings and calibration', () => {
    const text = textOf(layoutTargetPages(targetViews([madeOutcome()])[0], options))
    for (const part of [
      'night/obj0001.fits',
      'darkline 0.1.0',
      PROVENANCE.settingsDigest,
      'made up',
      '2026-12-01 08:00:00 UTC',
    ])
      expect(text).toContain(part)
  })

  it('needs two pages for a star with few features', () => {
    for (const [name, drawing] of PAGES) if (name.startsWith('Made')) expect(drawing.pages, name).toHaveLength(2)
  })
})

describe('layoutNightPages', () => {
  it('lists what to observe again before anything else, the most urgent first', () => {
    const headings = madeNightPages(5).pages.flatMap((p) =>
      p.blocks.flatMap((b) => (b.role === 'H2' ? [b.bookmark?.title] : [])),
    )
    expect(headings).toEqual([
      'Observe again first',
      'What holds for the whole night',
      'Targets',
      'Found against expected',
      'Inventory',
      'Files that could not be read',
      'Calibration cover',
      'Through the night',
      'Log',
    ])
  })

  it('links every target to its pages and every file of the log', () => {
    const links = itemsOf(madeNightPages(5)).flatMap(({ item }) =>
      item.draw === 'text' && item.link ? [item.link] : [],
    )
    expect(links).toContainEqual({ to: 'pages', address: 'targets/Made 4.pdf' })
    expect(links).toContainEqual({ to: 'address', address: '../night/broken,%20%22half%22.fits' })
  })

  it('stands for a night with nothing in it', () => {
    const { night } = madeNight(0)
    const empty = {
      ...night,
      drifts: [],
      cover: [],
      log: [],
      notObserved: [],
      observeAgain: [],
      findings: [],
      mjdFirst: undefined,
      mjdLast: undefined,
    }
    const drawing = layoutNightPages([], empty, { ...options, name: 'empty' })
    expect(drawing.pages).toHaveLength(1)
    expect(drawing.title).toBe('Night empty')
  })
})
