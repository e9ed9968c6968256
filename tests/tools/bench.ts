// `npm run bench`: spectra per second for reading, measuring and typing on one core, pages per second, and peak memory
// for 2,000 spectra. Times are of this machine; quote ratios between runs on one machine.
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { pathToFileURL } from 'node:url'
import { memorySource } from '../../src/fits/source.ts'
import { demoNight } from '../../src/demo/demoNight.ts'
import { analyseFile } from '../../src/pipeline/analyseFile.ts'
import { nightOf } from '../../src/pipeline/nightOf.ts'
import { settingsInForce } from '../../src/pipeline/settingsInForce.ts'
import type { Outcome } from '../../src/quality/types.ts'
import { layoutTargetPages } from '../../src/report/targetPages.ts'
import { encodePdf } from '../../src/report/pdf.ts'
import { targetViews } from '../../src/report/targetView.ts'
import { makeTypeface } from '../../src/report/typeface.ts'
import { spectraRows } from '../../src/report/spectraRows.ts'
import { csvLines } from '../../src/report/csv.ts'
import { pageFonts } from '../../cli/pageFonts.ts'

const inForce = settingsInForce()
const files = [...demoNight({ clean: true })].filter(
  ({ path }) => path.startsWith('quicklook/') && /\.fits(\.gz)?$/.test(path),
)
const options = { inForce, wantsCurves: false, wantsAllLines: false }
const run = (wantsCurves: boolean): Outcome[] =>
  files.map(({ path, bytes }) => analyseFile(memorySource(bytes), path, { ...options, wantsCurves }))

run(false)
let spectra = 0
const began = process.cpuUsage()
for (let round = 0; round < 5; round++) for (const outcome of run(false)) spectra += outcome.spectra.length
const used = process.cpuUsage(began)
const seconds = (used.user + used.system) / 1e6
console.log(
  `read + measure + type: ${spectra} spectra in ${seconds.toFixed(2)} s of processor time, ${(spectra / seconds).toFixed(0)} a second, ${((1000 * seconds) / spectra).toFixed(2)} ms each`,
)

const outcomes = run(true)
const night = nightOf(outcomes, { inForce })
const views = targetViews(outcomes, night)
const fonts = pageFonts()
const face = makeTypeface(fonts)
const provenance = { version: 'bench', settingsDigest: '0', calibration: 'bench', date: new Date(0) }
let bytes = 0
let pages = 0
for (const warm of [true, false]) {
  const start = process.cpuUsage()
  bytes = pages = 0
  for (const view of views) {
    const drawing = layoutTargetPages(view, { face, paper: 'A4', provenance })
    pages += drawing.pages.length
    bytes += (await encodePdf(drawing, fonts, { date: provenance.date, version: 'bench' })).length
  }
  const spent = process.cpuUsage(start)
  const time = (spent.user + spent.system) / 1e6
  if (!warm)
    console.log(
      `pages: ${views.length} PDFs, ${pages} pages in ${time.toFixed(2)} s of processor time: ${(views.length / time).toFixed(1)} PDFs a second on one core, ${(bytes / views.length / 1000).toFixed(0)} kB each`,
    )
}

// 2,000 spectra through the table writers, nothing kept: memory must not grow with the number.
const folder = mkdtempSync(join(tmpdir(), 'darkline-bench-'))
try {
  globalThis.gc?.()
  const before = process.memoryUsage().rss
  let peak = before
  let rows = 0
  const [first] = files
  writeFileSync(join(folder, 'spectra.csv'), '')
  for (let i = 0; rows < 2000; i++) {
    const { path, bytes: content } = files[i % files.length] ?? first
    const outcome = analyseFile(memorySource(content), path, options)
    writeFileSync(join(folder, 'spectra.csv'), csvLines('spectra', spectraRows(outcome)), { flag: 'a' })
    rows += outcome.spectra.length
    if (i % 50 === 0) peak = Math.max(peak, process.memoryUsage().rss)
  }
  console.log(
    `memory: ${rows} spectra, resident ${(before / 1e6).toFixed(0)} MB before, at most ${(peak / 1e6).toFixed(0)} MB`,
  )
} finally {
  rmSync(folder, { recursive: true, force: true })
}
console.log(
  `also: tests/tools/benchRead.ts, benchMeasure.ts, benchNight.ts, benchPages.ts, each a ratio in one run (node --import tsx ${pathToFileURL('tests/tools').pathname.split('/').slice(-2).join('/')}/…)`,
)
