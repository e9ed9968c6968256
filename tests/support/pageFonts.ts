import { openSync } from 'fontkit'
import { createRequire } from 'node:module'
import type { Fonts } from '../../src/report/typeface.ts'
import { makeTypeface } from '../../src/report/typeface.ts'

const require = createRequire(import.meta.url)
const open = (name: string): Fonts['regular'] =>
  openSync(require.resolve(`dejavu-fonts-ttf/ttf/${name}.ttf`)) as Fonts['regular']

/** The fonts of the pages, parsed once. */
export const FONTS: Fonts = { regular: open('DejaVuSans'), bold: open('DejaVuSans-Bold') }
export const FACE = makeTypeface(FONTS)

/** Invented provenance with a fixed date. */
export const PROVENANCE = {
  version: '0.1.0',
  settingsDigest: 'ab12'.repeat(16),
  calibration: 'made up',
  date: new Date('2026-12-01T08:00:00Z'),
}
