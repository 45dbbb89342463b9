/**
 * The ellipses of a galaxy and the elliptical radius of every pixel. Ellipticity e = (1 - q) / (1 + q) as a vector
 * (e1, e2) = e (cos 2 PA, sin 2 PA), PA from +x towards +y. With the circular radius r and angle t from the centre
 *   m^2 = r^2 (1 + e^2 - 2 (e1 cos 2t + e2 sin 2t)) / (1 - e^2),
 * m the geometric mean of the half-axes. Seeing rounds the middle, and galaxies twist, so e goes with radius from its
 * value in the core to that outside: e(r) = core + (outer - core) r^2 / (r^2 + s^2).
 */

export interface EllipseGeometry {
  /** Centre, pixels, the middle of the bottom left pixel at (0, 0). */
  x: number
  y: number
  core: [number, number]
  outer: [number, number]
  /** s above, pixels. */
  turnRadius: number
}

/** q = 0.14, thinner than any disc seen edge on. */
const MOST_ELLIPTICAL = 0.75

/** m of every pixel, row by row. */
export function ellipticalRadii(geometry: EllipseGeometry, width: number, height: number): Float32Array {
  const radii = new Float32Array(width * height)
  const { x, y, core, outer, turnRadius } = geometry
  const turn = turnRadius * turnRadius
  for (let row = 0, i = 0; row < height; row++) {
    const dy = row - y
    for (let column = 0; column < width; column++, i++) {
      const dx = column - x
      const square = dx * dx + dy * dy
      const share = square / (square + turn)
      const e1 = core[0] + (outer[0] - core[0]) * share
      const e2 = core[1] + (outer[1] - core[1]) * share
      const e = e1 * e1 + e2 * e2
      const shape = (1 + e) * square - 2 * (e1 * (dx * dx - dy * dy) + 2 * e2 * dx * dy)
      radii[i] = Math.sqrt(shape / (1 - e))
    }
  }
  return radii
}

/** Keeps the ellipses closed. */
export function heldEllipticity([e1, e2]: [number, number]): [number, number] {
  const e = Math.hypot(e1, e2)
  return e > MOST_ELLIPTICAL ? [(e1 * MOST_ELLIPTICAL) / e, (e2 * MOST_ELLIPTICAL) / e] : [e1, e2]
}

/** Place of m in what radiusDerivatives writes. */
export const RADIUS = 6

/**
 * How m of one pixel answers to the geometry: dm / d(x, y, core1, core2, outer1, outer2) into `out`, and m itself behind them:
 * a number that is returned is boxed at every pixel.
 */
export function radiusDerivatives(geometry: EllipseGeometry, column: number, row: number, out: Float64Array): void {
  const dx = column - geometry.x
  const dy = row - geometry.y
  const square = dx * dx + dy * dy
  if (square < 1e-6) {
    out.fill(0)
    return
  }
  const share = square / (square + geometry.turnRadius ** 2)
  const e1 = geometry.core[0] + (geometry.outer[0] - geometry.core[0]) * share
  const e2 = geometry.core[1] + (geometry.outer[1] - geometry.core[1]) * share
  const e = e1 * e1 + e2 * e2
  const cos = dx * dx - dy * dy
  const sin = 2 * dx * dy
  const shape = (1 + e) * square - 2 * (e1 * cos + e2 * sin)
  const m = Math.sqrt(shape / (1 - e))
  const perShape = 1 / (2 * m * (1 - e))
  out[0] = -((1 + e - 2 * e1) * dx - 2 * e2 * dy) * 2 * perShape
  out[1] = -((1 + e + 2 * e1) * dy - 2 * e2 * dx) * 2 * perShape
  const first = (2 * e1 * square - 2 * cos) * perShape + (e1 * m) / (1 - e)
  const second = (2 * e2 * square - 2 * sin) * perShape + (e2 * m) / (1 - e)
  out[2] = first * (1 - share)
  out[3] = second * (1 - share)
  out[4] = first * share
  out[5] = second * share
  out[RADIUS] = m
}
