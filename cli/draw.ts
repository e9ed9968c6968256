import type { Paper } from '../src/report/drawing.ts'
import { encodePdf } from '../src/report/pdf.ts'
import type { Provenance } from '../src/report/provenance.ts'
import { layoutTargetPages } from '../src/report/targetPages.ts'
import type { TargetView } from '../src/report/targetView.ts'
import { makeTypeface, type Typeface } from '../src/report/typeface.ts'
import { pageFonts } from './pageFonts.ts'
import { writeWhole } from './write.ts'

/** The pages of one target to write; plain data, it crosses into a worker thread. */
export interface DrawTask {
  readonly view: TargetView
  readonly path: string
  readonly paper: Paper
  readonly provenance: Provenance
}

let face: Typeface | undefined

/** The typeface of this thread; it keeps the widths it has met. */
export function pageTypeface(): Typeface {
  face ??= makeTypeface(pageFonts())
  return face
}

/** Lays out and writes one target's PDF; returns its size in bytes. */
export async function drawTask({ view, path, paper, provenance }: DrawTask): Promise<number> {
  const drawing = layoutTargetPages(view, { face: pageTypeface(), paper, provenance })
  const bytes = await encodePdf(drawing, pageFonts(), { date: provenance.date, version: provenance.version })
  writeWhole(path, bytes)
  return bytes.length
}
