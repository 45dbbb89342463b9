/**
 * Positions on the sphere sorted for neighbour searches: by zones of declination, in each zone by right ascension.
 * Source: J. Gray, M. Nieto-Santisteban & A. Szalay, "The Zones Algorithm for Finding Points-Near-a-Point or
 * Cross-Matching Spatial Datasets", MSR-TR-2006-52, arXiv:cs/0701171.
 *
 * Right ascension is held in 2^32 units to the turn, so that RA 0/360 is the natural overflow of 32 bits and sorting is by
 * counting. The units only choose who is compared; separations come from unit vectors in double precision.
 */

export interface Positions {
  /** degrees, any finite value */
  raDeg: Float64Array
  /** degrees, -90 to 90, as many as right ascensions */
  decDeg: Float64Array
}

export interface PositionIndex {
  /** how many positions take part: those that are finite and on the sphere */
  count: number
  zoneCount: number
  zoneHeightDeg: number
  /** where each zone begins in the sorted arrays; zoneCount + 1 of them */
  zoneStart: Uint32Array
  /** right ascension in units of 360/2^32 degrees, sorted in each zone */
  turn: Uint32Array
  /** where each sorted position stands in the input */
  origin: Uint32Array
  decDeg: Float64Array
  /** x, y, z of the unit vectors, sorted */
  vectors: Float64Array
}

const RADIANS = Math.PI / 180
const ARCSEC_PER_RADIAN = 648000 / Math.PI
export const TURN_UNITS = 2 ** 32
const MOST_ZONES = 2 ** 19

/** Positions a zone holds on average: few enough to scan, many enough that zones cost nothing. */
const ZONE_MEMBERS = 64

/**
 * Sorts positions for searches; O(n). Positions that are NaN, infinite or beyond 90 degrees of declination match nothing.
 * @param leastHeightDeg of a zone: the radius of the searches to come, or 0. Zones are higher where positions are few.
 * @throws RangeError when the two arrays have different lengths.
 */
export function indexPositions({ raDeg, decDeg }: Positions, leastHeightDeg = 0): PositionIndex {
  if (raDeg.length !== decDeg.length) {
    throw new RangeError(`There are ${raDeg.length} right ascensions for ${decDeg.length} declinations.`)
  }
  const { order, turns } = sortByTurn(raDeg, decDeg)
  const count = order.length
  const zoneCount = zoneCountFor(decDeg, order, leastHeightDeg)
  const zoneHeightDeg = 180 / zoneCount
  const zoneStart = new Uint32Array(zoneCount + 1)
  const zones = new Uint32Array(count)
  for (let k = 0; k < count; k++) {
    const zone = zoneAt(decDeg[order[k]], zoneHeightDeg, zoneCount)
    zones[k] = zone
    zoneStart[zone + 1]++
  }
  for (let zone = 0; zone < zoneCount; zone++) zoneStart[zone + 1] += zoneStart[zone]
  const next = zoneStart.slice()
  const turn = new Uint32Array(count)
  const origin = new Uint32Array(count)
  for (let k = 0; k < count; k++) {
    const to = next[zones[k]]++
    turn[to] = turns[k]
    origin[to] = order[k]
  }
  const sortedDec = new Float64Array(count)
  const vectors = new Float64Array(3 * count)
  for (let k = 0; k < count; k++) {
    const ra = raDeg[origin[k]] * RADIANS
    const dec = decDeg[origin[k]] * RADIANS
    const cosDec = Math.cos(dec)
    sortedDec[k] = decDeg[origin[k]]
    vectors[3 * k] = cosDec * Math.cos(ra)
    vectors[3 * k + 1] = cosDec * Math.sin(ra)
    vectors[3 * k + 2] = Math.sin(dec)
  }
  return { count, zoneCount, zoneHeightDeg, zoneStart, turn, origin, decDeg: sortedDec, vectors }
}

