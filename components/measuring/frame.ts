/** Where a place on the sky lies in the square box of a picture, and back: through orientation, scale, field of view and zoom. */
import { offsetOfStep, stepOfOffset } from '@/lib/science/imaging/sky-on-stamp'
import type { StampGeometry } from '@/lib/science/imaging/stamp-geometry'
import type { SkyVector } from '@/lib/science/lensing/sis'

/** In percent of the box's side, from its upper left corner. */
export interface Spot {
  x: number
  y: number
}

export interface Frame {
  /** Pixels of the picture's longer side, which fills the box. */
  side: number
  geometry: StampGeometry
  /** How many times closer than whole the field of view brings it. */
  closer: number
  zoom: { scale: number; x: number; y: number }
  /** The picture takes half of the box's side, so that there is room around it. */
  wide: boolean
}

const WIDE = 0.5

export function spotOf(offset: SkyVector, { side, geometry, closer, zoom, wide }: Frame): Spot {
  const { right, down } = stepOfOffset(offset, geometry)
  const shrink = wide ? WIDE : 1
  const place = (pixels: number, middle: number) =>
    100 * (0.5 + shrink * zoom.scale * ((pixels / side) * closer - middle))
  return { x: place(right, zoom.x), y: place(down, zoom.y) }
}

/** @param spot may lie outside the box. */
export function offsetOf(spot: Spot, { side, geometry, closer, zoom, wide }: Frame): SkyVector {
  const shrink = wide ? WIDE : 1
  const pixels = (share: number, middle: number) =>
    (((share / 100 - 0.5) / shrink / zoom.scale + middle) / closer) * side
  return offsetOfStep({ right: pixels(spot.x, zoom.x), down: pixels(spot.y, zoom.y) }, geometry)
}

/** Arcsec that the box's side spans. */
export function fieldArcsec({ side, geometry, closer, zoom, wide }: Frame): number {
  return (side * (geometry.pixelScaleArcsec ?? Number.NaN)) / closer / zoom.scale / (wide ? WIDE : 1)
}

/** The scale of a wide frame as a transform of the picture, so that both agree. */
export const wideTransform = (wide: boolean): string | undefined => (wide ? `scale(${WIDE})` : undefined)

const rounded = (value: number) => Math.round(value * 100) / 100

/** `d` of a line through places on the sky. */
export function lineOf(offsets: readonly SkyVector[], frame: Frame, closed = true): string {
  if (offsets.length === 0) return ''
  const corners = offsets.map((offset) => {
    const { x, y } = spotOf(offset, frame)
    return `${rounded(x)} ${rounded(y)}`
  })
  return `M${corners.join('L')}${closed ? 'Z' : ''}`
}
