/** FWHM of a Gaussian ÷ its standard deviation, 2√(2 ln 2). */
export const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2)

/** Half width of the kernel in its standard deviations; beyond lies 5e-4 of its area. */
const REACH = 3.5
/** The kernel is computed anew where the local step has changed by this share. */
const STEP_TOLERANCE = 0.002
/** Below this many samples a point-sampled Gaussian has too small a variance; three points of the right variance serve. */
const NARROW = 0.8
/** With more samples to a standard deviation than this, bins are smoothed in place of samples: wide kernels cost. */
const FINEST = 60
/** Bins to a standard deviation; their own width adds 1/12/16² of its square. */
const BINS = 16

/**
 * `flux` smoothed by the Gaussian that turns a profile of FWHM `from` into one of FWHM `to`, on any increasing grid.
 * Samples that are not usable or not finite have no part; what has no usable sample in reach is NaN. Constants pass
 * unchanged. When `to` is not wider than `from`, a copy with NaN for the samples left out.
 *
 * @param wavelength  shape (n) [Å], increasing
 * @param flux        shape (n)
 * @param usable      shape (n), 1 where the sample counts
 * @param widths      FWHM [Å] of the profile now and as wanted
 */
export function smoothToFwhm(
  wavelength: Float64Array,
  flux: Float64Array,
  usable: Uint8Array,
  { from, to }: { readonly from: number; readonly to: number },
): Float64Array {
  const sigma = to > from ? Math.sqrt(to * to - from * from) / FWHM_PER_SIGMA : 0
  return isFine(wavelength, sigma)
    ? smoothBinned(wavelength, flux, usable, sigma)
    : smoothSamples(wavelength, flux, usable, sigma)
}

/** True where samples lie so close that a kernel over them would be needlessly long, if only in a stretch. */
function isFine(wavelength: Float64Array, sigma: number): boolean {
  for (let i = 0; i < wavelength.length; i++) if (stepAt(wavelength, i) * FINEST < sigma) return true
  return false
}

function smoothSamples(wavelength: Float64Array, flux: Float64Array, usable: Uint8Array, sigma: number): Float64Array {
  const n = flux.length
  const out = new Float64Array(n)
  const good = new Float64Array(n)
  const value = new Float64Array(n)
  let missing = 0
  for (let i = 0; i < n; i++) {
    const counts = usable[i] !== 0 && Number.isFinite(flux[i])
    good[i] = counts ? 1 : 0
    value[i] = counts ? flux[i] : 0
    if (!counts) missing++
  }
  let kernelStep = 0
  let kernel: Float64Array = new Float64Array(1)
  let half = 0
  for (let i = 0; i < n; i++) {
    const step = stepAt(wavelength, i)
    if (!(Math.abs(step - kernelStep) <= STEP_TOLERANCE * kernelStep)) {
      kernel = gaussianKernel(sigma / step)
      half = (kernel.length - 1) / 2
      kernelStep = step
    }
    const inside = i >= half && i + half < n
    const first = inside ? -half : Math.max(-half, -i)
    const last = inside ? half : Math.min(half, n - 1 - i)
    let sum = 0
    if (inside && missing === 0) {
      const start = i - half
      for (let j = 0; j < kernel.length; j++) sum += kernel[j] * value[start + j]
      out[i] = sum
      continue
    }
    let weight = 0
    for (let j = first; j <= last; j++) {
      sum += kernel[j + half] * value[i + j]
      weight += kernel[j + half] * good[i + j]
    }
    out[i] = weight > 1e-3 ? sum / weight : NaN
  }
  return out
}

/** Means in bins of σ/16, smoothed, with straight lines between them. */
function smoothBinned(wavelength: Float64Array, flux: Float64Array, usable: Uint8Array, sigma: number): Float64Array {
  const n = flux.length
  const x = new Float64Array(n)
  const mean = new Float64Array(n)
  let bins = 0
  for (let i = 0; i < n; bins++) {
    const end = wavelength[i] + sigma / BINS
    let [all, good, place, sum] = [0, 0, 0, 0]
    for (; i < n && (all === 0 || wavelength[i] < end); i++, all++) {
      place += wavelength[i]
      if (usable[i] === 0 || !Number.isFinite(flux[i])) continue
      sum += flux[i]
      good++
    }
    x[bins] = place / all
    mean[bins] = good > 0 ? sum / good : NaN
  }
  const centre = x.subarray(0, bins)
  const smooth = smoothSamples(centre, mean.subarray(0, bins), new Uint8Array(bins).fill(1), sigma)
  const out = new Float64Array(n)
  for (let i = 0, b = 0; i < n; i++) {
    while (b + 2 < bins && wavelength[i] > centre[b + 1]) b++
    const [left, right] = [smooth[b], smooth[Math.min(bins - 1, b + 1)]]
    const share = bins < 2 ? 0 : Math.min(1, Math.max(0, (wavelength[i] - centre[b]) / (centre[b + 1] - centre[b])))
    out[i] = Number.isNaN(left) ? right : Number.isNaN(right) ? left : left + share * (right - left)
  }
  return out
}

/** Samples on either side that a step which is far too small for its place is judged by. */
const NEIGHBOURS = 4

/** Step to the next sample; where two samples all but coincide (a join of two arms), the mean step about them. */
function stepAt(wavelength: Float64Array, i: number): number {
  const n = wavelength.length
  const step = i + 1 < n ? wavelength[i + 1] - wavelength[i] : wavelength[i] - wavelength[i - 1]
  const first = Math.max(0, i - NEIGHBOURS)
  const last = Math.min(n - 1, i + NEIGHBOURS)
  const around = (wavelength[last] - wavelength[first]) / (last - first)
  return step < 0.3 * around ? around : step
}

/** Kernel of unit area; `sigma` in samples. */
function gaussianKernel(sigma: number): Float64Array {
  if (!(sigma > 0.05)) return Float64Array.of(1)
  if (sigma < NARROW) {
    const side = (sigma * sigma) / 2
    return Float64Array.of(side, 1 - 2 * side, side)
  }
  const half = Math.ceil(REACH * sigma)
  const kernel = new Float64Array(2 * half + 1)
  let sum = 0
  for (let j = -half; j <= half; j++) sum += kernel[j + half] = Math.exp(-0.5 * (j / sigma) ** 2)
  for (let j = 0; j < kernel.length; j++) kernel[j] /= sum
  return kernel
}
