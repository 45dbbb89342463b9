/** The close field of view as a factor on the whole picture. */

/**
 * How many times larger a picture is shown so that its longer side covers the close field.
 * @param side longer side of the picture, pixels
 * @param pixelScaleArcsec null when it is not known: then there is only the whole picture.
 * @returns at least 1; 1 also where the whole picture is no larger than the field.
 */
export function closeFactor(side: number, pixelScaleArcsec: number | null, fieldArcsec: number): number {
  if (pixelScaleArcsec === null || !(pixelScaleArcsec > 0) || !(fieldArcsec > 0) || !(side > 0)) return 1
  return Math.max(1, (side * pixelScaleArcsec) / fieldArcsec)
}
