/** What keeps a galaxy's core from being modelled, and what a viewer must know of the result. */
import type { NormalisedPlane } from '../normalise-planes'

const SEARCH_RADIUS = 8
/** Detectors cut at one level; galaxies and stars come to a point. This many pixels this near the top make a plateau. */
const PLATEAU_PIXELS = 7
const PLATEAU_LEVEL = 0.97
const PLATEAU_SIGMA = 100
/** As many pixels that are equal to the last bit are one at any brightness at which rounding cannot make them so. */
const EQUAL_SIGMA = 30

/** Pixels of a saturated core and one round it; empty when the core comes to a point. */
export function saturatedPixels({ values, width, height }: NormalisedPlane, x: number, y: number): number[] {
  const near: number[] = []
  let most = 0
  const left = Math.max(0, Math.round(x) - SEARCH_RADIUS)
  const right = Math.min(width - 1, Math.round(x) + SEARCH_RADIUS)
  const bottom = Math.max(0, Math.round(y) - SEARCH_RADIUS)
  const top = Math.min(height - 1, Math.round(y) + SEARCH_RADIUS)
  for (let row = bottom; row <= top; row++) {
    for (let column = left; column <= right; column++) most = Math.max(most, values[row * width + column] || 0)
  }
  if (most < EQUAL_SIGMA) return []
  const level = most < PLATEAU_SIGMA ? most : PLATEAU_LEVEL * most
  for (let row = bottom; row <= top; row++) {
    for (let column = left; column <= right; column++) {
      if (values[row * width + column] >= level) near.push(row * width + column)
    }
  }
  if (near.length < PLATEAU_PIXELS) return []
  const grown = new Set<number>()
  for (const pixel of near) {
    const column = pixel % width
    const row = Math.floor(pixel / width)
    for (let dy = -1; dy <= 1; dy++) {
      for (let dx = -1; dx <= 1; dx++) {
        if (column + dx < 0 || column + dx >= width || row + dy < 0 || row + dy >= height) continue
        grown.add((row + dy) * width + column + dx)
      }
    }
  }
  return [...grown]
}
