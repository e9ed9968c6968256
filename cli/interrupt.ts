let ender: (() => void) | undefined

/** Takes the next interrupt of the user over, to end in good order; returns the function that gives it back. */
export function takeInterrupt(end: () => void): () => void {
  ender = end
  return () => {
    if (ender === end) ender = undefined
  }
}

/** Lets an interrupt end the program through its exit, so that nothing unfinished stays behind. */
export function listenForInterrupts(): void {
  for (const [signal, status] of [
    ['SIGINT', 130],
    ['SIGTERM', 143],
    ['SIGHUP', 129],
  ] as const)
    process.on(signal, () => {
      const end = ender
      ender = undefined
      if (end) end()
      else process.exit(status)
    })
}
