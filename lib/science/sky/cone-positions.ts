/** Positions within a cone, and the nearest position to each of a list, from an index of positions. */
import {
  indexPositions,
  lowerBound,
  TURN_UNITS,
  turnUnits,
  vectorSeparationArcsec,
  zoneAt,
  type PositionIndex,
  type Positions,
} from './position-index'
import { coneHalfWidthDeg, type SkyPosition } from './separation'

export interface ConePositions {
  /** places in the list that was indexed, nearest first; equals in their order there */
  places: Uint32Array
  separationArcsec: Float64Array
}

const SLACK_DEG = 1e-9
const HALF_SKY_ARCSEC = 648000

/**
 * Every indexed position no further from the centre than the radius, nearest first.
 * @param centre degrees; none are found round a centre that is NaN, infinite or beyond 90 degrees of declination.
 * @param radiusArcsec 0 to 648000, the end included. @throws RangeError for a radius outside that.
 */
export function conePositions(index: PositionIndex, centre: SkyPosition, radiusArcsec: number): ConePositions {
  requireRadius(radiusArcsec)
  const found: [place: number, separation: number][] = []
  visitCone(index, centre, radiusArcsec, (place, separation) => found.push([place, separation]))
  found.sort((a, b) => a[1] - b[1] || a[0] - b[0])
  return {
    places: Uint32Array.from(found, ([place]) => place),
    separationArcsec: Float64Array.from(found, ([, separation]) => separation),
  }
}

export interface NearestPositions {
  /** place of the nearest in the second list, -1 where there is none within the greatest separation */
  place: Int32Array
  /** NaN where there is none */
  separationArcsec: Float64Array
}

/**
 * The nearest position of `b` to each of `a`; of equally near ones the first.
 * @param greatestArcsec how far to look; the whole sky when left out. @throws RangeError for one outside 0 to 648000.
 */
export function nearestPositions(
  a: Positions,
  b: Positions | PositionIndex,
  greatestArcsec = HALF_SKY_ARCSEC,
): NearestPositions {
  requireRadius(greatestArcsec)
  const index = 'zoneStart' in b ? b : indexPositions(b)
  const place = new Int32Array(a.raDeg.length).fill(-1)
  const separationArcsec = new Float64Array(a.raDeg.length).fill(Number.NaN)
  if (index.count === 0) return { place, separationArcsec }
  // The radius in which one position is expected on a sky filled evenly (41253 square degrees), doubled until one is found.
  const firstTry = Math.sqrt(41253 / Math.PI / index.count) * 3600
  const centre = { raDeg: 0, decDeg: 0 }
  for (let k = 0; k < place.length; k++) {
    centre.raDeg = a.raDeg[k]
    centre.decDeg = a.decDeg[k]
    if (!isOnSphere(centre)) continue
    for (let radius = Math.min(firstTry, greatestArcsec); ; radius = Math.min(2 * radius, greatestArcsec)) {
      visitCone(index, centre, radius, (candidate, separation) => {
        const isNearer = place[k] < 0 || separation < separationArcsec[k]
        if (!isNearer && !(separation === separationArcsec[k] && candidate < place[k])) return
        place[k] = candidate
        separationArcsec[k] = separation
      })
      if (place[k] >= 0 || radius >= greatestArcsec) break
    }
  }
  return { place, separationArcsec }
}

function requireRadius(radiusArcsec: number): void {
  if (radiusArcsec >= 0 && radiusArcsec <= HALF_SKY_ARCSEC) return
  throw new RangeError(`A radius on the sky lies between 0 and 648000 arcsec; ${radiusArcsec} does not.`)
}

function isOnSphere({ raDeg, decDeg }: SkyPosition): boolean {
  return Number.isFinite(raDeg) && Math.abs(decDeg) <= 90
}

/** Calls `visit` for each indexed position in the cone, in no particular order. */
function visitCone(
  index: PositionIndex,
  centre: SkyPosition,
  radiusArcsec: number,
  visit: (place: number, separationArcsec: number) => void,
): void {
  if (!isOnSphere(centre)) return
  const { zoneCount, zoneHeightDeg, zoneStart, turn, origin, vectors } = index
  const reachDeg = radiusArcsec / 3600 + SLACK_DEG
  const halfWidth = Math.ceil((coneHalfWidthDeg(centre.decDeg, radiusArcsec) / 360) * TURN_UNITS * (1 + 1e-9)) + 2
  const middle = turnUnits(centre.raDeg)
  const [west, east] = [middle - halfWidth, middle + halfWidth]
  const own = unitVectorOf(centre)
  const scan = (from: number, to: number) => {
    for (let k = from; k < to; k++) {
      const separation = vectorSeparationArcsec(vectors, 3 * k, own, 0)
      if (separation <= radiusArcsec) visit(origin[k], separation)
    }
  }
  const last = zoneAt(centre.decDeg + reachDeg, zoneHeightDeg, zoneCount)
  for (let zone = zoneAt(centre.decDeg - reachDeg, zoneHeightDeg, zoneCount); zone <= last; zone++) {
    const [from, to] = [zoneStart[zone], zoneStart[zone + 1]]
    if (from === to) continue
    if (2 * halfWidth + 1 >= TURN_UNITS) {
      scan(from, to)
      continue
    }
    const start = lowerBound(turn, from, to, west)
    const end = lowerBound(turn, start, to, east + 1)
    scan(start, end)
    if (west < 0) scan(Math.max(end, lowerBound(turn, from, to, west + TURN_UNITS)), to)
    if (east >= TURN_UNITS) scan(from, Math.min(start, lowerBound(turn, from, to, east - TURN_UNITS + 1)))
  }
}

function unitVectorOf({ raDeg, decDeg }: SkyPosition): Float64Array {
  const [ra, dec] = [(raDeg * Math.PI) / 180, (decDeg * Math.PI) / 180]
  return Float64Array.of(Math.cos(dec) * Math.cos(ra), Math.cos(dec) * Math.sin(ra), Math.sin(dec))
}
