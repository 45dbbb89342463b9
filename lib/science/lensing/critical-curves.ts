/**
 * Critical curve, caustic and cut of a singular isothermal ellipsoid with shear, as closed polylines, and the outline of the
 * images of a round source.
 *
 * In direction t from the lens 2 kappa = K(t) / r, so det A = 0 (see sie-shear.ts) gives the critical curve in closed form:
 *   r(t) = K(t) (1 - g cos 2(t - p)) / (1 - g^2).
 * The caustic is where its points come from. The cut, -a(t), takes the place of the radial caustic of lenses with a core: a
 * source that crosses it inwards gains one image (Kormann et al. 1994, section 3; section number from memory).
 */
import { sieConvergence } from './sie'
import { sourceOf, type LensModel } from './sie-shear'
import type { SkyVector } from './sis'

/** Closed: the last point is joined to the first, which is not repeated. */
export interface LensCurves {
  critical: SkyVector[]
  caustic: SkyVector[]
  cut: SkyVector[]
}

/** @param steps points on each curve, evenly spaced in position angle from north; point k of the caustic belongs to k of the critical. */
export function lensCurves(model: LensModel, steps = 180): LensCurves {
  const { centre } = model
  const curves: LensCurves = { critical: [], caustic: [], cut: [] }
  for (let k = 0; k < steps; k++) {
    const angle = (2 * Math.PI * k) / steps
    const [sin, cos] = [Math.sin(angle), Math.cos(angle)]
    const alongSight = model.along * (cos * cos - sin * sin) + 2 * model.across * sin * cos
    const unit = { east: centre.east + sin, north: centre.north + cos }
    const radius = (2 * sieConvergence(model.lens, unit) * (1 - alongSight)) / (1 - model.strength ** 2)
    const at = { east: centre.east + radius * sin, north: centre.north + radius * cos }
    const alpha = model.deflect(sin, cos)
    curves.critical.push(at)
    curves.caustic.push(sourceOf(model, at))
    curves.cut.push({ east: centre.east - alpha.east, north: centre.north - alpha.north })
  }
  return curves
}

/** Outline of one lensed image; a ring has an outer and an inner one. */
export interface ImageOutline {
  outer: SkyVector[]
  /** only of a ring that leaves its middle free */
  inner?: SkyVector[]
}

/**
 * Outlines of the images of a round source: arcs, counter-images, or a ring.
 * In direction u the source plane is crossed along M u r - a(u), a straight line in r, so the disc is met where
 *   |M u|^2 r^2 - 2 r M u . (a + y) + |a + y|^2 = s^2
 * has real roots, with y the source's centre and s its radius: the outline is exact at every direction.
 * @param sourceRadiusArcsec above 0. @param steps directions; an arc that is shorter than one of them is not found.
 */
export function discOutlines(
  model: LensModel,
  source: SkyVector,
  sourceRadiusArcsec: number,
  steps = 720,
): ImageOutline[] {
  const reach = Array.from({ length: steps }, (_, k) =>
    crossing(model, source, sourceRadiusArcsec, (2 * Math.PI * k) / steps),
  )
  const place = (k: number, radius: number): SkyVector => {
    const angle = (2 * Math.PI * k) / steps
    return { east: model.centre.east + radius * Math.sin(angle), north: model.centre.north + radius * Math.cos(angle) }
  }
  const gap = reach.findIndex((range) => range === null)
  if (gap < 0) {
    const outer = reach.map((range, k) => place(k, range?.[1] ?? 0))
    const inner = reach.map((range, k) => place(k, range?.[0] ?? 0))
    return [reach.every((range) => range !== null && range[0] > 0) ? { outer, inner } : { outer }]
  }
  const outlines: ImageOutline[] = []
  let far: SkyVector[] = []
  let near: SkyVector[] = []
  for (let k = gap; k <= gap + steps; k++) {
    const range = reach[k % steps]
    if (range !== null) {
      far.push(place(k, range[1]))
      near.push(place(k, range[0]))
    } else if (far.length > 0) {
      outlines.push({ outer: [...far, ...near.reverse()] })
      ;[far, near] = [[], []]
    }
  }
  return outlines
}

/** Where the line of sight in a direction enters and leaves the disc, from 0; null where it misses. */
function crossing(model: LensModel, source: SkyVector, size: number, angle: number): [number, number] | null {
  const [sin, cos] = [Math.sin(angle), Math.cos(angle)]
  const alpha = model.deflect(sin, cos)
  const east = source.east - model.centre.east + alpha.east
  const north = source.north - model.centre.north + alpha.north
  const stepEast = sin + model.along * sin - model.across * cos
  const stepNorth = cos - model.across * sin - model.along * cos
  const squared = stepEast * stepEast + stepNorth * stepNorth
  const middle = (stepEast * east + stepNorth * north) / squared
  const miss = (stepEast * north - stepNorth * east) / Math.sqrt(squared)
  const halfSquared = (size * size - miss * miss) / squared
  if (halfSquared < 0) return null
  const half = Math.sqrt(halfSquared)
  return middle + half <= 0 ? null : [Math.max(0, middle - half), middle + half]
}
