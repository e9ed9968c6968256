import { FormatError } from '../errors.ts'
import { readImage } from '../fits/image.ts'
import { readData } from '../fits/source.ts'
import type { ByteSource, Hdu } from '../fits/types.ts'
import { quantileSorted } from '../numeric/median.ts'
import { countLower, countOrder, emptyLower, emptyOrderHistogram, placeOfRank, valueAt } from './orderStatistics.ts'
import type { OrderHistogram } from './orderStatistics.ts'

/** What one way through the pixels of a frame gives; counts after scaling. */
export interface PixelScan {
  readonly width: number
  readonly height: number
  readonly median: number
  readonly p99: number
  readonly max: number
  /** Median of the absolute differences of neighbours along a row, on every eighth row. */
  readonly neighbourDifference: number
  /** Pixels at or above a level. */
  countAbove(level: number): number
  readonly nonfinite: number
  /** Mean of each column, shape (width), and of each row, shape (height); non-finite pixels left out. */
  readonly columnMeans: Float64Array
  readonly rowMeans: Float64Array
  /** Largest count the detector's 16 bits can hold; undefined for wider or scaled data. */
  readonly rangeEnd?: number
}

/** Rows between those whose neighbouring differences are taken; an eighth of a frame is plenty for a median. */
const NOISE_ROW_STEP = 8
const ROWS_AT_ONCE = 64

/**
 * Statistics of the pixels of an image in one way through it (two for data wider than 16 bits), row by row: exact
 * order statistics by histograms, profiles along both axes. Median and percentile of an even count interpolate
 * (Hyndman & Fan 1996, type 7). A third axis is taken as more rows.
 */
export function scanPixels(source: ByteSource, hdu: Hdu): PixelScan {
  const [width = 0, ...rest] = hdu.dimensions
  const height = hdu.dimensions.length < 2 ? 0 : rest.reduce((product, n) => product * n, 1)
  if (width < 1 || height < 1)
    throw new FormatError('no-image', `frame requires two axes, got ${hdu.dimensions.join(' × ') || 'none'}`, {
      hdu: hdu.index,
    })
  const isPlain16 = hdu.kind === 'image' && hdu.bitpix === 16 && hdu.blank === undefined
  return isPlain16 ? scanShorts(source, hdu, width, height) : scanFloats(source, hdu, width, height)
}

/** Rows between those that make up the mean profile along a row: a quarter of a frame is plenty for a mean. */
const COLUMN_ROW_STEP = 4
/** Differences of neighbours are counted up to here; a noise beyond it is given as this. */
const MOST_STEP = 16383
/** Frames with fewer rows give all of them to the profile. */
const FEW_ROWS = 256

/** 16-bit integers: every value has its own bin, so the histogram holds all. */
function scanShorts(source: ByteSource, hdu: Hdu, width: number, height: number): PixelScan {
  const { scale } = hdu
  const zero = Number(hdu.zero)
  const counts = new Uint32Array(65536)
  const steps = new Uint32Array(MOST_STEP + 1)
  const columns = new Float64Array(width)
  const rows = new Float64Array(height)
  const rowBytes = width * 2
  const atOnce = Math.max(1, Math.floor(262_144 / rowBytes))
  const stride = height < FEW_ROWS ? 1 : COLUMN_ROW_STEP
  for (let first = 0; first < height; first += atOnce) {
    const taken = Math.min(atOnce, height - first)
    const bytes = readData(source, hdu, hdu.dataByte + first * rowBytes, taken * rowBytes)
    countBlock(bytes, { first, taken, stride }, { counts, steps, columns, rows })
  }
  return shortScan(counts, steps, { scale, zero, columns, columnRows: Math.ceil(height / stride), rows })
}

interface ShortCounts {
  readonly counts: Uint32Array
  readonly steps: Uint32Array
  readonly columns: Float64Array
  readonly rows: Float64Array
}

