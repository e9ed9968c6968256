import type { TypeGrid } from './types.ts'

/** What a posterior over type and class says in figures. */
export interface PosteriorFigures {
  /** Median, and central 68 % and 95 % of the marginal over type. */
  readonly typeNumber: number
  readonly low68: number
  readonly high68: number
  readonly low95: number
  readonly high95: number
  readonly luminosityNumber: number
  /** shape (c): marginal over the classes. */
  readonly classProbability: Float64Array
  readonly probDwarf: number
  readonly probGiant: number
  readonly probSupergiant: number
}

/** Shares of the two ranges: central 68 % and 95 %. */
const TAIL68 = 0.16
const TAIL95 = 0.025

/** Median, ranges and class probabilities of a posterior; every cell's probability is spread evenly over its own width. */
export function posteriorFigures({ types, classes, probability }: TypeGrid): PosteriorFigures {
  const t = types.length
  const c = classes.length
  const marginal = new Float64Array(t)
  const classProbability = new Float64Array(c)
  for (let i = 0; i < t; i++)
    for (let j = 0; j < c; j++) {
      marginal[i] += probability[i * c + j]
      classProbability[j] += probability[i * c + j]
    }
  const at = (share: number): number => quantileOfCells(types, marginal, share)
  const grouped = (from: number, to: number): number => {
    let sum = 0
    for (let j = 0; j < c; j++) if (classes[j] > from && classes[j] <= to) sum += classProbability[j]
    return Math.min(1, sum)
  }
  let luminosityNumber = 0
  for (let j = 0; j < c; j++) luminosityNumber += classes[j] * classProbability[j]
  return {
    typeNumber: at(0.5),
    low68: at(TAIL68),
    high68: at(1 - TAIL68),
    low95: at(TAIL95),
    high95: at(1 - TAIL95),
    luminosityNumber,
    classProbability,
    probDwarf: grouped(3.5, 9),
    probGiant: grouped(1.5, 3.5),
    probSupergiant: grouped(-9, 1.5),
  }
}

/** Where the cumulative probability reaches `share`, linear inside a cell. */
function quantileOfCells(types: Float64Array, marginal: Float64Array, share: number): number {
  let sum = 0
  for (let i = 0; i < types.length; i++) {
    if (sum + marginal[i] >= share || i === types.length - 1) {
      const left = i > 0 ? 0.5 * (types[i - 1] + types[i]) : types[0]
      const right = i + 1 < types.length ? 0.5 * (types[i] + types[i + 1]) : types[i]
      const part = marginal[i] > 0 ? (share - sum) / marginal[i] : 0.5
      return left + Math.min(1, Math.max(0, part)) * (right - left)
    }
    sum += marginal[i]
  }
  return NaN
}

/** A posterior of log densities on a grid, normalised so that its largest is finite; the sum is 1. */
export function gridOf(types: Float64Array, classes: Float64Array, logDensity: Float64Array): TypeGrid {
  let top = -Infinity
  for (const value of logDensity) if (value > top) top = value
  const probability = new Float64Array(logDensity.length)
  let sum = 0
  for (let i = 0; i < logDensity.length; i++) sum += probability[i] = Math.exp(logDensity[i] - top)
  for (let i = 0; i < probability.length; i++) probability[i] /= sum
  return { types, classes, probability }
}
