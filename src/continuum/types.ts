/** The level a spectrum would have without lines, at every sample. */
export interface Continuum {
  /** shape (n) [flux unit]; NaN where no level could be set. */
  readonly level: Float64Array
  /** shape (n) [flux unit], 1 σ of the level itself (placement, not pixel noise). */
  readonly error: Float64Array
  /** True where it is a stated pseudo-continuum (crowded: G–M, the blue, beyond the Balmer limit). */
  readonly isPseudo: boolean
  /** Share of the usable samples that the level rests on, 0 to 1. */
  readonly supported: number
  /**
   * shape (n) [flux unit]: noise, 1 σ, from the file or measured, such that an average of N samples has noise/√N (noise
   * that a resampling has smoothed is scaled up; in crowded stars above S/N 100 it may come out too high, or too low where noise was resampled).
   */
  readonly noise: Float64Array
  readonly noiseFrom: 'file' | 'measured'
}