/** Adds a block of whole rows; a function of its own, small enough for the compiler to do well. */
function countBlock(
  bytes: Uint8Array,
  { first, taken, stride }: { readonly first: number; readonly taken: number; readonly stride: number },
  { counts, steps, columns, rows }: ShortCounts,
): void {
  const width = columns.length
  for (let row = 0; row < taken; row++) {
    const start = row * width * 2
    const y = first + row
    const sum =
      y % stride === 0 ? addRow(bytes, start, counts, columns) : countRow(bytes, start, start + 2 * width, counts)
    rows[y] = sum / width
    if (y % NOISE_ROW_STEP === 0) addSteps(bytes, start, width, steps)
  }
}

interface ShortSums {
  readonly scale: number
  readonly zero: number
  readonly columns: Float64Array
  readonly columnRows: number
  readonly rows: Float64Array
}

/** Figures from the histograms of 16-bit data; bin b holds the stored value b − 32768. */
function shortScan(
  counts: Uint32Array,
  steps: Uint32Array,
  { scale, zero, columns, columnRows, rows }: ShortSums,
): PixelScan {
  const physical = (bin: number): number => zero + scale * (bin - 32768)
  const [width, height] = [columns.length, rows.length]
  const total = width * height
  const isRising = scale >= 0
  let top = 65535
  while (top > 0 && counts[top] === 0) top--
  let bottom = 0
  while (bottom < 65535 && counts[bottom] === 0) bottom++
  const stepTotal = (width - 1) * Math.ceil(height / NOISE_ROW_STEP)
  return {
    width,
    height,
    median: physical(binQuantile(counts, total, 0.5)),
    p99: physical(binQuantile(counts, total, isRising ? 0.99 : 0.01)),
    max: physical(isRising ? top : bottom),
    neighbourDifference: stepTotal ? Math.abs(scale) * binQuantile(steps, stepTotal, 0.5) : NaN,
    countAbove: (level) => {
      let above = 0
      for (let bin = bottom; bin <= top; bin++) if (counts[bin] && physical(bin) >= level) above += counts[bin]
      return above
    },
    nonfinite: 0,
    columnMeans: columns.map((sum) => physical(sum / columnRows)),
    rowMeans: rows.map(physical),
    ...(scale === 1 ? { rangeEnd: physical(65535) } : {}),
  }
}

/** Adds one row of big-endian 16-bit integers to the histogram and the column sums; returns the row's sum of bins. */
function addRow(bytes: Uint8Array, start: number, counts: Uint32Array, columns: Float64Array): number {
  let sum = 0
  for (let x = 0, at = start; x < columns.length; x++, at += 2) {
    const bin = ((bytes[at] << 8) | bytes[at + 1]) ^ 0x8000
    counts[bin]++
    columns[x] += bin
    sum += bin
  }
  return sum
}

/** As `addRow`, without the columns; four pixels a round, each with a sum of its own, so that none waits for another. */
function countRow(bytes: Uint8Array, start: number, end: number, counts: Uint32Array): number {
  let [a, b, c, d] = [0, 0, 0, 0]
  let at = start
  for (; at + 8 <= end; at += 8) {
    const p = ((bytes[at] << 8) | bytes[at + 1]) ^ 0x8000
    const q = ((bytes[at + 2] << 8) | bytes[at + 3]) ^ 0x8000
    const r = ((bytes[at + 4] << 8) | bytes[at + 5]) ^ 0x8000
    const s = ((bytes[at + 6] << 8) | bytes[at + 7]) ^ 0x8000
    counts[p]++
    counts[q]++
    counts[r]++
    counts[s]++
    a += p
    b += q
    c += r
    d += s
  }
  let sum = a + b + c + d
  for (; at < end; at += 2) {
    const bin = ((bytes[at] << 8) | bytes[at + 1]) ^ 0x8000
    counts[bin]++
    sum += bin
  }
  return sum
}

function addSteps(bytes: Uint8Array, start: number, width: number, steps: Uint32Array): void {
  let before = ((bytes[start] << 8) | bytes[start + 1]) ^ 0x8000
  for (let x = 1, at = start + 2; x < width; x++, at += 2) {
    const bin = ((bytes[at] << 8) | bytes[at + 1]) ^ 0x8000
    const step = bin > before ? bin - before : before - bin
    steps[step < MOST_STEP ? step : MOST_STEP]++
    before = bin
  }
}

