import { availableParallelism } from 'node:os'
import { setImmediate as nextTurn } from 'node:timers/promises'
import { Piscina } from 'piscina'
import type { Outcome } from '../src/quality/types.ts'
import { analysePath, type AnalyseTask } from './analyse.ts'
import { drawTask, type DrawTask } from './draw.ts'
import { listenForInterrupts } from './interrupt.ts'

/** Those who do the work: worker threads, or this thread for a handful of files. */
export interface Crew {
  /** How many tasks are worth having under way. */
  readonly atOnce: number
  analyse(task: AnalyseTask): Promise<Outcome>
  draw(task: DrawTask): Promise<number>
  close(): Promise<void>
}

/** A file that takes longer than this is given up: 20,000 spectra in one file need a third of it. */
const LIMIT_MS = 900_000

/** Starts `workers` threads (undefined: one a core); 0 does everything in this thread. */
export function startCrew(workers: number | undefined): Crew {
  listenForInterrupts()
  const threads = workers ?? availableParallelism()
  if (threads === 0 || import.meta.url.endsWith('.ts')) {
    return {
      atOnce: 1,
      async analyse(task) {
        // An interrupt is heard only between turns of the event loop.
        await nextTurn()
        return analysePath(task)
      },
      draw: (task) => drawTask(task),
      close: () => Promise.resolve(),
    }
  }
  const pool = new Piscina({
    filename: new URL('./worker.js', import.meta.url).href,
    minThreads: 1,
    maxThreads: threads,
    idleTimeout: 30_000,
    resourceLimits: { maxOldGenerationSizeMb: 1024, maxYoungGenerationSizeMb: 64 },
  })
  async function run<Result>(name: 'analyse' | 'draw', task: AnalyseTask | DrawTask): Promise<Result> {
    const giveUp = new AbortController()
    const timer = setTimeout(() => giveUp.abort(), LIMIT_MS)
    try {
      return (await pool.run(task, { name, signal: giveUp.signal })) as Result
    } finally {
      clearTimeout(timer)
    }
  }
  return {
    atOnce: threads * 3,
    async analyse(task) {
      try {
        return await run<Outcome>('analyse', task)
      } catch (error) {
        // The thread died or was stopped over this file; the night goes on without it.
        const message =
          error instanceof Error && error.name === 'AbortError'
            ? `file requires to be handled within ${LIMIT_MS / 1000} s, got no end`
            : `file requires a worker that survives it, got ${String(error)}`
        return { file: task.file, size: 0, spectra: [], notes: [], error: { code: 'gave-up', message } }
      }
    },
    draw: (task) => run<number>('draw', task),
    close: () => pool.destroy(),
  }
}
