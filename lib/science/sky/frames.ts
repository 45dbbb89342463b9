// Directions as unit vectors, and the turns from FK5 (J2000) and galactic axes to ICRS.

export type SkyFrame = 'ICRS' | 'FK5' | 'GALACTIC'
export type Vector = readonly [number, number, number]
type Matrix = readonly [Vector, Vector, Vector]

const RADIANS = Math.PI / 180
const ARCSEC = RADIANS / 3600

/** Turn of the axes about one of them, right-handed. */
function turn(angle: number, axis: 'x' | 'y' | 'z'): Matrix {
  const [c, s] = [Math.cos(angle), Math.sin(angle)]
  if (axis === 'x') return [[1, 0, 0], [0, c, s], [0, -s, c]] // prettier-ignore
  if (axis === 'y') return [[c, 0, -s], [0, 1, 0], [s, 0, c]] // prettier-ignore
  return [[c, s, 0], [-s, c, 0], [0, 0, 1]] // prettier-ignore
}

function multiply(a: Matrix, b: Matrix): Matrix {
  const row = (r: Vector): Vector =>
    [0, 1, 2].map((j) => r[0] * b[0][j] + r[1] * b[1][j] + r[2] * b[2][j]) as unknown as Vector
  return [row(a[0]), row(a[1]), row(a[2])]
}

/** eta0 = -19.9, xi0 = 9.1 and da0 = -22.9 milliarcsec: G. Kaplan 2005, USNO Circular 179, as astropy 5.2.1 applies them. */
const ICRS_TO_FK5 = multiply(
  multiply(turn(0.0199 * ARCSEC, 'x'), turn(0.0091 * ARCSEC, 'y')),
  turn(-0.0229 * ARCSEC, 'z'),
)

/** North galactic pole and longitude of the north celestial pole in FK5 J2000, as in astropy (from the IAU 1958 definition). */
const FK5_TO_GALACTIC = multiply(
  multiply(turn((180 - 122.9319185680026) * RADIANS, 'z'), turn((90 - 27.12825118085622) * RADIANS, 'y')),
  turn(192.8594812065348 * RADIANS, 'z'),
)

const FROM_ICRS: Readonly<Record<SkyFrame, Matrix>> = {
  ICRS: turn(0, 'z'),
  FK5: ICRS_TO_FK5,
  GALACTIC: multiply(FK5_TO_GALACTIC, ICRS_TO_FK5),
}

export function fromIcrs(frame: SkyFrame, v: Vector): Vector {
  if (frame === 'ICRS') return v
  const m = FROM_ICRS[frame]
  return [dot(m[0], v), dot(m[1], v), dot(m[2], v)]
}

/** The inverse of a turn is its transpose. */
export function toIcrs(frame: SkyFrame, v: Vector): Vector {
  if (frame === 'ICRS') return v
  const m = FROM_ICRS[frame]
  return [0, 1, 2].map((j) => m[0][j] * v[0] + m[1][j] * v[1] + m[2][j] * v[2]) as unknown as Vector
}

export function unitVector(longitudeDeg: number, latitudeDeg: number): Vector {
  const [lon, lat] = [longitudeDeg * RADIANS, latitudeDeg * RADIANS]
  return [Math.cos(lat) * Math.cos(lon), Math.cos(lat) * Math.sin(lon), Math.sin(lat)]
}

/** Longitude 0 <= lon < 360 and latitude in degrees; by atan2, which keeps its digits near the poles. */
export function anglesDeg([x, y, z]: Vector): [number, number] {
  const lon = Math.atan2(y, x) / RADIANS
  return [lon < 0 ? (lon + 360) % 360 : lon, Math.atan2(z, Math.hypot(x, y)) / RADIANS]
}

export function dot(a: Vector, b: Vector): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}
