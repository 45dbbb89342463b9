/** How the bands of a candidate are turned on the sky before they are drawn, and how they then lie. */
import { northUp } from './north-up'
import type { BandPlane, PlaneOrientation } from './normalise-planes'

/** Directions that differ by less are the same: half a pixel at the edge of a 100-pixel cutout. */
const SAME_DIRECTION_DEG = 0.5

const NORTH_UP: PlaneOrientation = { northAngleDeg: 0, eastLeft: true }

export interface OrientedPlanes {
  planes: BandPlane[]
  /** Why they were turned although nobody asked; null otherwise. */
  note: string | null
}

/**
 * Turns planes north up and east left when asked to, or when bands lie differently on the sky: laid on each other as they are,
 * they would make a wrong picture. A band of unknown direction is taken to lie as the first known one.
 */
export function orientPlanes(planes: BandPlane[], asked: boolean): OrientedPlanes {
  const known = planes.map(({ orientation }) => orientation ?? null)
  const first = known.find((orientation) => orientation !== null)
  if (!first || !isTurned(known, asked)) return { planes, note: null }
  const turned = planes.map((plane) => {
    const orientation = plane.orientation ?? first
    return liesAs(orientation, NORTH_UP) ? plane : { ...northUp(plane, orientation), orientation: NORTH_UP }
  })
  return { planes: turned, note: asked ? null : 'Turned north up: the bands lie differently on the sky.' }
}

/**
 * How pictures made of planes of these directions lie.
 * @param known of each band, null where its header does not say.
 * @returns null when no band's is known.
 */
export function shownOrientation(known: readonly (PlaneOrientation | null)[], asked: boolean): PlaneOrientation | null {
  const first = known.find((orientation) => orientation !== null)
  if (!first) return null
  return isTurned(known, asked) ? NORTH_UP : first
}

function isTurned(known: readonly (PlaneOrientation | null)[], asked: boolean): boolean {
  const told = known.filter((orientation) => orientation !== null)
  return told.length > 0 && (asked || told.some((orientation) => !liesAs(orientation, told[0])))
}

function liesAs(a: PlaneOrientation, b: PlaneOrientation): boolean {
  const apart = Math.abs(((((a.northAngleDeg - b.northAngleDeg) % 360) + 540) % 360) - 180)
  return a.eastLeft === b.eastLeft && apart <= SAME_DIRECTION_DEG
}
