import type { ByteSource, Hdu } from '../fits/types.ts'
import { quantile, SIGMA_PER_MAD } from '../numeric/median.ts'
import type { HeaderFacts } from '../spectrum/types.ts'
import { scanPixels } from './pixelScan.ts'
import { brightestTrace, narrowPeaks } from './profiles.ts'
import type { FrameStatistics } from './types.ts'

/** Share of the header's saturation level from which a count is taken as saturated; bias may have been taken out. */
const SATURATION_SHARE = 0.98
/** Largest count over the stated saturation from which the counts cannot be those of one readout. */
const SUMMED = 1.02

/**
 * Statistics of the pixels of a 2-D frame, read row by row: level, noise, saturation, lines along the dispersion and
 * the brightest trace across it. The dispersion runs along the axis whose mean profile holds clearly more narrow
 * lines, else along the longer one.
 *
 * @throws FormatError when the HDU is no image of two axes or its data are cut off
 */
export function frameStatistics(source: ByteSource, hdu: Hdu, facts: HeaderFacts): FrameStatistics {
  const scan = scanPixels(source, hdu)
  const { width, height, median, p99, max, nonfinite } = scan
  const alongX = narrowPeaks(scan.columnMeans)
  const alongY = narrowPeaks(scan.rowMeans)
  const dispersionAxis = dispersionOf(alongX.length, alongY.length, width, height)
  const lines = dispersionAxis === 1 ? alongX : alongY
  const [dispersed, slit] = dispersionAxis === 1 ? [scan.columnMeans, scan.rowMeans] : [scan.rowMeans, scan.columnMeans]
  const trace = brightestTrace(slit)
  // counts far above the stated limit are sums of pixels or of exposures, for which the limit does not hold
  const stated = facts.saturation !== undefined && max > SUMMED * facts.saturation ? undefined : facts.saturation
  const saturation = stated ?? scan.rangeEnd
  const total = width * height - nonfinite
  const saturated =
    saturation === undefined ? flatTop(scan.countAbove(max)) : scan.countAbove(SATURATION_SHARE * saturation)
  // what fills the slit beside a star, above the level between the lines and outside the slit
  const light = quantile(slit, 0.9) - Math.min(quantile(dispersed, 0.1), quantile(slit, 0.1))
  return {
    width,
    height,
    median,
    p99,
    max,
    noise: (SIGMA_PER_MAD * scan.neighbourDifference) / Math.SQRT2,
    saturatedFraction: total > 0 ? saturated / total : 0,
    nonfinite,
    arcLines: lines.length,
    ...(lines.length ? { arcPeak: lines[0].height } : {}),
    ...(trace
      ? {
          trace: { position: trace.position, fwhm: trace.fwhm, peak: trace.height },
          traceContrast: trace.height / Math.max(light, 1e-12),
        }
      : {}),
    dispersionAxis,
    ...(saturation === undefined ? {} : { saturation }),
  }
}

/** Several pixels at exactly the largest count of data without a stated limit: a flat top; one or two are chance. */
function flatTop(atMaximum: number): number {
  return atMaximum >= 4 ? atMaximum : 0
}

function dispersionOf(linesX: number, linesY: number, width: number, height: number): 1 | 2 {
  if (linesX >= 4 && linesX >= 2 * linesY) return 1
  if (linesY >= 4 && linesY >= 2 * linesX) return 2
  return width >= height ? 1 : 2
}
