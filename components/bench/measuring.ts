/** Ruler and circle on the stage, as plain state. Places are shares of the picture's square box, from its upper left corner. */
import { measureStep, placeOnSky, type StampStep } from '@/lib/science/imaging/measure-stamp'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import { formatDeclination, formatRightAscension } from '@/lib/science/sky/coordinates'

export type Tool = 'ruler' | 'circle'

export interface Place {
  x: number
  y: number
}

export interface Measuring {
  /** Of a ruler its two ends; of a circle its centre and a place on its edge. */
  places: readonly [Place, Place]
  /** Which of them the arrows move. */
  held: 0 | 1
}

export interface Measured {
  /** Pixels of the picture's longer side, which fills the box. */
  side: number
  geometry: StampGeometry
  /** The candidate's position, taken to be the middle of its picture. */
  raDeg: number | null
  decDeg: number | null
}

const MIDDLE: Place = { x: 0.5, y: 0.5 }

/** @param shown how many times closer than whole the picture is seen: the tool begins inside what is in sight. */
export function beginMeasuring(shown: number): Measuring {
  return { places: [MIDDLE, { x: 0.5 + 0.18 / shown, y: 0.5 }], held: 1 }
}

const hold = (value: number) => Math.min(1, Math.max(0, value))
const shifted = ({ x, y }: Place, by: Place): Place => ({ x: hold(x + by.x), y: hold(y + by.y) })

/** Moves what is held. A circle keeps its radius when its centre moves; its edge moves along the radius. */
export function moveHeld(now: Measuring, tool: Tool, by: Place): Measuring {
  const [first, second] = now.places
  if (tool === 'ruler') {
    return now.held === 0
      ? { ...now, places: [shifted(first, by), second] }
      : { ...now, places: [first, shifted(second, by)] }
  }
  const radius = second.x - first.x
  if (now.held === 0) {
    const centre = shifted(first, by)
    return { ...now, places: [centre, { x: centre.x + radius, y: centre.y }] }
  }
  return withRadius(now, radius + by.x - by.y)
}

export function withRadius(now: Measuring, radius: number): Measuring {
  const [centre] = now.places
  return { ...now, places: [centre, { x: centre.x + Math.min(0.7, Math.max(0, radius)), y: centre.y }] }
}

/** Which place a pointer at `at` means: the nearer; of a circle its edge, where that is nearer than its centre. */
export function nearest({ places: [first, second] }: Measuring, tool: Tool, at: Place): 0 | 1 {
  const toFirst = Math.hypot(at.x - first.x, at.y - first.y)
  if (tool === 'circle') return Math.abs(toFirst - (second.x - first.x)) < toFirst ? 1 : 0
  return Math.hypot(at.x - second.x, at.y - second.y) <= toFirst ? 1 : 0
}

const stepOf = (from: Place, to: Place, side: number): StampStep => ({
  right: (to.x - from.x) * side,
  down: (to.y - from.y) * side,
})

/** `1.84″, 37° east of north`: a line has no beginning, so its position angle is below 180°. */
export function readingOf({ places }: Measuring, tool: Tool, { side, geometry, raDeg, decDeg }: Measured): string {
  const step = stepOf(...places, side)
  const { lengthArcsec, positionAngleDeg } = measureStep(step, geometry)
  const length =
    lengthArcsec === null
      ? `${Math.hypot(step.right, step.down).toFixed(1)} px (pixel scale unknown)`
      : `${lengthArcsec.toFixed(2)}″`
  if (tool === 'ruler') {
    if (lengthArcsec === 0) return length
    return `${length}, ${positionAngleDeg === null ? 'direction of north unknown' : `${Math.round(positionAngleDeg) % 180}° east of north`}`
  }
  const centre = stepOf(MIDDLE, places[0], side)
  const place = raDeg === null || decDeg === null ? null : placeOnSky({ raDeg, decDeg }, centre, geometry)
  const where = place ? `${formatRightAscension(place.raDeg)} ${formatDeclination(place.decDeg)}` : 'position unknown'
  return `Radius ${length}, centre ${where}`
}
