import { quantile } from '../../../src/numeric/median.ts'
import type { TypePosterior } from '../../../src/typing/types.ts'
import type { SharedStar } from './sharedStars.ts'

/** One star typed, against what is published. */
export interface Scored {
  readonly star: SharedStar
  readonly posterior: TypePosterior
}

/** Accuracy and coverage of a list of typed stars; differences in subclasses. */
export interface Score {
  readonly stars: number
  readonly untyped: number
  readonly outside: number
  readonly median: number
  readonly within68: number
  readonly within95: number
  readonly bias: number
  readonly covered68: number
  readonly covered95: number
  /** Median half width of the 68 % range. */
  readonly width: number
  readonly classWithinOne: number
  readonly classOpen: number
  readonly brier: number
}

/** A star left untyped counts as this many subclasses off. */
const MISS = 20
const CLASSES: Readonly<Record<string, number>> = { I: 1, II: 2, III: 3, IV: 4, V: 5 }

/** The score of a list of typed stars. */
export function scoreOf(all: readonly Scored[]): Score {
  const typed = all.filter(({ posterior }) => posterior.typeNumber !== undefined)
  const signed = typed.map(({ star, posterior }) => (posterior.typeNumber ?? NaN) - star.typeNumber)
  const off = [...signed.map(Math.abs), ...new Array<number>(all.length - typed.length).fill(MISS)]
  const holds = (
    low: (p: TypePosterior) => number | undefined,
    high: (p: TypePosterior) => number | undefined,
  ): number =>
    share(
      typed,
      ({ star, posterior }) =>
        star.typeNumber >= (low(posterior) ?? NaN) - 1e-9 && star.typeNumber <= (high(posterior) ?? NaN) + 1e-9,
    )
  const classed = all.filter(({ star }) => star.luminosity !== undefined)
  return {
    stars: all.length,
    untyped: all.length - typed.length,
    outside: all.filter(({ posterior }) => posterior.state === 'outside').length,
    median: quantile(off, 0.5),
    within68: quantile(off, 0.68),
    within95: quantile(off, 0.95),
    bias: quantile(signed, 0.5),
    covered68: holds(
      (p) => p.low68,
      (p) => p.high68,
    ),
    covered95: holds(
      (p) => p.low95,
      (p) => p.high95,
    ),
    width: quantile(
      typed.map(({ posterior }) => posterior.typeNumberErr ?? NaN),
      0.5,
    ),
    classWithinOne: share(
      classed,
      ({ star, posterior }) =>
        Math.abs((CLASSES[posterior.luminosityClass ?? ''] ?? Infinity) - (star.luminosity ?? NaN)) <= 1,
    ),
    classOpen: share(typed, ({ posterior }) => posterior.luminosityClass === undefined),
    brier: classed.reduce((sum, one) => sum + brierOf(one), 0) / classed.length,
  }
}

function brierOf({ star, posterior }: Scored): number {
  const { probDwarf, probGiant, probSupergiant } = posterior
  const luminosity = star.luminosity ?? NaN
  if (probDwarf === undefined || probGiant === undefined || probSupergiant === undefined) return 2
  const truth = [luminosity > 3.5, luminosity > 1.5 && luminosity <= 3.5, luminosity <= 1.5].map(Number)
  return [probDwarf, probGiant, probSupergiant].reduce((sum, p, i) => sum + (p - truth[i]) ** 2, 0)
}

function share<T>(list: readonly T[], test: (one: T) => boolean): number {
  return list.length ? list.filter(test).length / list.length : NaN
}
