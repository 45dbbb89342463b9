/** Exact by definition of the metre (SI). */
export const SPEED_OF_LIGHT_KM_S = 299792.458

/** pi / 648000 */
export const RADIANS_PER_ARCSEC = Math.PI / 648000

/** G times the mass of the Sun in m^3 s^-2: IAU 2015 Resolution B3 nominal value, known far better than G alone. */
export const SOLAR_MASS_PARAMETER_M3_S2 = 1.3271244e20

/** Parsec in metres: IAU 2015 Resolution B2, 648000 / pi astronomical units. */
export const PARSEC_M = 3.085677581491367e16
