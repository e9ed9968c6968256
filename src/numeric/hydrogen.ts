/** Rydberg constant for infinite mass [1/m], CODATA 2018; the electron's mass in units of the proton's, CODATA 2018. */
const RYDBERG = 10973731.56816
const ELECTRON_PER_PROTON = 5.44617021487e-4
/** The electron's mass in units of the nucleus of ⁴He (alpha particle), CODATA 2018. */
const ELECTRON_PER_ALPHA = 1.370933554787e-4
/** hc [eV Å], exact in the SI of 2019. */
const HC = 12398.419843320026

/**
 * Wavelength in vacuum [Å] of the line of a one-electron atom between two levels, by Rydberg's formula with the reduced
 * mass: H (charge 1) or He II (charge 2). Fine structure moves the centre of a line by up to 1.4e-5 to the blue.
 */
export function rydbergWavelength(lower: number, upper: number, charge: 1 | 2 = 1): number {
  const ratio = charge === 1 ? ELECTRON_PER_PROTON : ELECTRON_PER_ALPHA
  const rydberg = (RYDBERG / (1 + ratio)) * charge * charge
  return 1e10 / (rydberg * (1 / (lower * lower) - 1 / (upper * upper)))
}

/** Photon energy hc/λ [eV] of a wavelength in vacuum [Å]. */
export function photonEnergy(vacuumWavelength: number): number {
  return HC / vacuumWavelength
}
