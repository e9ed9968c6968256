/**
 * What a grism axis (`-GRI`, `-GRA`) states in its PVi_0 ... PVi_6 cards (FITS WCS Paper III, section 5).
 * Grooves per Å; angles in radians; the index and its slope per Å at the reference wavelength.
 */
export interface Grism {
  readonly ruling: number
  readonly order: number
  readonly incidence: number
  readonly index: number
  readonly indexSlope: number
  readonly outOfPlane: number
  readonly tilt: number
}

/** The grism of PVi_0 ... PVi_6 as written [1/m, 1, deg, 1, 1/m, deg, deg]; the standard's defaults for absent ones. */
export function grismOf(parameter: (index: number) => number | undefined): Grism {
  const radian = Math.PI / 180
  return {
    ruling: (parameter(0) ?? 0) * 1e-10,
    order: parameter(1) ?? 0,
    incidence: (parameter(2) ?? 0) * radian,
    index: parameter(3) ?? 1,
    indexSlope: (parameter(4) ?? 0) * 1e-10,
    outOfPlane: (parameter(5) ?? 0) * radian,
    tilt: (parameter(6) ?? 0) * radian,
  }
}

/**
 * Wavelength [Å] at a distance `step` from the reference point, where `step` is in Å as if the axis were linear;
 * NaN where the grism equation has no real solution.
 *
 * @param reference  wavelength [Å] at the reference point, in the medium that the grating stands in
 */
export function grismWavelength(grism: Grism, reference: number, step: number): number {
  const { ruling, order, incidence, index, indexSlope, outOfPlane, tilt } = grism
  const grooves = (ruling * order) / Math.cos(outOfPlane)
  const bend = grooves - indexSlope * Math.sin(incidence)
  const exit = Math.asin(grooves * reference - index * Math.sin(incidence))
  const slope = bend / (Math.cos(exit) * Math.cos(tilt) ** 2)
  const beta = Math.atan(-Math.tan(tilt) + slope * step) + exit + tilt
  return (Math.sin(beta) + (index - indexSlope * reference) * Math.sin(incidence)) / bend
}
