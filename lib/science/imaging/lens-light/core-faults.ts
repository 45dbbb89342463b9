/** What keeps a galaxy's core from being modelled, and what a viewer must know of the result. */
import { around, clippedOf, isClippedNear } from '../clipped-pixels'
import type { NormalisedPlane } from '../normalise-planes'

/** Clipped pixels this near, columns and rows, are the core's. */
export const CORE_REACH = 8

/** Clipped pixels of the plane and one round each where its core is clipped; else none. */
export function saturatedPixels(plane: NormalisedPlane, x: number, y: number): number[] {
  if (!isClippedNear(plane, Math.round(x), Math.round(y), CORE_REACH)) return []
  const { width, height } = plane
  return [...new Set(clippedOf(plane).flatMap((pixel) => around(pixel, 1, width, height)))]
}
