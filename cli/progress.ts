import { Presets, SingleBar } from 'cli-progress'

/** A line on standard error that shows how far the work is; silent unless standard error is a terminal. */
export interface Progress {
  step(): void
  stop(): void
}

/** Starts a progress line for `total` steps (undefined when it is not known). */
export function startProgress(what: string, total: number, isQuiet: boolean): Progress {
  if (isQuiet || !process.stderr.isTTY || total < 2) return { step: () => undefined, stop: () => undefined }
  const bar = new SingleBar(
    {
      stream: process.stderr,
      format: `${what} {value} of {total}, {percentage} %, about {eta_formatted} left`,
      hideCursor: true,
      clearOnComplete: true,
      etaBuffer: 50,
      gracefulExit: false,
    },
    Presets.shades_classic,
  )
  const stop = (): void => {
    process.off('exit', stop)
    bar.stop()
  }
  // An interrupt must not leave the cursor hidden.
  process.once('exit', stop)
  bar.start(total, 0)
  return { step: () => bar.increment(), stop }
}
