/** How far clicked places lie from where a lens puts them; all in arcsec on the sky. */
import type { LensAndSource } from './fit-sie-parameters'
import { jacobian, lensModel, sourceOf, type LensModel, type PointImage } from './sie-shear'
import { pointImages } from './sie-shear-images'
import type { SkyVector } from './sis'

/** Magnifications of offsets are held below this, as an offset near the critical curve would have any size on the sky. */
const MOST_STRETCH = 30

/** Offset in the source plane carried to the sky by the magnification matrix: right to first order, and never without an image. */
export function linearResiduals({ lens, source }: LensAndSource, points: readonly SkyVector[]): number[] {
  const model = lensModel(lens)
  return points.flatMap((point) => linearOffset(model, source, point))
}

function linearOffset(model: LensModel, source: SkyVector, point: SkyVector): [number, number] {
  const from = sourceOf(model, point)
  const [east, north] = [from.east - source.east, from.north - source.north]
  const [ee, en, nn] = jacobian(model, point)
  const determinant = ee * nn - en * en
  const held = Math.sign(determinant || 1) * Math.max(Math.abs(determinant), 1 / MOST_STRETCH)
  return [(nn * east - en * north) / held, (ee * north - en * east) / held]
}

/** Offset of each clicked place from the model's image of it; by first order where the model has no image for it. */
export function imageResiduals({ lens, source }: LensAndSource, points: readonly SkyVector[]): number[] {
  const model = lensModel(lens)
  const paired = pairImages(points, pointImages(model, source))
  return points.flatMap((point, k) => {
    const image = paired[k]
    return image ? [point.east - image.east, point.north - image.north] : linearOffset(model, source, point)
  })
}

/**
 * The image that belongs to each point, each image at most once: nearest pairs first. null for points left over.
 */
export function pairImages(points: readonly SkyVector[], images: readonly PointImage[]): (PointImage | null)[] {
  const paired: (PointImage | null)[] = points.map(() => null)
  const candidates = points.flatMap((point, k) =>
    images.map((image) => ({ k, image, distance: Math.hypot(point.east - image.east, point.north - image.north) })),
  )
  candidates.sort((a, b) => a.distance - b.distance)
  const taken = new Set<PointImage>()
  for (const { k, image } of candidates) {
    if (paired[k] !== null || taken.has(image)) continue
    paired[k] = image
    taken.add(image)
  }
  return paired
}

/** Distance of each point from the ridge of the arc, along the line from the lens. */
export function arcResiduals({ lens, source }: LensAndSource, points: readonly SkyVector[]): number[] {
  const model = lensModel(lens)
  return points.map((point) => {
    const [east, north] = [point.east - model.centre.east, point.north - model.centre.north]
    const radius = Math.hypot(east, north)
    return radius - ridgeRadius(model, source, east / radius, north / radius)
  })
}

/** Radius in a direction at which the line of sight passes nearest the source: M u . (a + y) / |M u|^2. */
export function ridgeRadius(model: LensModel, source: SkyVector, sin: number, cos: number): number {
  const alpha = model.deflect(sin, cos)
  const east = source.east - model.centre.east + alpha.east
  const north = source.north - model.centre.north + alpha.north
  const stepEast = sin + model.along * sin - model.across * cos
  const stepNorth = cos - model.across * sin - model.along * cos
  return (stepEast * east + stepNorth * north) / (stepEast * stepEast + stepNorth * stepNorth)
}
