/** A close field of view out of the whole cutout. */
import type { BandPlane } from './normalise-planes'

export interface CroppedPlane {
  plane: BandPlane
  /** Column and row (0 = bottom) of the whole cutout at which the crop begins. */
  left: number
  bottom: number
}

/**
 * The middle of a plane, `fieldArcsec` on a side to the nearest pixel that leaves the middle in the middle. A side of the
 * cutout that is shorter stays whole.
 * @param pixelScaleArcsec null when it is not known: then nothing can be cut to size.
 * @returns null when the scale or the field is not above 0.
 */
export function cropField(plane: BandPlane, pixelScaleArcsec: number | null, fieldArcsec: number): CroppedPlane | null {
  if (pixelScaleArcsec === null || !(pixelScaleArcsec > 0) || !(fieldArcsec > 0)) return null
  const wanted = fieldArcsec / pixelScaleArcsec
  const width = croppedSide(plane.width, wanted)
  const height = croppedSide(plane.height, wanted)
  const left = (plane.width - width) / 2
  const bottom = (plane.height - height) / 2
  const data = new Float32Array(width * height)
  for (let row = 0; row < height; row++) {
    const start = (bottom + row) * plane.width + left
    data.set(plane.data.subarray(start, start + width), row * width)
  }
  return { plane: { ...plane, width, height, data, sky: undefined }, left, bottom }
}

/** The whole number nearest to `wanted`, at least 1, that is even or odd as `side` is, and not above it. */
function croppedSide(side: number, wanted: number): number {
  const parity = side % 2
  const nearest = 2 * Math.round((wanted - parity) / 2) + parity
  return Math.min(side, Math.max(parity === 1 ? 1 : 2, nearest))
}
