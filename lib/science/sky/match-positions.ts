/** All pairs of two lists of positions within a radius, by great-circle distance. */
import {
  indexPositions,
  lowerBound,
  TURN_UNITS,
  vectorSeparationArcsec,
  zoneAt,
  type PositionIndex,
  type Positions,
} from './position-index'
import { coneHalfWidthDeg } from './separation'

export interface PositionPairs {
  /** places in the first list, ascending */
  first: Uint32Array
  /** places in the second list, ascending among equal firsts */
  second: Uint32Array
  separationArcsec: Float64Array
}

/**
 * Every pair of one position of `a` and one of `b` no further apart than the radius, right at RA 0/360 and at the poles.
 * Takes time in proportion to the positions and pairs. Positions that are NaN, infinite or beyond 90 degrees of declination
 * pair with nothing. Separations are good to about 1e-10 arcsec.
 * @param radiusArcsec 0 to 648000, the end included.
 * @throws RangeError for a radius outside that.
 */
export function matchPositions(a: Positions, b: Positions, radiusArcsec: number): PositionPairs {
  const height = leastHeight(radiusArcsec)
  const [first, second] = [indexPositions(a, height), indexPositions(b, height)]
  return joinIndexes({ a: first, b: second, radiusArcsec, once: false, found: new PairList() }, a.raDeg.length)
}

/** Every pair within one list, once: `first` is the smaller place. Otherwise as `matchPositions`. */
export function matchWithin(positions: Positions, radiusArcsec: number): PositionPairs {
  const index = indexPositions(positions, leastHeight(radiusArcsec))
  return joinIndexes({ a: index, b: index, radiusArcsec, once: true, found: new PairList() }, positions.raDeg.length)
}

function leastHeight(radiusArcsec: number): number {
  if (!(radiusArcsec >= 0 && radiusArcsec <= 648000)) {
    throw new RangeError(`A matching radius lies between 0 and 648000 arcsec; ${radiusArcsec} does not.`)
  }
  return radiusArcsec / 3600
}

/** Wider than the rounding of declinations and of zones, far below any radius in use. */
const SLACK_DEG = 1e-9

interface Join {
  a: PositionIndex
  b: PositionIndex
  radiusArcsec: number
  once: boolean
  found: PairList
}

function joinIndexes(join: Join, firstCount: number): PositionPairs {
  const { a, b, radiusArcsec, found } = join
  const reachDeg = radiusArcsec / 3600 + SLACK_DEG
  for (let zone = 0; zone < a.zoneCount; zone++) {
    if (a.zoneStart[zone] === a.zoneStart[zone + 1]) continue
    const south = zone * a.zoneHeightDeg - 90
    const north = south + a.zoneHeightDeg
    const steepest = Math.min(90, Math.max(Math.abs(south), Math.abs(north)))
    const halfWidth = Math.ceil((coneHalfWidthDeg(steepest, radiusArcsec) / 360) * TURN_UNITS * (1 + 1e-9)) + 2
    const lowest = zoneAt(south - reachDeg, b.zoneHeightDeg, b.zoneCount)
    const highest = zoneAt(north + reachDeg, b.zoneHeightDeg, b.zoneCount)
    for (let other = lowest; other <= highest; other++) {
      if (b.zoneStart[other] < b.zoneStart[other + 1]) joinZones(join, zone, other, halfWidth)
    }
  }
  return found.sorted(firstCount)
}

/** Both zones are sorted by right ascension, so that the window of `b` only ever moves on. */
function joinZones(join: Join, zone: number, other: number, halfWidth: number): void {
  const { a, b, radiusArcsec } = join
  const from = b.zoneStart[other]
  const to = b.zoneStart[other + 1]
  const reachDeg = radiusArcsec / 3600 + SLACK_DEG
  const south = other * b.zoneHeightDeg - 90 - reachDeg
  const north = south + b.zoneHeightDeg + 2 * reachDeg
  const everywhere = 2 * halfWidth + 1 >= TURN_UNITS
  const aTurn = a.turn
  const bTurn = b.turn
  let start = from
  for (let i = a.zoneStart[zone], last = a.zoneStart[zone + 1]; i < last; i++) {
    const dec = a.decDeg[i]
    if (dec < south || dec > north) continue
    if (everywhere) {
      comparePosition(join, i, from, to)
      continue
    }
    const west = aTurn[i] - halfWidth
    const east = aTurn[i] + halfWidth
    while (start < to && bTurn[start] < west) start++
    let end = start
    while (end < to && bTurn[end] <= east) end++
    if (end > start) comparePosition(join, i, start, end)
    if (west < 0) comparePosition(join, i, Math.max(end, lowerBound(bTurn, from, to, west + TURN_UNITS)), to)
    if (east >= TURN_UNITS) {
      comparePosition(join, i, from, Math.min(start, lowerBound(bTurn, from, to, east - TURN_UNITS + 1)))
    }
  }
}

function comparePosition({ a, b, radiusArcsec, once, found }: Join, i: number, start: number, end: number): void {
  const reachDeg = radiusArcsec / 3600 + SLACK_DEG
  const dec = a.decDeg[i]
  const u = a.vectors
  const v = b.vectors
  for (let j = start; j < end; j++) {
    if (Math.abs(b.decDeg[j] - dec) > reachDeg) continue
    if (once && a.origin[i] >= b.origin[j]) continue
    const separation = vectorSeparationArcsec(u, 3 * i, v, 3 * j)
    if (separation <= radiusArcsec) found.add(a.origin[i], b.origin[j], separation)
  }
}

/** Grows as pairs are found, then sorts them by counting. */
class PairList {
  private count = 0
  private first = new Uint32Array(1024)
  private second = new Uint32Array(1024)
  private separation = new Float64Array(1024)

  add(first: number, second: number, separation: number): void {
    if (this.count === this.first.length) this.grow()
    this.first[this.count] = first
    this.second[this.count] = second
    this.separation[this.count++] = separation
  }

  private grow(): void {
    const room = 2 * this.count
    const { first, second, separation } = this
    this.first = new Uint32Array(room)
    this.second = new Uint32Array(room)
    this.separation = new Float64Array(room)
    this.first.set(first)
    this.second.set(second)
    this.separation.set(separation)
  }

  sorted(firstCount: number): PositionPairs {
    const { count } = this
    const starts = new Uint32Array(firstCount + 1)
    for (let k = 0; k < count; k++) starts[this.first[k] + 1]++
    for (let k = 0; k < firstCount; k++) starts[k + 1] += starts[k]
    const next = starts.slice()
    const first = new Uint32Array(count)
    const second = new Uint32Array(count)
    const separationArcsec = new Float64Array(count)
    for (let k = 0; k < count; k++) {
      // Insertion among the pairs of the same first, of which there are few.
      const begin = starts[this.first[k]]
      let to = next[this.first[k]]++
      for (; to > begin && second[to - 1] > this.second[k]; to--) {
        second[to] = second[to - 1]
        separationArcsec[to] = separationArcsec[to - 1]
      }
      second[to] = this.second[k]
      separationArcsec[to] = this.separation[k]
      first[next[this.first[k]] - 1] = this.first[k]
    }
    return { first, second, separationArcsec }
  }
}
