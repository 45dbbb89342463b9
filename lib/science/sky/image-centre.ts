import type { SkyPosition } from './separation'
import { pixelToSky, type Wcs } from './wcs'

/**
 * Where the middle of an image lies on the sky, ICRS degrees with right ascension in [0, 360). Pixels count from 0, so the
 * middle of n pixels is at (n - 1) / 2 (FITS 4.0, section 8.1, counts from 1). Null where the projection has no value there.
 * @param width @param height in pixels.
 */
export function imageCentre(wcs: Wcs, width: number, height: number): SkyPosition | null {
  const { raDeg, decDeg } = pixelToSky(wcs, (width - 1) / 2, (height - 1) / 2)
  if (!Number.isFinite(raDeg) || !Number.isFinite(decDeg)) return null
  return { raDeg: ((raDeg % 360) + 360) % 360, decDeg }
}
