/**
 * The direct least-squares ellipse: the conic A x^2 + B x y + C y^2 + D x + E y + F = 0 with 4 A C - B^2 = 1 whose sum of squares
 * at the points is smallest. R. Halir & J. Flusser, "Numerically stable direct least squares fitting of ellipses", WSCG 1998,
 * figure 3: the quadratic part is an eigenvector of a 3 x 3 matrix. Points are centred and scaled first.
 */
import { solveSymmetric } from './least-squares'
import type { SkyVector } from './sis'

export interface PlainEllipse {
  centre: SkyVector
  semiMajor: number
  semiMinor: number
  /** of the major axis, degrees from north through east */
  positionAngleDeg: number
}

type Matrix = number[][]

/** Null where the points (fewer than 5 different ones, or on a line) leave it open. */
export function directEllipse(points: readonly SkyVector[]): PlainEllipse | null {
  const n = points.length
  const east = points.reduce((sum, point) => sum + point.east, 0) / n
  const north = points.reduce((sum, point) => sum + point.north, 0) / n
  const size = Math.sqrt(
    points.reduce((sum, point) => sum + (point.east - east) ** 2 + (point.north - north) ** 2, 0) / n,
  )
  if (!(size > 0)) return null
  const rows = points.map((point) => {
    const [x, y] = [(point.east - east) / size, (point.north - north) / size]
    return { quadratic: [x * x, x * y, y * y], linear: [x, y, 1] }
  })
  const s1 = sumOfProducts(rows.map(({ quadratic }) => [quadratic, quadratic]))
  const s2 = sumOfProducts(rows.map(({ quadratic, linear }) => [quadratic, linear]))
  const s3 = sumOfProducts(rows.map(({ linear }) => [linear, linear]))
  // linear part = T quadratic part, T = -S3^-1 S2^T
  const columns = s2.map((row) => solveSymmetric(s3, row))
  if (columns.some((column) => column === null)) return null
  const t = [0, 1, 2].map((i) => columns.map((column) => -(column?.[i] ?? 0)))
  const reduced = s1.map((row, i) => row.map((value, j) => value + s2[i].reduce((sum, s, k) => sum + s * t[k][j], 0)))
  // The inverse of the constraint [[0, 0, 2], [0, -1, 0], [2, 0, 0]] on the left.
  const matrix = [reduced[2].map((v) => v / 2), reduced[1].map((v) => -v), reduced[0].map((v) => v / 2)]
  for (const root of realEigenvalues(matrix)) {
    const vector = nullVector(matrix.map((row, i) => row.map((value, j) => (i === j ? value - root : value))))
    if (vector === null || !(4 * vector[0] * vector[2] - vector[1] ** 2 > 0)) continue
    const linear = t.map((row) => row.reduce((sum, value, k) => sum + value * vector[k], 0))
    const ellipse = geometryOf([...vector, ...linear])
    if (ellipse === null) continue
    return {
      centre: { east: east + size * ellipse.centre.east, north: north + size * ellipse.centre.north },
      semiMajor: size * ellipse.semiMajor,
      semiMinor: size * ellipse.semiMinor,
      positionAngleDeg: ellipse.positionAngleDeg,
    }
  }
  return null
}

function sumOfProducts(pairs: readonly (readonly [number[], number[]])[]): Matrix {
  return [0, 1, 2].map((i) => [0, 1, 2].map((j) => pairs.reduce((sum, [a, b]) => sum + a[i] * b[j], 0)))
}

/** Real roots of the characteristic cubic by the trigonometric form, or Cardano's where there is only one. */
function realEigenvalues(m: Matrix): number[] {
  const trace = m[0][0] + m[1][1] + m[2][2]
  const minors =
    m[0][0] * m[1][1] -
    m[0][1] * m[1][0] +
    m[0][0] * m[2][2] -
    m[0][2] * m[2][0] +
    m[1][1] * m[2][2] -
    m[1][2] * m[2][1]
  const determinant =
    m[0][0] * (m[1][1] * m[2][2] - m[1][2] * m[2][1]) -
    m[0][1] * (m[1][0] * m[2][2] - m[1][2] * m[2][0]) +
    m[0][2] * (m[1][0] * m[2][1] - m[1][1] * m[2][0])
  const shift = trace / 3
  const p = minors - (trace * trace) / 3
  const q = (-2 * trace ** 3) / 27 + (trace * minors) / 3 - determinant
  const discriminant = (q / 2) ** 2 + (p / 3) ** 3
  if (discriminant > 0) {
    const root = Math.sqrt(discriminant)
    return [Math.cbrt(-q / 2 + root) + Math.cbrt(-q / 2 - root) + shift]
  }
  const reach = 2 * Math.sqrt(-p / 3)
  const angle = Math.acos(Math.max(-1, Math.min(1, (3 * q) / (p * reach || 1)))) / 3
  return [0, 1, 2].map((k) => reach * Math.cos(angle - (2 * Math.PI * k) / 3) + shift)
}

/** Unit vector that a singular matrix takes to 0: the longest cross product of two rows. */
function nullVector(m: Matrix): number[] | null {
  const products = [
    [0, 1],
    [0, 2],
    [1, 2],
  ].map(([i, j]) => [
    m[i][1] * m[j][2] - m[i][2] * m[j][1],
    m[i][2] * m[j][0] - m[i][0] * m[j][2],
    m[i][0] * m[j][1] - m[i][1] * m[j][0],
  ])
  const best = products.sort((a, b) => Math.hypot(...b) - Math.hypot(...a))[0]
  const length = Math.hypot(...best)
  return length > 0 ? best.map((value) => value / length) : null
}

/** Centre, axes and angle of a conic with 4 A C > B^2; null for an imaginary one. */
function geometryOf([a, b, c, d, e, f]: readonly number[]): PlainEllipse | null {
  const determinant = 4 * a * c - b * b
  const centre = { east: (b * e - 2 * c * d) / determinant, north: (b * d - 2 * a * e) / determinant }
  const atCentre = f + (d * centre.east + e * centre.north) / 2
  const difference = Math.hypot(a - c, b)
  const sign = a + c > 0 ? 1 : -1
  const [flat, steep] = [(sign * (a + c) - difference) / 2, (sign * (a + c) + difference) / 2]
  const level = -sign * atCentre
  if (!(level > 0 && flat > 0)) return null
  // The major axis lies along the smaller eigenvalue: half the angle of (a - c, b), turned by a right angle.
  const fromEast = Math.atan2(sign * b, sign * (a - c)) / 2 + Math.PI / 2
  const positionAngleDeg = (((90 - (fromEast * 180) / Math.PI) % 180) + 180) % 180
  return { centre, semiMajor: Math.sqrt(level / flat), semiMinor: Math.sqrt(level / steep), positionAngleDeg }
}
