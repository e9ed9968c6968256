import { choleskyInverse, solvePositive } from './positive.ts'

/**
 * Fills `values`, shape (n), and `jacobian`, shape (n × p) by rows (∂value_i/∂parameter_j), for the parameters given.
 */
export type Model = (parameters: Float64Array, values: Float64Array, jacobian: Float64Array) => void

/** Result of a least-squares fit. */
export interface Fit {
  readonly parameters: Float64Array
  /** shape (p × p), by rows: (JᵀWJ)⁻¹, for weights that are inverse variances; NaN when it is singular. */
  readonly covariance: Float64Array
  /** Σ w (y − f)². */
  readonly chiSquare: number
  readonly iterations: number
  readonly converged: boolean
}

const FIRST_DAMPING = 1e-3
const TOLERANCE = 1e-4
/** No step, however short, makes the fit better: it stands at its minimum, or at a bound. */
const LARGEST_DAMPING = 1e7

/**
 * Weighted least-squares fit by the Levenberg–Marquardt method with Marquardt's scaling (Marquardt 1963, J. SIAM 11,
 * 431) and an analytic Jacobian.
 *
 * @param y       shape (n), finite
 * @param weight  shape (n), inverse variances; 0 leaves a point out
 * @param start   first parameters, shape (p)
 * @param lower   least value of every parameter; a parameter whose way down leads beyond it rests there
 * @param upper   greatest value of every parameter, likewise
 */
export function levenbergMarquardt(
  model: Model,
  y: Float64Array,
  weight: Float64Array,
  {
    start,
    lower,
    upper,
    maxIterations = 30,
  }: {
    readonly start: ArrayLike<number>
    readonly lower?: Float64Array
    readonly upper?: Float64Array
    readonly maxIterations?: number
  },
): Fit {
  const n = y.length
  const p = start.length
  let parameters = Float64Array.from(start)
  const values = new Float64Array(n)
  let jacobian = new Float64Array(n * p)
  let trialJacobian = new Float64Array(n * p)
  const normal = new Float64Array(p * p)
  const damped = new Float64Array(p * p)
  const gradient = new Float64Array(p)
  const pushed = new Float64Array(p)
  model(parameters, values, jacobian)
  const residual = new Float64Array(n)
  let chiSquare = residuals(y, values, weight, residual)
  let damping = FIRST_DAMPING
  let converged = false
  let iterations = 0
  normalEquations(jacobian, weight, residual, normal, gradient)
  const trial = new Float64Array(p)
  const trialResidual = new Float64Array(n)
  while (iterations < maxIterations && !converged) {
    iterations++
    damped.set(normal)
    pushed.set(gradient)
    for (let j = 0; j < p; j++) {
      damped[j * p + j] *= 1 + damping
      const down = lower && parameters[j] <= lower[j] && gradient[j] < 0
      const up = upper && parameters[j] >= upper[j] && gradient[j] > 0
      if (down || up) hold(damped, pushed, j)
    }
    const step = solvePositive(damped, pushed)
    let better = false
    if (step) {
      for (let j = 0; j < p; j++) {
        trial[j] = parameters[j] + step[j]
        if (lower && trial[j] < lower[j]) trial[j] = lower[j]
        if (upper && trial[j] > upper[j]) trial[j] = upper[j]
      }
      model(trial, values, trialJacobian)
      const trialChiSquare = residuals(y, values, weight, trialResidual)
      if (trialChiSquare <= chiSquare) {
        better = true
        converged = chiSquare - trialChiSquare <= TOLERANCE * Math.max(1, chiSquare)
        chiSquare = trialChiSquare
        parameters = trial.slice()
        residual.set(trialResidual)
        ;[jacobian, trialJacobian] = [trialJacobian, jacobian]
        normalEquations(jacobian, weight, residual, normal, gradient)
      }
    }
    damping = better ? damping / 10 : damping * 8
    if (damping > LARGEST_DAMPING) converged = true
  }
  const covariance = choleskyInverse(normal, p) ?? new Float64Array(p * p).fill(NaN)
  return { parameters, covariance, chiSquare, iterations, converged }
}

/** Takes parameter j out of the step: its equation becomes step_j = 0. */
function hold(matrix: Float64Array, right: Float64Array, j: number): void {
  const p = right.length
  for (let k = 0; k < p; k++) matrix[j * p + k] = matrix[k * p + j] = 0
  matrix[j * p + j] = 1
  right[j] = 0
}

function residuals(y: Float64Array, values: Float64Array, weight: Float64Array, out: Float64Array): number {
  let sum = 0
  for (let i = 0; i < y.length; i++) {
    out[i] = y[i] - values[i]
    sum += weight[i] * out[i] * out[i]
  }
  return sum
}

function normalEquations(
  jacobian: Float64Array,
  weight: Float64Array,
  residual: Float64Array,
  normal: Float64Array,
  gradient: Float64Array,
): void {
  const p = gradient.length
  normal.fill(0)
  gradient.fill(0)
  for (let i = 0; i < residual.length; i++) {
    if (weight[i] === 0) continue
    for (let a = 0; a < p; a++) {
      const scaled = weight[i] * jacobian[i * p + a]
      gradient[a] += scaled * residual[i]
      for (let b = 0; b <= a; b++) normal[a * p + b] += scaled * jacobian[i * p + b]
    }
  }
  for (let a = 0; a < p; a++) for (let b = 0; b < a; b++) normal[b * p + a] = normal[a * p + b]
}
