/**
 * Speed and size of pages: `npx tsx tests/tools/benchPages.ts`. Two-page target PDFs a second (one process, and two at
 * once), their size, the night PDF and night.html of 500 targets, and the time of matplotlib, a general-purpose
 * plotting library, for the same page (where Debian's python3-matplotlib is installed).
 */
import { spawn, spawnSync } from 'node:child_process'
import { fileURLToPath } from 'node:url'
import { layoutNightPages } from '../../src/report/nightPages.ts'
import { nightHtml } from '../../src/report/nightHtml.ts'
import { encodePdf } from '../../src/report/pdf.ts'
import { layoutTargetPages } from '../../src/report/targetPages.ts'
import { targetViews } from '../../src/report/targetView.ts'
import { madeNight } from '../support/madeNight.ts'
import { FACE, FONTS, PROVENANCE } from '../support/pageFonts.ts'

const META = { date: PROVENANCE.date, version: PROVENANCE.version }
const options = { face: FACE, paper: 'A4', provenance: PROVENANCE } as const
const WARM_UP = 20
const COUNT = 100

/** Target PDFs a second, their mean size in KB, and the processor time of one in ms (other work on the machine aside). */
async function targetRate(): Promise<{ readonly rate: number; readonly size: number; readonly cpu: number }> {
  const { outcomes, night } = madeNight(9)
  const views = targetViews(outcomes, night)
  const one = async (i: number): Promise<number> =>
    (await encodePdf(layoutTargetPages(views[i % views.length], options), FONTS, META)).length
  for (let i = 0; i < WARM_UP; i++) await one(i)
  const from = performance.now()
  const before = process.cpuUsage()
  let bytes = 0
  for (let i = 0; i < COUNT; i++) bytes += await one(i)
  const { user, system } = process.cpuUsage(before)
  return {
    rate: (1000 * COUNT) / (performance.now() - from),
    size: bytes / COUNT / 1000,
    cpu: (user + system) / 1000 / COUNT,
  }
}

/** The same two pages by matplotlib: six panels with as many points, and a table; processor seconds a document, best of five. */
const MATPLOTLIB = `
import io, time, numpy as np, matplotlib
matplotlib.use('pdf')
matplotlib.rcParams['pdf.fonttype'] = 42
import matplotlib.pyplot as plt
from matplotlib.backends.backend_pdf import PdfPages
x = np.linspace(3750, 7300, 2400); y = 1 + 0.01 * np.random.default_rng(1).normal(size=2400)
def once():
    out = io.BytesIO()
    with PdfPages(out) as pdf:
        fig, axes = plt.subplots(3, 1, figsize=(8.27, 11.69))
        axes[0].plot(x, y, lw=.5); axes[0].plot(x[::10], np.ones(240), '--'); axes[0].set_xlabel('wavelength in air, Å')
        axes[1].plot(x, y, lw=.5); axes[1].plot(x, np.ones(2400), lw=2)
        for k in range(12): axes[1].annotate('Fe I %d' % k, (4000 + 250 * k, 1), (4000 + 250 * k, 1.05), arrowprops={'arrowstyle': '-'})
        axes[2].bar(range(20), np.exp(-0.5 * ((np.arange(20) - 10) / 2) ** 2))
        fig.suptitle('HD 12345: G2 V'); pdf.savefig(fig); plt.close(fig)
        fig, axis = plt.subplots(figsize=(8.27, 11.69)); axis.axis('off')
        axis.table([['Fe I 5270', '5270.0', '1.23 ± 0.04', '1.20 ± 0.10', '+0.3', '12 %']] * 18); pdf.savefig(fig); plt.close(fig)
    return out.getvalue()
once(); best = 1e9
for _ in range(5):
    t = time.process_time(); b = once(); best = min(best, time.process_time() - t)
print(best, len(b))
`

/** The rate of a second process of this program, run at the same time as others. */
function child(): Promise<number> {
  return new Promise((resolve) => {
    const run = spawn(process.execPath, ['--import', 'tsx', fileURLToPath(import.meta.url), '--rate'], {
      stdio: ['ignore', 'pipe', 'inherit'],
    })
    let text = ''
    run.stdout.on('data', (piece: Buffer) => (text += piece.toString()))
    run.on('close', () => resolve(Number(text)))
  })
}

if (process.argv.includes('--rate')) console.log((await targetRate()).rate)
else {
  const { rate, size, cpu } = await targetRate()
  console.log(
    `target PDF, one process: ${rate.toFixed(1)} documents/s, ${size.toFixed(1)} KB each, ${cpu.toFixed(1)} ms of processor time`,
  )
  const both = await Promise.all([child(), child()])
  console.log(`target PDF, two processes at once: ${(both[0] + both[1]).toFixed(1)} documents/s`)
  const { outcomes, night } = madeNight(500)
  let from = performance.now()
  const drawing = layoutNightPages(outcomes, night, { ...options, name: 'made', pagesOf: (t) => `targets/${t}.pdf` })
  const laid = performance.now()
  const bytes = await encodePdf(drawing, FONTS, META)
  const done = performance.now()
  console.log(
    `night PDF of 500 targets: ${((done - from) / 1000).toFixed(2)} s (layout ${((laid - from) / 1000).toFixed(2)} s), ` +
      `${drawing.pages.length} pages, ${(bytes.length / 1000).toFixed(0)} KB`,
  )
  from = performance.now()
  const page = nightHtml(outcomes, night, { name: 'made', provenance: PROVENANCE })
  console.log(
    `night.html of 500 targets: ${((performance.now() - from) / 1000).toFixed(2)} s, ${(page.length / 1e6).toFixed(1)} MB`,
  )
  const other = spawnSync('/usr/bin/python3', ['-c', MATPLOTLIB], { encoding: 'utf8' })
  if (other.status !== 0) console.log('matplotlib is not installed: no ratio')
  else {
    const [seconds, length] = other.stdout.trim().split(' ').map(Number)
    console.log(
      `matplotlib, the same two pages: ${(1000 * seconds).toFixed(0)} ms of processor time, ${(length / 1000).toFixed(0)} KB; ` +
        `this program takes ${((1000 * seconds) / cpu).toFixed(1)} times less`,
    )
  }
}
