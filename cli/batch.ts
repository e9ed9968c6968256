/**
 * Yields the results of `run` over `items` in the order of the items, with at most `atOnce` under way; items are drawn
 * only as there is room, so that a list of any length costs constant memory.
 */
export async function* inOrder<Item, Result>(
  items: Iterable<Item>,
  atOnce: number,
  run: (item: Item) => Promise<Result>,
): AsyncGenerator<Result> {
  const waiting: Promise<Result>[] = []
  try {
    for (const item of items) {
      const promise = run(item)
      // A failure is seen when its turn comes; until then it must not count as unhandled.
      promise.catch(() => undefined)
      waiting.push(promise)
      if (waiting.length >= atOnce) yield await (waiting.shift() as Promise<Result>)
    }
    while (waiting.length) yield await (waiting.shift() as Promise<Result>)
  } finally {
    await Promise.allSettled(waiting)
  }
}
