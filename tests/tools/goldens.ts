/**
 * Writes the golden drawings and the golden picture of tests/golden anew: `npx tsx tests/tools/goldens.ts`. Needs pdftoppm.
 * Read the difference, and look at the picture, before committing.
 */
import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { encodePdf } from '../../src/report/pdf.ts'
import { drawingText } from '../support/drawingText.ts'
import { GOLDEN_DRAWINGS } from '../support/goldenDrawings.ts'
import { FONTS, PROVENANCE } from '../support/pageFonts.ts'

for (const [name, draw] of Object.entries(GOLDEN_DRAWINGS)) {
  const path = new URL(`../golden/${name}.txt`, import.meta.url)
  writeFileSync(path, drawingText(draw()))
  console.log(path.pathname)
}

const folder = mkdtempSync(join(tmpdir(), 'golden-'))
const pdf = join(folder, 'page.pdf')
const picture = new URL('../golden/target-typed', import.meta.url).pathname
writeFileSync(
  pdf,
  await encodePdf(GOLDEN_DRAWINGS['target-typed'](), FONTS, { date: PROVENANCE.date, version: PROVENANCE.version }),
)
spawnSync('pdftoppm', ['-r', '48', '-f', '1', '-l', '1', '-singlefile', '-png', pdf, picture])
rmSync(folder, { recursive: true })
console.log(`${picture}.png`)
