/**
 * Index of refraction of standard air (15 °C, 101 325 Pa, 450 ppm CO2) minus one.
 * Source: Ciddor 1996, Applied Optics 35, 1566, as two-term fit; meant for 2300 Å and longer.
 *
 * @param vacuum  wavelength in vacuum [Å]
 */
export function airRefractivity(vacuum: number): number {
  const squared = (1e4 / vacuum) ** 2
  return 0.05792105 / (238.0185 - squared) + 0.00167917 / (57.362 - squared)
}

/** Below this wavelength [Å] no conversion is made: by convention spectra are given in vacuum there. */
export const VACUUM_BELOW = 2000

/** Wavelength in air [Å] of a wavelength in vacuum [Å] (Ciddor 1996); below 2000 Å the vacuum value itself. */
export function vacuumToAir(vacuum: number): number {
  return vacuum < VACUUM_BELOW ? vacuum : vacuum / (1 + airRefractivity(vacuum))
}

/**
 * Wavelength in vacuum [Å] of a wavelength in air [Å], so that `vacuumToAir` gives back the input (to 1e-10 Å);
 * below 2000 Å, where vacuum is the convention, the value itself.
 */
export function airToVacuum(air: number): number {
  if (air * (1 + airRefractivity(air)) < VACUUM_BELOW) return air
  let vacuum = air
  // The index changes by 1e-9 per Å at most, so every round gains six digits or more.
  for (let round = 0; round < 4; round++) vacuum = air * (1 + airRefractivity(vacuum))
  return vacuum
}
