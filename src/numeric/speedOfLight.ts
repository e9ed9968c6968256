/** Speed of light in vacuum [km/s]: exact, by the definition of the metre (SI). */
export const SPEED_OF_LIGHT = 299792.458
