import type { Drawing } from '../../src/report/drawing.ts'
import { layoutNightPages } from '../../src/report/nightPages.ts'
import { layoutTargetPages } from '../../src/report/targetPages.ts'
import { targetViews } from '../../src/report/targetView.ts'
import { madeNight } from './madeNight.ts'
import { ODD_TARGETS } from './oddTargets.ts'
import { FACE, PROVENANCE } from './pageFonts.ts'

const options = { face: FACE, paper: 'A4', provenance: PROVENANCE } as const

/** The night's pages for a made night of that many targets. */
export function madeNightPages(count: number, paper: 'A4' | 'Letter' = 'A4'): Drawing {
  const { outcomes, night } = madeNight(count)
  return layoutNightPages(outcomes, night, {
    ...options,
    paper,
    name: 'made night',
    pagesOf: (target) => `targets/${target}.pdf`,
    fileOf: (file) => `../${encodeURI(file)}`,
  })
}

const target = (i: number): Drawing => {
  const { outcomes, night } = madeNight(9)
  return layoutTargetPages(targetViews(outcomes, night)[i], options)
}

/** Drawings that golden files in tests/golden hold, by the file's name. */
export const GOLDEN_DRAWINGS: Readonly<Record<string, () => Drawing>> = {
  'target-typed': () => target(1),
  'target-unexpected': () => target(4),
  'target-outside': () => target(5),
  'target-letter': () => layoutTargetPages(ODD_TARGETS.crowded(), { ...options, paper: 'Letter' }),
  'target-bare': () => layoutTargetPages(ODD_TARGETS.bare(), options),
  'night-5': () => madeNightPages(5),
}
