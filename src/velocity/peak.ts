/** The highest peak of a correlation, in cells from the middle, and what surrounds it. */
export interface CorrelationPeak {
  /** Cells from zero shift, to a fraction of a cell. */
  readonly shift: number
  readonly height: number
  /** Full width at half the height [cells]. */
  readonly width: number
  /** Tonry & Davis 1979: height / (√2 · rms of the antisymmetric part). */
  readonly ratio: number
  /** Height of the next highest separate peak, 0 when there is none. */
  readonly second: number
  readonly isAtEdge: boolean
}

/**
 * The highest peak within the search range.
 *
 * @param correlation  shape (2 · reach + 1)
 * @param search       largest shift looked at [cells], at most reach
 */
export function findPeak(correlation: Float64Array, search: number): CorrelationPeak {
  const reach = (correlation.length - 1) / 2
  const first = Math.ceil(reach - search)
  const last = Math.floor(reach + search)
  let top = first
  for (let i = first; i <= last; i++) if (correlation[i] > correlation[top]) top = i
  const isAtEdge = top === first || top === last
  const centre = isAtEdge ? top : top + parabolaOffset(correlation[top - 1], correlation[top], correlation[top + 1])
  const height = correlation[top]
  return {
    shift: centre - reach,
    height,
    width: fullWidth(correlation, top, centre),
    ratio: height / (Math.SQRT2 * antisymmetricRms(correlation, centre)),
    second: secondPeak(correlation, top, [first, last]),
    isAtEdge,
  }
}

/** Offset of a parabola's vertex from the middle of three equally spaced values, −0.5 to 0.5 for a peak. */
function parabolaOffset(left: number, middle: number, right: number): number {
  const curvature = left - 2 * middle + right
  return curvature < 0 ? (left - right) / (2 * curvature) : 0
}

function fullWidth(values: Float64Array, top: number, centre: number): number {
  const half = values[top] / 2
  let left = top
  while (left > 0 && values[left] > half) left--
  let right = top
  while (right < values.length - 1 && values[right] > half) right++
  const cross = (below: number, above: number): number =>
    values[above] > half && values[below] <= half
      ? below + ((half - values[below]) / (values[above] - values[below])) * (above - below)
      : below
  const leftHalf = centre - cross(left, left + 1)
  const rightHalf = cross(right, right - 1) - centre
  return leftHalf + rightHalf
}

/** Root mean square of c(centre + x) − c(centre − x), over √2: σ_a of Tonry & Davis 1979, equation 20. */
function antisymmetricRms(values: Float64Array, centre: number): number {
  const room = Math.floor(Math.min(centre, values.length - 1 - centre))
  let sum = 0
  for (let x = 1; x <= room; x++) {
    const difference = at(values, centre + x) - at(values, centre - x)
    sum += difference * difference
  }
  return room > 0 ? Math.sqrt(sum / room / 2) : Infinity
}

function at(values: Float64Array, position: number): number {
  const i = Math.min(values.length - 2, Math.max(0, Math.floor(position)))
  return values[i] + (position - i) * (values[i + 1] - values[i])
}

function secondPeak(values: Float64Array, top: number, [first, last]: readonly [number, number]): number {
  let second = 0
  for (let i = Math.max(1, first); i <= Math.min(values.length - 2, last); i++) {
    const isPeak = values[i] >= values[i - 1] && values[i] > values[i + 1]
    if (isPeak && i !== top && values[i] > second) second = values[i]
  }
  return second
}
