/**
 * Extinction A(λ)/A(V) after Cardelli, Clayton & Mathis 1989, ApJ 345, 245, equations 2 and 3 (0.3 to 3.3 µm⁻¹).
 *
 * @param wavelength  Å, 3030 to 33 333
 * @param totalToSelective  A(V)/E(B−V), 3.1 in the diffuse medium
 * @throws RangeError outside the range of the equations
 */
export function extinctionCcm89(wavelength: number, totalToSelective = 3.1): number {
  const x = 1e4 / wavelength
  if (!(x >= 0.3 && x <= 3.3)) throw new RangeError(`wavelength requires 3030 to 33333 angstrom, got ${wavelength}`)
  if (x < 1.1) return (0.574 - 0.527 / totalToSelective) * x ** 1.61
  const y = x - 1.82
  const a = horner(y, OPTICAL_A)
  const b = horner(y, OPTICAL_B)
  return a + b / totalToSelective
}

const OPTICAL_A = [1, 0.17699, -0.50447, -0.02427, 0.72085, 0.01979, -0.7753, 0.32999]
const OPTICAL_B = [0, 1.41338, 2.28305, 1.07233, -5.38434, -0.62251, 5.3026, -2.09002]

function horner(y: number, coefficients: readonly number[]): number {
  let value = 0
  for (let k = coefficients.length - 1; k >= 0; k--) value = value * y + coefficients[k]
  return value
}
