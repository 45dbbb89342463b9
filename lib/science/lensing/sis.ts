/**
 * Singular isothermal sphere: the lens whose deflection has the same size, the Einstein radius, everywhere.
 *   theta_E = 4 pi (sigma / c)^2 D_ls / D_s
 * Source: R. Narayan & M. Bartelmann, arXiv:astro-ph/9606001, section on the singular isothermal sphere;
 * P. Schneider, C. Kochanek & J. Wambsganss, Saas-Fee Advanced Course 33 (2006), part 2. Angles in arcseconds.
 */
import { PARSEC_M, RADIANS_PER_ARCSEC, SOLAR_MASS_PARAMETER_M3_S2, SPEED_OF_LIGHT_KM_S } from './constants'

export interface SkyVector {
  /** Towards east, arcsec. */
  east: number
  /** Towards north, arcsec. */
  north: number
}

/**
 * Einstein radius of a velocity dispersion.
 * @param distanceRatio D_ls / D_s, angular diameter distances, 0 to 1.
 */
export function einsteinRadiusArcsec(velocityDispersionKmS: number, distanceRatio: number): number {
  const beta = velocityDispersionKmS / SPEED_OF_LIGHT_KM_S
  return (4 * Math.PI * beta * beta * distanceRatio) / RADIANS_PER_ARCSEC
}

/** Velocity dispersion in km/s that gives an Einstein radius; the inverse of `einsteinRadiusArcsec`. */
export function velocityDispersionKmS(einsteinRadius: number, distanceRatio: number): number {
  return SPEED_OF_LIGHT_KM_S * Math.sqrt((einsteinRadius * RADIANS_PER_ARCSEC) / (4 * Math.PI * distanceRatio))
}

/**
 * Mass in solar masses inside the Einstein radius of any circular lens, M = c^2 theta_E^2 D_l D_s / (4 G D_ls).
 * @param lensMpc, sourceMpc, betweenMpc angular diameter distances.
 */
export function massInEinsteinRadius(
  einsteinRadius: number,
  { lensMpc, sourceMpc, betweenMpc }: { lensMpc: number; sourceMpc: number; betweenMpc: number },
): number {
  const angle = einsteinRadius * RADIANS_PER_ARCSEC
  const lengthM = ((lensMpc * sourceMpc) / betweenMpc) * 1e6 * PARSEC_M
  return ((SPEED_OF_LIGHT_KM_S * 1000) ** 2 * angle * angle * lengthM) / (4 * SOLAR_MASS_PARAMETER_M3_S2)
}

/** Deflection at an offset from the lens: theta_E times the unit vector outwards; zero at the centre itself. */
export function sisDeflection(einsteinRadius: number, at: SkyVector): SkyVector {
  const radius = Math.hypot(at.east, at.north)
  if (radius === 0) return { east: 0, north: 0 }
  return { east: (einsteinRadius * at.east) / radius, north: (einsteinRadius * at.north) / radius }
}

export interface SisImage {
  /** Along the line from lens to source; negative on the far side of the lens. */
  position: number
  /** Signed: negative for the mirrored image. */
  magnification: number
}

/**
 * Images of a point source at distance `beta` from the lens: one, or two when beta is below the Einstein radius. At
 * beta = 0 both stand for the whole ring and their magnification is infinite.
 */
export function sisImages(einsteinRadius: number, beta: number): SisImage[] {
  const image = (position: number, sign: number): SisImage => ({
    position,
    magnification: 1 + sign * (einsteinRadius / beta),
  })
  const outer = image(beta + einsteinRadius, 1)
  return beta < einsteinRadius ? [outer, image(beta - einsteinRadius, -1)] : [outer]
}
