/** What the WCS says of a picture, as whoever draws over it needs it. Angles are of the picture as shown, top row up. */
export interface StampGeometry {
  /** null: unknown, and no scale bar is drawn. */
  pixelScaleArcsec: number | null
  /** Direction of north, degrees counter-clockwise from up; null: unknown, and no compass is drawn. */
  northAngleDeg: number | null
  /** East is 90 degrees counter-clockwise of north (the sky as seen), or clockwise in a mirrored image. */
  eastLeft: boolean
}

const BAR_LENGTHS_ARCSEC = [0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 30, 60, 120, 300, 600]

/**
 * The longest round length that takes at most a quarter of a picture's side.
 * @param side pixels, > 0
 * @returns length in arcseconds and as a fraction of the side; null where even the shortest is too long.
 */
export function scaleBar(side: number, pixelScaleArcsec: number): { arcsec: number; fraction: number } | null {
  const field = side * pixelScaleArcsec
  const arcsec = BAR_LENGTHS_ARCSEC.filter((length) => length <= field / 4).at(-1)
  return arcsec === undefined ? null : { arcsec, fraction: arcsec / field }
}
