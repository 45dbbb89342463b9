/**
 * Singular isothermal ellipsoid with external shear: deflection, potential, convergence, magnification and image positions.
 * The ellipsoid is that of `sie.ts` (R. Kormann, P. Schneider & M. Bartelmann, A&A 284, 285 (1994)).
 *
 * Positions are offsets on the sky in arcsec, `east` and `north`; on a stamp with north up, east is to the LEFT. Position angles
 * run from north through east. Shear of strength g and angle p has the potential (g/2) r^2 cos 2(t - p), with t the position
 * angle of the place seen from the lens: it stretches images ALONG p, so that the mass that causes it lies at right angles to p.
 * (C. Keeton, arXiv:astro-ph/0102341, has the form; signs and angles differ between codes.)
 *
 * With x from the lens, M = 1 - shear matrix and a the ellipsoid's deflection, which depends on direction only, the lens equation
 * is  M x - a(t) = y.  The ellipsoid's potential is x.a, and its second derivatives are 2 kappa across x and 0 along it, so
 *   1 / magnification = det A = 1 - g^2 - 2 kappa (1 - g cos 2(t - p)).
 */
import { sieConvergence, sieDeflector, type EllipsoidLens } from './sie'
import type { SkyVector } from './sis'

export interface Shear {
  /** 0 to below 1; galaxies in groups have up to some tenths */
  strength: number
  /** direction in which images are stretched, degrees from north through east */
  positionAngleDeg: number
}

export interface ShearedLens extends EllipsoidLens {
  shear?: Shear
}

/** What a minimum, saddle point or maximum of the arrival-time surface makes; singular isothermal lenses have no maximum. */
export type ImageKind = 'minimum' | 'saddle'

export interface PointImage extends SkyVector {
  /** signed: negative for mirrored images; infinite on the critical curve */
  magnification: number
  kind: ImageKind
}

/** A lens with its constants worked out, in offsets from its own centre. */
export interface LensModel {
  lens: ShearedLens
  centre: SkyVector
  /** of the ellipsoid alone */
  deflect(east: number, north: number): SkyVector
  /** shear matrix: [[-along, across], [across, along]] on (east, north) */
  along: number
  across: number
  strength: number
}

/** @throws RangeError for a radius that is negative or not finite, an axis ratio outside (0, 1] or a shear outside [0, 1). */
export function lensModel(lens: ShearedLens): LensModel {
  const { einsteinRadiusArcsec, centre, shear } = lens
  const strength = shear?.strength ?? 0
  if (!(einsteinRadiusArcsec >= 0 && Number.isFinite(einsteinRadiusArcsec))) {
    throw new RangeError(`An Einstein radius is a number of arcsec from 0; ${einsteinRadiusArcsec} is not.`)
  }
  if (!(strength >= 0 && strength < 1)) throw new RangeError(`Shear lies from 0 to below 1; ${strength} does not.`)
  const angle = (2 * (shear?.positionAngleDeg ?? 0) * Math.PI) / 180
  return {
    lens,
    centre: centre ?? { east: 0, north: 0 },
    deflect: sieDeflector({ ...lens, centre: undefined }),
    along: strength * Math.cos(angle),
    across: strength === 0 ? 0 : strength * Math.sin(angle),
    strength,
  }
}

/** Deflection of ellipsoid and shear, arcsec. The source seen at a position lies at position minus deflection. */
export function deflection(model: LensModel, at: SkyVector): SkyVector {
  const east = at.east - model.centre.east
  const north = at.north - model.centre.north
  const own = model.deflect(east, north)
  return {
    east: own.east - model.along * east + model.across * north,
    north: own.north + model.across * east + model.along * north,
  }
}

/** Where the light seen at a position comes from. */
export function sourceOf(model: LensModel, at: SkyVector): SkyVector {
  const alpha = deflection(model, at)
  return { east: at.east - alpha.east, north: at.north - alpha.north }
}

/** Lensing potential, arcsec^2, whose gradient is the deflection; 0 at the lens. */
export function potential(model: LensModel, at: SkyVector): number {
  const east = at.east - model.centre.east
  const north = at.north - model.centre.north
  const own = model.deflect(east, north)
  const ofShear = (model.along * (north * north - east * east)) / 2 + model.across * east * north
  return east * own.east + north * own.north + ofShear
}

/** Surface density over the critical one; shear adds none. Infinity at the lens. */
export function convergence(model: LensModel, at: SkyVector): number {
  return sieConvergence(model.lens, at)
}

/** det A: 1 over the signed magnification. -Infinity at the lens. */
export function inverseMagnification(model: LensModel, at: SkyVector): number {
  const east = at.east - model.centre.east
  const north = at.north - model.centre.north
  const squared = east * east + north * north
  const alongSight = (model.along * (north * north - east * east) + 2 * model.across * east * north) / squared
  if (squared === 0) return Number.NEGATIVE_INFINITY
  return 1 - model.strength ** 2 - 2 * convergence(model, at) * (1 - alongSight)
}

/** Matrix of d source / d position on (east, north): symmetric, [east-east, east-north, north-north]. */
export function jacobian(model: LensModel, at: SkyVector): [number, number, number] {
  const east = at.east - model.centre.east
  const north = at.north - model.centre.north
  const squared = east * east + north * north
  const bend = squared === 0 ? Number.POSITIVE_INFINITY : (2 * convergence(model, at)) / squared
  return [
    1 + model.along - bend * north * north,
    -model.across + bend * east * north,
    1 - model.along - bend * east * east,
  ]
}

/** M^-1 (east, north), by the adjugate: det M = 1 - g^2. */
export function withoutShear(model: LensModel, east: number, north: number): SkyVector {
  const determinant = 1 - model.strength * model.strength
  return {
    east: ((1 - model.along) * east + model.across * north) / determinant,
    north: (model.across * east + (1 + model.along) * north) / determinant,
  }
}
