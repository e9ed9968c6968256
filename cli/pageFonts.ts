import { createRequire } from 'node:module'
import { openSync, type Font } from 'fontkit'
import type { Fonts } from '../src/report/typeface.ts'

let fonts: Fonts | undefined

/** The two fonts of the pages, parsed once a thread. */
export function pageFonts(): Fonts {
  if (fonts) return fonts
  const { resolve } = createRequire(import.meta.url)
  const font = (name: string): Font => openSync(resolve(`dejavu-fonts-ttf/ttf/${name}.ttf`)) as Font
  fonts = { regular: font('DejaVuSans'), bold: font('DejaVuSans-Bold') }
  return fonts
}
