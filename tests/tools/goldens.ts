/** Writes the golden drawings of tests/golden anew: `npx tsx tests/tools/goldens.ts`. Read the difference before committing. */
import { writeFileSync } from 'node:fs'
import { drawingText } from '../support/drawingText.ts'
import { GOLDEN_DRAWINGS } from '../support/goldenDrawings.ts'

for (const [name, draw] of Object.entries(GOLDEN_DRAWINGS)) {
  const path = new URL(`../golden/${name}.txt`, import.meta.url)
  writeFileSync(path, drawingText(draw()))
  console.log(path.pathname)
}