/** Interpolated quantile of a histogram whose bin numbers are the values. */
function binQuantile(counts: Uint32Array, total: number, fraction: number): number {
  const position = (total - 1) * fraction
  const rank = Math.floor(position)
  let before = 0
  let bin = 0
  while (before + counts[bin] <= rank) before += counts[bin++]
  if (rank + 1 < before + counts[bin] || position === rank) return bin
  let next = bin + 1
  while (next < counts.length && counts[next] === 0) next++
  return next < counts.length ? bin + (next - bin) * (position - rank) : bin
}

/** Wider integers and floats, compressed images, images with undefined pixels: by the bits of 32-bit floats. */
function scanFloats(source: ByteSource, hdu: Hdu, width: number, height: number): PixelScan {
  const floats = new Float32Array(width * ROWS_AT_ONCE)
  const bits = new Uint32Array(floats.buffer)
  const histogram = emptyOrderHistogram()
  const columns = new Float64Array(width)
  const columnCounts = new Uint32Array(width)
  const rows = new Float64Array(height)
  const steps = new Float32Array(width * Math.ceil(height / NOISE_ROW_STEP))
  let stepCount = 0
  let nonfinite = 0
  let max = -Infinity
  const eachBlock = (visit: (block: Float64Array, first: number, taken: number) => void): void => {
    for (let first = 0; first < height; first += ROWS_AT_ONCE) {
      const taken = Math.min(ROWS_AT_ONCE, height - first)
      const block = readImage(source, hdu, { start: first * width, count: taken * width })
      floats.set(block)
      visit(block, first, taken)
    }
  }
  eachBlock((block, first, taken) => {
    nonfinite += countOrder(histogram, bits, taken * width)
    for (let row = 0; row < taken; row++) {
      const start = row * width
      let sum = 0
      let finite = 0
      for (let x = 0; x < width; x++) {
        const value = block[start + x]
        // NaN − NaN and ∞ − ∞ are the values that differ from zero here
        if (value - value !== 0) continue
        sum += value
        finite++
        columns[x] += value
        columnCounts[x]++
        if (value > max) max = value
      }
      rows[first + row] = finite ? sum / finite : NaN
      if ((first + row) % NOISE_ROW_STEP === 0)
        for (let x = 1; x < width; x++) {
          const step = Math.abs(block[start + x] - block[start + x - 1])
          if (step - step === 0) steps[stepCount++] = step
        }
    }
  })
  const quantiles = floatQuantiles(histogram, [0.5, 0.99], (count) =>
    eachBlock((_block, _first, taken) => count(bits, taken * width)),
  )
  const sorted = steps.subarray(0, stepCount).sort()
  let atMax: number | undefined
  return {
    width,
    height,
    median: quantiles[0],
    p99: quantiles[1],
    max: histogram.count ? max : NaN,
    neighbourDifference: stepCount ? quantileSorted(sorted, 0.5) : NaN,
    countAbove: (level) => {
      if (level > max) return 0
      if (level === max && atMax !== undefined) return atMax
      let above = 0
      eachBlock((block) => {
        for (let i = 0; i < block.length; i++) if (block[i] >= level) above++
      })
      if (level === max) atMax = above
      return above
    },
    nonfinite,
    columnMeans: columns.map((sum, x) => (columnCounts[x] ? sum / columnCounts[x] : NaN)),
    rowMeans: rows,
  }
}

function floatQuantiles(
  histogram: OrderHistogram,
  fractions: readonly number[],
  again: (count: (bits: Uint32Array, n: number) => void) => void,
): readonly number[] {
  const { count } = histogram
  if (count === 0) return fractions.map(() => NaN)
  const ranks = fractions.map((fraction) => (count - 1) * fraction)
  const places = ranks.map((rank) =>
    [Math.floor(rank), Math.min(Math.floor(rank) + 1, count - 1)].map((whole) => placeOfRank(histogram, whole)),
  )
  const lower = emptyLower(places.flat())
  again((bits, n) => countLower(lower, bits, n))
  return places.map(([low, high], i) => {
    const from = valueAt(lower, low)
    return from + (valueAt(lower, high) - from) * (ranks[i] - Math.floor(ranks[i]))
  })
}
