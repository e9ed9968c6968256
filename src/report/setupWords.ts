/** Names of set-ups without the parts that all of them share, so that what tells them apart has room. */
export function shortSetups(setups: Iterable<string>): ReadonlyMap<string, string> {
  const parts = new Map([...new Set(setups)].map((setup) => [setup, setup.split(', ')]))
  const all = [...parts.values()]
  if (all.length < 2) return new Map([...parts.keys()].map((setup) => [setup, setup]))
  return new Map(
    [...parts].map(([setup, own]) => [
      setup,
      own.filter((part) => !all.every((other) => other.includes(part))).join(', ') || setup,
    ]),
  )
}
