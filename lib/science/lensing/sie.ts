/**
 * Singular isothermal ellipsoid: R. Kormann, P. Schneider & M. Bartelmann, A&A 284, 285 (1994), section 2.
 *
 * Convention. f is the axis ratio minor / major of the lines of equal surface density. In the lens frame x2 lies along
 * the MAJOR axis and x1 along the minor one. Normalised to the "intermediate axis":
 *   kappa = sqrt(f) b / (2 sqrt(x1^2 + f^2 x2^2))
 * so that the critical curve (kappa = 1/2) encloses the area pi b^2: b is the circularised Einstein radius, and
 * b = 4 pi (sigma / c)^2 D_ls / D_s. Position angle of the major axis in degrees from north through east. Angles in
 * arcsec.
 *   alpha1 = b sqrt(f)/f' asinh(f'/f cos phi),  alpha2 = b sqrt(f)/f' asin(f' sin phi),  f' = sqrt(1 - f^2)
 * with phi the polar angle from x1: the deflection does not depend on the distance.
 */
import type { SkyVector } from './sis'

export interface EllipsoidLens {
  /** Circularised Einstein radius b. */
  einsteinRadiusArcsec: number
  /** Minor over major, in (0, 1]. */
  axisRatio: number
  /** Of the major axis, degrees from north through east. */
  positionAngleDeg: number
  /** Position of the lens, arcsec from the origin; the origin when left out. */
  centre?: SkyVector
}

/**
 * Below this ellipticity 1 - f the deflection differs from the sphere's by less than 1e-6 b, and f' would lose digits.
 */
const ROUND = 1e-6

interface Frame {
  sin: number
  cos: number
  east: number
  north: number
}

function frameOf({ positionAngleDeg, centre }: EllipsoidLens): Frame {
  const angle = (positionAngleDeg * Math.PI) / 180
  return { sin: Math.sin(angle), cos: Math.cos(angle), east: centre?.east ?? 0, north: centre?.north ?? 0 }
}

/** (x1, x2) -> (alpha1, alpha2) for a direction given by its unit vector. */
function deflectionInFrame(lens: EllipsoidLens, cosPhi: number, sinPhi: number): [number, number] {
  const { einsteinRadiusArcsec: b, axisRatio: f } = lens
  if (1 - f < ROUND) return [b * cosPhi, b * sinPhi]
  const fPrime = Math.sqrt(1 - f * f)
  const scale = (b * Math.sqrt(f)) / fPrime
  return [scale * Math.asinh((fPrime / f) * cosPhi), scale * Math.asin(fPrime * sinPhi)]
}

/** The function (east, north) -> deflection with the lens's constants worked out once, for ray tracing. */
export function sieDeflector(lens: EllipsoidLens): (east: number, north: number) => SkyVector {
  requireAxisRatio(lens.axisRatio)
  const { sin, cos, east: east0, north: north0 } = frameOf(lens)
  return (east, north) => {
    const dEast = east - east0
    const dNorth = north - north0
    const radius = Math.sqrt(dEast * dEast + dNorth * dNorth)
    if (radius === 0) return { east: 0, north: 0 }
    const cosPhi = (dEast * cos - dNorth * sin) / radius
    const sinPhi = (dEast * sin + dNorth * cos) / radius
    const [alpha1, alpha2] = deflectionInFrame(lens, cosPhi, sinPhi)
    return { east: alpha1 * cos + alpha2 * sin, north: alpha2 * cos - alpha1 * sin }
  }
}

/** Deflection at a position; zero at the lens's own centre. The source seen there lies at position minus deflection. */
export function sieDeflection(lens: EllipsoidLens, at: SkyVector): SkyVector {
  return sieDeflector(lens)(at.east, at.north)
}

/** Surface density over the critical one; Infinity at the centre. */
export function sieConvergence(lens: EllipsoidLens, at: SkyVector): number {
  requireAxisRatio(lens.axisRatio)
  const { sin, cos, east, north } = frameOf(lens)
  const dEast = at.east - east
  const dNorth = at.north - north
  const x1 = dEast * cos - dNorth * sin
  const x2 = dEast * sin + dNorth * cos
  const { axisRatio: f, einsteinRadiusArcsec: b } = lens
  return (Math.sqrt(f) * b) / (2 * Math.hypot(x1, f * x2))
}

export interface LensedImage extends SkyVector {
  /** Signed magnification 1 / (1 - 2 kappa): positive at minima of the arrival time, negative at saddles. */
  magnification: number
}

const DIRECTIONS = 4000

/**
 * Images of a point source: one, two or four (two or three where the astroid caustic reaches out of the cut).
 * Since the deflection depends on direction only, an image lies where the source plus deflection has no part across the
 * line of sight to it: one equation in the polar angle, solved between sign changes on a grid and by bisection.
 * @param source position, arcsec, same origin as the lens's centre.
 * @returns in order of polar angle from the minor axis; image positions hold the lens equation to about 1e-12 b.
 */
export function sieImages(lens: EllipsoidLens, source: SkyVector): LensedImage[] {
  requireAxisRatio(lens.axisRatio)
  const { sin, cos, east, north } = frameOf(lens)
  const y1 = (source.east - east) * cos - (source.north - north) * sin
  const y2 = (source.east - east) * sin + (source.north - north) * cos
  const across = (phi: number): number => {
    const [alpha1, alpha2] = deflectionInFrame(lens, Math.cos(phi), Math.sin(phi))
    return -(y1 + alpha1) * Math.sin(phi) + (y2 + alpha2) * Math.cos(phi)
  }
  const images: LensedImage[] = []
  // Half a step off the axes, so that an image on an axis lies between two grid points.
  const angleAt = (k: number) => ((k + 0.5) * 2 * Math.PI) / DIRECTIONS
  let before = across(angleAt(0))
  for (let k = 0; k < DIRECTIONS; k++) {
    const after = across(angleAt(k + 1))
    if (before === 0 || before * after < 0) {
      const phi = bisect(across, angleAt(k), angleAt(k + 1))
      const [alpha1, alpha2] = deflectionInFrame(lens, Math.cos(phi), Math.sin(phi))
      const radius = (y1 + alpha1) * Math.cos(phi) + (y2 + alpha2) * Math.sin(phi)
      if (radius > 0) {
        const x1 = radius * Math.cos(phi)
        const x2 = radius * Math.sin(phi)
        const at = { east: east + x1 * cos + x2 * sin, north: north + x2 * cos - x1 * sin }
        images.push({ ...at, magnification: 1 / (1 - 2 * sieConvergence(lens, at)) })
      }
    }
    before = after
  }
  return images
}

function bisect(f: (x: number) => number, from: number, to: number): number {
  let low = from
  let high = to
  const rising = f(low) <= 0
  for (let round = 0; round < 60; round++) {
    const middle = (low + high) / 2
    if (f(middle) <= 0 === rising) low = middle
    else high = middle
  }
  return (low + high) / 2
}

function requireAxisRatio(f: number): void {
  if (!(f > 0 && f <= 1)) throw new RangeError(`The axis ratio of a lens lies above 0 and up to 1; ${f} does not.`)
}
