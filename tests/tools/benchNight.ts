/**
 * Speed and memory of a night of raw frames against a plain loop in the same runtime that reads the same files and makes
 * a histogram of every frame's pixels; and of the night's pass over many outcomes. Ratios of the best of some rounds,
 * taken in turn, of processor time (other work on the machine changes the time on the clock). Run: node --expose-gc --import tsx tests/tools/benchNight.ts
 */
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import { encodeFits } from '../../src/fits/write.ts'
import { summariseNight } from '../../src/night/summariseNight.ts'
import { seededNormal } from '../../src/numeric/random.ts'
import { frameFacts } from '../../src/quality/frameFacts.ts'
import { frameStatistics } from '../../src/quality/frameStatistics.ts'
import { readHeaderFacts } from '../../src/spectrum/headerFacts.ts'
import { COVER_RULES } from '../../src/tables/coverRules.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'
import { THRESHOLDS } from '../../src/tables/thresholds.ts'
import { madeFrame, madeSpectrum, MINUTE, NIGHT, starFacts, STARS, WORDS } from '../night/madeOutcomes.ts'

const FRAMES = 300
const WIDTH = 2048
const HEIGHT = 512
const ROUNDS = 5
/** Outcomes of the largest night asked for. */
const LARGE_NIGHT = 10_000

const folder = mkdtempSync(join(tmpdir(), 'bench-night-'))

function writeFrames(): readonly string[] {
  const normal = seededNormal(4)
  const noise = Float64Array.from({ length: WIDTH * HEIGHT }, normal)
  return Array.from({ length: FRAMES }, (_, i) => {
    const trace = 200 + (i % 100)
    const values = noise.map((value, k) => {
      const [x, y] = [k % WIDTH, Math.floor(k / WIDTH)]
      return Math.round(600 + 20 * value + 4000 * Math.exp(-(((y - trace) / 2) ** 2)) * (1 + x / WIDTH))
    })
    const cards = [
      { keyword: 'IMAGETYP', value: 'object' },
      { keyword: 'OBJECT', value: `star ${i}` },
      { keyword: 'EXPTIME', value: 300 },
      { keyword: 'DATE-OBS', value: `2026-05-17T0${i % 10}:10:00` },
    ]
    const name = join(folder, `f${i}.fits`)
    writeFileSync(name, encodeFits([{ kind: 'image', bitpix: 16, dimensions: [WIDTH, HEIGHT], values, cards }]))
    return name
  })
}

/** The yardstick: reads each file and counts its pixels by value. */
function plainLoop(names: readonly string[]): number {
  let sum = 0
  for (const name of names) {
    const bytes = readFileSync(name)
    const counts = new Uint32Array(65536)
    const end = 2880 + WIDTH * HEIGHT * 2
    for (let at = 2880; at < end; at += 2) counts[((bytes[at] << 8) | bytes[at + 1]) ^ 0x8000]++
    sum += counts[33368]
  }
  return sum
}

function frames(names: readonly string[]): number {
  let sum = 0
  for (const name of names) {
    const source = memorySource(readFileSync(name))
    const [hdu] = openFits(source).hdus
    const { facts } = readHeaderFacts([hdu.header], KEYWORDS)
    sum += frameFacts(facts, frameStatistics(source, hdu, facts), THRESHOLDS).statistics?.median ?? 0
  }
  return sum
}

function best(run: () => number, before: number): number {
  const start = process.cpuUsage()
  run()
  const { user, system } = process.cpuUsage(start)
  return Math.min(before, (user + system) / 1000)
}

try {
  const names = writeFrames()
  let [plain, own] = [Infinity, Infinity]
  for (let round = 0; round < ROUNDS; round++) {
    plain = best(() => plainLoop(names), plain)
    own = best(() => frames(names), own)
  }
  const memory = process.resourceUsage().maxRSS / 1024
  console.log(
    `${FRAMES} raw frames of ${WIDTH} × ${HEIGHT}: plain loop ${plain.toFixed(0)} ms, frames ${own.toFixed(0)} ms, ratio ${(own / plain).toFixed(2)}`,
  )
  console.log(`largest memory so far ${memory.toFixed(0)} MiB (the making of the files counted in)`)
  const outcomes = Array.from({ length: LARGE_NIGHT }, (_, i) => {
    const star = { ...STARS[i % 3], object: `Star ${i % 700}`, ra: 200 + (i % 700) / 10 }
    const mjd = NIGHT + (i / LARGE_NIGHT - 0.5) * 240 * MINUTE
    return i % 2 === 0
      ? madeSpectrum({ star, mjd, facts: { exposure: 1 } })
      : madeFrame('science', starFacts(star, mjd, { exposure: 1 }))
  })
  const start = performance.now()
  const night = summariseNight(outcomes, {
    targets: STARS,
    thresholds: THRESHOLDS,
    coverRules: COVER_RULES,
    typing: WORDS,
  })
  console.log(
    `night's pass over ${LARGE_NIGHT} outcomes: ${(performance.now() - start).toFixed(0)} ms, ${night.targets.length} targets`,
  )
} finally {
  rmSync(folder, { recursive: true, force: true })
}