function zoneCountFor(decDeg: Float64Array, order: Uint32Array, leastHeightDeg: number): number {
  let south = 90
  let north = -90
  for (let k = 0; k < order.length; k++) {
    const dec = decDeg[order[k]]
    if (dec < south) south = dec
    if (dec > north) north = dec
  }
  const height = Math.max(leastHeightDeg, ((north - south) * ZONE_MEMBERS) / Math.max(1, order.length), 1e-9)
  return Math.min(MOST_ZONES, Math.max(1, Math.floor(180 / height)))
}

export function zoneAt(decDeg: number, zoneHeightDeg: number, zoneCount: number): number {
  return Math.max(0, Math.min(zoneCount - 1, Math.floor((decDeg + 90) / zoneHeightDeg)))
}

/** Right ascension in units of 360/2^32 degrees, 0 to 2^32 - 1. */
export function turnUnits(raDeg: number): number {
  const turns = raDeg / 360
  return ((turns - Math.floor(turns)) * TURN_UNITS) >>> 0
}

/**
 * Separation in arcsec of two unit vectors, which begin at i and j: 2 atan2(|u - v|, |u + v|), right at every distance.
 * Source: W. Kahan, "How Futile are Mindless Assessments of Roundoff in Floating-Point Computation?" (2006).
 */
export function vectorSeparationArcsec(u: Float64Array, i: number, v: Float64Array, j: number): number {
  const dx = u[i] - v[j]
  const dy = u[i + 1] - v[j + 1]
  const dz = u[i + 2] - v[j + 2]
  const sx = u[i] + v[j]
  const sy = u[i + 1] + v[j + 1]
  const sz = u[i + 2] + v[j + 2]
  const apart = Math.sqrt(dx * dx + dy * dy + dz * dz)
  return 2 * Math.atan2(apart, Math.sqrt(sx * sx + sy * sy + sz * sz)) * ARCSEC_PER_RADIAN
}

/** First place from `from` to `to` whose right ascension is not below `units`. */
export function lowerBound(turn: Uint32Array, from: number, to: number, units: number): number {
  let low = from
  let high = to
  while (low < high) {
    const middle = (low + high) >>> 1
    if (turn[middle] < units) low = middle + 1
    else high = middle
  }
  return low
}

const DIGIT_BITS = 11
const DIGITS = 2 ** DIGIT_BITS

/** The usable positions in order of right ascension: counting sort by three digits of 11 bits. */
function sortByTurn(raDeg: Float64Array, decDeg: Float64Array): { order: Uint32Array; turns: Uint32Array } {
  let order = new Uint32Array(raDeg.length)
  let turns = new Uint32Array(raDeg.length)
  let count = 0
  for (let k = 0; k < raDeg.length; k++) {
    if (!(Number.isFinite(raDeg[k]) && Math.abs(decDeg[k]) <= 90)) continue
    order[count] = k
    turns[count++] = turnUnits(raDeg[k])
  }
  order = order.subarray(0, count)
  turns = turns.subarray(0, count)
  let otherOrder = new Uint32Array(count)
  let otherTurns = new Uint32Array(count)
  for (let shift = 0; shift < 32; shift += DIGIT_BITS) {
    const starts = new Uint32Array(DIGITS + 1)
    for (let k = 0; k < count; k++) starts[((turns[k] >>> shift) & (DIGITS - 1)) + 1]++
    for (let digit = 0; digit < DIGITS; digit++) starts[digit + 1] += starts[digit]
    for (let k = 0; k < count; k++) {
      const to = starts[(turns[k] >>> shift) & (DIGITS - 1)]++
      otherOrder[to] = order[k]
      otherTurns[to] = turns[k]
    }
    const spareOrder = order
    const spareTurns = turns
    order = otherOrder
    turns = otherTurns
    otherOrder = spareOrder
    otherTurns = spareTurns
  }
  return { order, turns }
}
