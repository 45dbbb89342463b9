/**
 * All images of a point source behind a singular isothermal ellipsoid with shear.
 * Seen from the lens an image in direction u lies at x = M^-1 (y + a(u)), and x must point along u: one equation in one angle,
 *   g(u) = u x (M^-1 (y + a(u))) = 0  with  u . x > 0,
 * whose roots are all the images. Roots are bracketed on a grid of directions; where |g| has a smallest value between two grid
 * points without a change of sign, the valley is searched for the pair of roots that meet on a caustic.
 */
import { inverseMagnification, withoutShear, type LensModel, type PointImage } from './sie-shear'
import type { SkyVector } from './sis'

const DIRECTIONS = 720
const GOLDEN = (Math.sqrt(5) - 1) / 2

/**
 * One, two, three, four or more images (shear and a thin ellipse can make the caustic reach out of the cut), brightest first.
 * A source exactly behind a round lens without shear has a ring for image and no points: the answer is then empty.
 * Positions hold the lens equation to about 1e-12 of the Einstein radius away from the caustic.
 */
export function pointImages(model: LensModel, source: SkyVector): PointImage[] {
  const east = source.east - model.centre.east
  const north = source.north - model.centre.north
  const placeAt = (angle: number): SkyVector => {
    const alpha = model.deflect(Math.sin(angle), Math.cos(angle))
    return withoutShear(model, east + alpha.east, north + alpha.north)
  }
  const across = (angle: number): number => {
    const place = placeAt(angle)
    return place.east * Math.cos(angle) - place.north * Math.sin(angle)
  }
  const scale = model.lens.einsteinRadiusArcsec + Math.hypot(east, north)
  const images: PointImage[] = []
  for (const angle of rootsOnCircle(across, 1e-13 * scale)) {
    const place = placeAt(angle)
    if (place.east * Math.sin(angle) + place.north * Math.cos(angle) <= 1e-12 * scale) continue
    const at = { east: model.centre.east + place.east, north: model.centre.north + place.north }
    const inverse = inverseMagnification(model, at)
    images.push({ ...at, magnification: 1 / inverse, kind: inverse < 0 ? 'saddle' : 'minimum' })
  }
  return images.sort((a, b) => Math.abs(b.magnification) - Math.abs(a.magnification))
}

/** Angles from 0 to 2 pi where a smooth periodic function is 0; none where it is as small as `nothing` everywhere. */
function rootsOnCircle(f: (angle: number) => number, nothing: number): number[] {
  const step = (2 * Math.PI) / DIRECTIONS
  // Off the axes by an odd part of a step, so that a root on an axis lies between two grid points.
  const angleAt = (k: number) => (k + 0.3819) * step
  const values = new Float64Array(DIRECTIONS + 2)
  let largest = 0
  for (let k = 0; k < values.length; k++) {
    values[k] = f(angleAt(k))
    largest = Math.max(largest, Math.abs(values[k]))
  }
  const roots: number[] = []
  if (largest <= nothing) return roots
  for (let k = 0; k < DIRECTIONS; k++) {
    const [before, middle, after] = [values[k], values[k + 1], values[k + 2]]
    if (before === 0) roots.push(angleAt(k))
    if (before * middle < 0) roots.push(bisect(f, angleAt(k), angleAt(k + 1)))
    const isValley = Math.abs(middle) < Math.abs(before) && Math.abs(middle) <= Math.abs(after)
    if (!isValley || before * middle <= 0 || middle * after <= 0) continue
    const bottom = lowest((angle) => f(angle) * Math.sign(middle), angleAt(k), angleAt(k + 2))
    if (f(bottom) * middle >= 0) continue
    roots.push(bisect(f, angleAt(k), bottom), bisect(f, bottom, angleAt(k + 2)))
  }
  return roots
}

/** Golden-section search (J. Kiefer, Proc. AMS 4, 502 (1953)); stops below 0. */
function lowest(f: (x: number) => number, from: number, to: number): number {
  let [low, high] = [from, to]
  let left = high - GOLDEN * (high - low)
  let right = low + GOLDEN * (high - low)
  let [atLeft, atRight] = [f(left), f(right)]
  for (let round = 0; round < 40; round++) {
    if (atLeft < 0) return left
    if (atRight < 0) return right
    if (atLeft < atRight) {
      high = right
      right = left
      atRight = atLeft
      left = high - GOLDEN * (high - low)
      atLeft = f(left)
    } else {
      low = left
      left = right
      atLeft = atRight
      right = low + GOLDEN * (high - low)
      atRight = f(right)
    }
  }
  return (low + high) / 2
}

/**
 * Root between two ends of different sign by the method of I. Dowell & P. Jarratt (BIT 11, 168 (1971), the 'Illinois' rule),
 * which keeps the bracket and closes in faster than halving.
 */
function bisect(f: (x: number) => number, from: number, to: number): number {
  let [low, high] = [from, to]
  let [atLow, atHigh] = [f(low), f(high)]
  let side = 0
  for (let round = 0; round < 100 && high - low > 1e-15 * Math.abs(high) && atLow !== 0 && atHigh !== 0; round++) {
    const next = (low * atHigh - high * atLow) / (atHigh - atLow)
    const middle = next > low && next < high ? next : (low + high) / 2
    const value = f(middle)
    if (value === 0) return middle
    if (value * atLow > 0) {
      if (Math.abs(middle - low) < 1e-16) return middle
      low = middle
      atLow = value
      if (side === 1) atHigh /= 2
      side = 1
    } else {
      if (Math.abs(high - middle) < 1e-16) return middle
      high = middle
      atHigh = value
      if (side === -1) atLow /= 2
      side = -1
    }
  }
  return atLow === 0 ? low : atHigh === 0 ? high : (low + high) / 2
}
