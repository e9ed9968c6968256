/**
 * Positions for labels along a line, in order, so that none overlaps: the least squares shift from the wanted places
 * that keeps the distances (pool adjacent violators: Barlow et al. 1972, "Statistical Inference under Order
 * Restrictions"), then held within [low, high].
 *
 * @param wanted  shape (n), increasing: centres where the labels would best stand
 * @param widths  shape (n): width of each, gap included; their sum must fit into high − low
 * @returns       shape (n): centres
 */
export function spread(wanted: readonly number[], widths: readonly number[], low: number, high: number): number[] {
  const n = wanted.length
  const before = new Float64Array(n)
  for (let i = 1; i < n; i++) before[i] = before[i - 1] + (widths[i - 1] + widths[i]) / 2
  const blocks: { sum: number; count: number }[] = []
  for (let i = 0; i < n; i++) {
    blocks.push({ sum: wanted[i] - before[i], count: 1 })
    while (blocks.length > 1) {
      const last = blocks[blocks.length - 1]
      const previous = blocks[blocks.length - 2]
      if (previous.sum / previous.count <= last.sum / last.count) break
      blocks.splice(-2, 2, { sum: previous.sum + last.sum, count: previous.count + last.count })
    }
  }
  const lowest = low + (widths[0] ?? 0) / 2
  const highest = high - (widths[n - 1] ?? 0) / 2 - (before[n - 1] ?? 0)
  const places: number[] = []
  for (const { sum, count } of blocks)
    for (let k = 0; k < count; k++) {
      const shift = Math.max(lowest, Math.min(highest, sum / count))
      places.push(shift + before[places.length])
    }
  return places
}
