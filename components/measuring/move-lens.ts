/** What a drag or an arrow key does to a lens model. Places are offsets on the sky in arcsec. */
import type { Shear, ShearedLens } from '@/lib/science/lensing/sie-shear'
import type { SkyVector } from '@/lib/science/lensing/sis'

export type Grip = 'lens' | 'size' | 'shape' | 'shear' | 'source'

export type DrawnLens = ShearedLens & { centre: SkyVector; shear: Shear }

export interface LensAndSource {
  lens: DrawnLens
  source: SkyVector
}

export const LEAST_AXIS_RATIO = 0.2
export const MOST_SHEAR = 0.5
const LEAST_RADIUS_ARCSEC = 0.02
const MOST_RADIUS_ARCSEC = 120

/** Shear's handle stands this many radii out without shear, and further by SHEAR_REACH radii for shear 1. */
const SHEAR_FOOT = 1.3
const SHEAR_REACH = 3

const plus = (a: SkyVector, b: SkyVector): SkyVector => ({ east: a.east + b.east, north: a.north + b.north })
const minus = (a: SkyVector, b: SkyVector): SkyVector => ({ east: a.east - b.east, north: a.north - b.north })
const length = ({ east, north }: SkyVector): number => Math.hypot(east, north)
const toward = (angleDeg: number, radius: number): SkyVector => ({
  east: radius * Math.sin((angleDeg * Math.PI) / 180),
  north: radius * Math.cos((angleDeg * Math.PI) / 180),
})
/** From north through east, 0 to below 180: a direction without a sense. */
export const directionDeg = ({ east, north }: SkyVector): number =>
  ((((Math.atan2(east, north) * 180) / Math.PI) % 180) + 180) % 180
const between = (low: number, value: number, high: number): number => Math.min(high, Math.max(low, value))

/** Where each handle stands: the ends of the long and the short axis of the ellipse whose area is that of the Einstein ring. */
export function handlesOf({ lens, source }: LensAndSource): Record<Grip, SkyVector> {
  const { centre, einsteinRadiusArcsec: radius, axisRatio, positionAngleDeg, shear } = lens
  return {
    lens: centre,
    source,
    shape: plus(centre, toward(positionAngleDeg, radius / Math.sqrt(axisRatio))),
    size: plus(centre, toward(positionAngleDeg + 90, radius * Math.sqrt(axisRatio))),
    shear: plus(centre, toward(shear.positionAngleDeg, radius * (SHEAR_FOOT + SHEAR_REACH * shear.strength))),
  }
}

export function withRadius(lens: DrawnLens, radiusArcsec: number): DrawnLens {
  return { ...lens, einsteinRadiusArcsec: between(LEAST_RADIUS_ARCSEC, radiusArcsec, MOST_RADIUS_ARCSEC) }
}

/**
 * Moves what is held by as much as the pointer moves, wherever on the picture it is, so that a thumb does not lie on what it moves.
 * The source goes with the lens.
 */
export function dragGrip(model: LensAndSource, grip: Grip, from: SkyVector, to: SkyVector): LensAndSource {
  const { lens, source } = model
  const by = minus(to, from)
  switch (grip) {
    case 'source':
      return { lens, source: plus(source, by) }
    case 'lens':
      return { lens: { ...lens, centre: plus(lens.centre, by) }, source: plus(source, by) }
    case 'size': {
      const grown = length(minus(to, lens.centre)) - length(minus(from, lens.centre))
      return { lens: withRadius(lens, lens.einsteinRadiusArcsec + grown), source }
    }
    case 'shape':
    case 'shear': {
      const handle = minus(handlesOf(model)[grip], lens.centre)
      // A direction without a sense has two ends: the one on the pointer's side is held.
      const side = minus(from, lens.centre)
      const sense = side.east * handle.east + side.north * handle.north < 0 ? -1 : 1
      const end = plus({ east: sense * handle.east, north: sense * handle.north }, by)
      return { lens: grip === 'shape' ? withLongEnd(lens, end) : withShearEnd(lens, end), source }
    }
  }
}

/** The long axis ends at b / sqrt(f). */
function withLongEnd(lens: DrawnLens, end: SkyVector): DrawnLens {
  const axisRatio = between(LEAST_AXIS_RATIO, (lens.einsteinRadiusArcsec / length(end)) ** 2, 1)
  return { ...lens, axisRatio, positionAngleDeg: directionDeg(end) }
}

function withShearEnd(lens: DrawnLens, end: SkyVector): DrawnLens {
  const strength = between(0, (length(end) / lens.einsteinRadiusArcsec - SHEAR_FOOT) / SHEAR_REACH, MOST_SHEAR)
  return { ...lens, shear: { strength, positionAngleDeg: directionDeg(end) } }
}

export interface Arrow {
  right: number
  up: number
}

/**
 * What an arrow key does. Lens and source move over the picture; up makes larger or rounder less, and right turns from north through
 * east.
 * @param stepArcsec of a place or a radius. @param times 10 with Shift
 */
export function nudgeGrip(
  model: LensAndSource,
  grip: Grip,
  arrow: Arrow,
  { move, stepArcsec, times }: { move: (arrow: Arrow) => SkyVector; stepArcsec: number; times: number },
): LensAndSource {
  const { lens, source } = model
  const more = (arrow.up + (grip === 'size' ? arrow.right : 0)) * times
  const turn = arrow.right * times
  switch (grip) {
    case 'lens':
    case 'source':
      return dragGrip(model, grip, { east: 0, north: 0 }, move(arrow))
    case 'size':
      return { lens: withRadius(lens, lens.einsteinRadiusArcsec + more * stepArcsec), source }
    case 'shape': {
      const axisRatio = between(LEAST_AXIS_RATIO, lens.axisRatio - 0.01 * more, 1)
      return { lens: { ...lens, axisRatio, positionAngleDeg: turned(lens.positionAngleDeg, turn) }, source }
    }
    case 'shear': {
      const { strength, positionAngleDeg } = lens.shear
      const shear = {
        strength: between(0, strength + 0.005 * more, MOST_SHEAR),
        positionAngleDeg: turned(positionAngleDeg, turn),
      }
      return { lens: { ...lens, shear }, source }
    }
  }
}

const turned = (angleDeg: number, by: number): number => (((angleDeg + by) % 180) + 180) % 180
