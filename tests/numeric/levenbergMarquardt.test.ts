import { describe, expect, it } from 'vitest'
import { levenbergMarquardt } from '../../src/numeric/levenbergMarquardt.ts'

// NIST Statistical Reference Datasets, nonlinear regression, "Misra1a": y = b1 (1 − exp(−b2 x)), second start.
// Data and certified values written down from memory.
const X = [77.6, 114.9, 141.1, 190.8, 239.9, 289, 332.8, 378.4, 434.8, 477.3, 536.8, 593.1, 689.1, 760]
const Y = Float64Array.of(
  10.07,
  14.73,
  17.94,
  23.93,
  29.61,
  35.18,
  40.02,
  44.82,
  50.76,
  55.05,
  61.01,
  66.4,
  75.47,
  81.78,
)
const model = (b: Float64Array, values: Float64Array, jacobian: Float64Array) =>
  X.forEach((x, i) => {
    const fall = Math.exp(-b[1] * x)
    values[i] = b[0] * (1 - fall)
    jacobian[2 * i] = 1 - fall
    jacobian[2 * i + 1] = b[0] * x * fall
  })
const ones = new Float64Array(14).fill(1)

describe('levenbergMarquardt', () => {
  it('finds the certified parameters, errors and sum of squares', () => {
    const fit = levenbergMarquardt(model, Y, ones, { start: [250, 5e-4] })
    expect(fit.converged).toBe(true)
    expect(fit.parameters[0] / 238.94212918).toBeCloseTo(1, 5)
    expect(fit.parameters[1] / 5.5015643181e-4).toBeCloseTo(1, 5)
    expect(fit.chiSquare / 0.12455138894).toBeCloseTo(1, 5)
    // certified standard errors scale the covariance by the residual variance, 12 degrees of freedom
    const scale = fit.chiSquare / 12
    expect(Math.sqrt(fit.covariance[0] * scale) / 2.7070075241).toBeCloseTo(1, 3)
    expect(Math.sqrt(fit.covariance[3] * scale) / 7.2668688436e-6).toBeCloseTo(1, 3)
  })

  it('stays within bounds and finds the minimum on them', () => {
    const fit = levenbergMarquardt(model, Y, ones, {
      start: [250, 5e-4],
      lower: Float64Array.of(245, 0),
      upper: Float64Array.of(400, 1),
    })
    expect(fit.parameters[0]).toBe(245)
    // least squares in b2 alone at b1 = 245: its derivative vanishes there
    const values = new Float64Array(14)
    const jacobian = new Float64Array(28)
    model(fit.parameters, values, jacobian)
    let slope = 0
    let curvature = 0
    for (let i = 0; i < 14; i++) {
      slope += (Y[i] - values[i]) * jacobian[2 * i + 1]
      curvature += jacobian[2 * i + 1] ** 2
    }
    expect(Math.abs(slope / curvature) / fit.parameters[1]).toBeLessThan(1e-4)
  })

  it('gives no covariance where a parameter has no influence', () => {
    const flat = (b: Float64Array, values: Float64Array, jacobian: Float64Array) => {
      values.fill(b[0])
      for (let i = 0; i < 14; i++) jacobian[2 * i] = 1
    }
    expect(levenbergMarquardt(flat, Y, ones, { start: [1, 1] }).covariance[0]).toBeNaN()
  })
})
