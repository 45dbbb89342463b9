/** Distance of a point from an ellipse. */
import type { PlainEllipse } from './direct-ellipse'
import type { SkyVector } from './sis'

/**
 * Distance from the nearest point of the ellipse, negative inside.
 * In the quadrant of the point the foot is (a^2 u / (t + a^2), b^2 v / (t + b^2)) with t the root of a falling convex function,
 * found between bounds: D. Eberly, "Distance from a Point to an Ellipse" (Geometric Tools, 2013).
 */
export function signedDistance(
  { centre, semiMajor: a, semiMinor: b, positionAngleDeg }: PlainEllipse,
  at: SkyVector,
): number {
  const angle = (positionAngleDeg * Math.PI) / 180
  const [east, north] = [at.east - centre.east, at.north - centre.north]
  const along = Math.abs(east * Math.sin(angle) + north * Math.cos(angle))
  const across = Math.abs(east * Math.cos(angle) - north * Math.sin(angle))
  const inside = (along / a) ** 2 + (across / b) ** 2 < 1
  const away = distanceInQuadrant(a, b, along, across)
  return inside ? -away : away
}

function distanceInQuadrant(a: number, b: number, u: number, v: number): number {
  if (v === 0) {
    const reach = (a * a - b * b) / a
    if (u >= reach || a === b) return Math.abs(u - a)
    const cosine = (a * u) / (a * a - b * b)
    return Math.hypot(a * cosine - u, b * Math.sqrt(1 - cosine * cosine))
  }
  if (u === 0) return Math.abs(v - b)
  const f = (t: number) => ((a * u) / (t + a * a)) ** 2 + ((b * v) / (t + b * b)) ** 2 - 1
  let low = b * v - b * b
  let high = Math.hypot(a * u, b * v) - b * b
  let t = low
  for (let round = 0; round < 100 && high - low > 1e-15 * (a * a + Math.abs(high)); round++) {
    const value = f(t)
    if (value > 0) low = t
    else high = t
    const slope = -2 * ((a * u) ** 2 / (t + a * a) ** 3 + (b * v) ** 2 / (t + b * b) ** 3)
    const newton = t - value / slope
    const next = newton > low && newton < high ? newton : (low + high) / 2
    // In units of t + b^2: of a point on the major axis but for rounding the search begins at a pole there and doubles its steps.
    if (Math.abs(next - t) <= 1e-15 * (t + b * b)) break
    t = next
  }
  return Math.hypot((a * a * u) / (t + a * a) - u, (b * b * v) / (t + b * b) - v)
}
