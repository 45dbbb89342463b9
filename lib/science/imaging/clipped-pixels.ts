/**
 * Pixels whose brightness is not the sky's: cores that the detector or the pipeline cut at one level, and what resampling,
 * interpolation or wrapped counts left in and around them.
 *
 * The top of a round image of width s (a Gaussian) has 2 pi s^2 f pixels within the share f below its peak, so with f = 3 %
 * seven of them need s = 6 pixels, a full width of 14; a cut core has many pixels of one level whatever its width, also where the
 * brightest pixel is an overshoot beside it. Next to a cut core, resampling with a kernel that has negative lobes
 * (Lanczos) leaves holes far below the sky, as do counts that wrapped. Levels and counts are our own choice, made on real cutouts of
 * one survey and on simulated ones: no source.
 */
import type { NormalisedPlane } from './normalise-planes'

/** So many pixels of one level, of the 25 round and with one of them, are a plateau. */
const PLATEAU_PIXELS = 7
/** Half the width of a level, as a share of it, from this brightness in units of the noise on. */
const LEVEL = 0.015
const LEVEL_SIGMA = 100
/** Pixels equal to the last bit are a plateau at any brightness at which rounding cannot make them so. */
const EQUAL_SIGMA = 30
/** Just outside of a plateau the light falls below this share of its level; round the wide top of a smooth galaxy it does not. */
const EDGE_SHARE = 0.8
const EDGE_REACH = 3
/** No pixel of sky is this far below it, units of the noise ... */
const HOLE_SIGMA = 8
/** ... and holes that count are this close to a plateau or to light of LEVEL_SIGMA, pixels. */
const HOLE_REACH = 3
/** What stands on a plateau and is brighter or hardly fainter belongs to it. */
const SHOULDER_SHARE = 0.9
/** This share of all that is of its level. */
const LEVEL_SHARE = 0.25

/** What is known of a plane, or looked for now. */
export const clippedOf = (plane: NormalisedPlane): readonly number[] => plane.clipped ?? clippedPixels(plane)

/** The same plane, knowing its clipped pixels. */
export const withClipped = (plane: NormalisedPlane): NormalisedPlane =>
  plane.state === 'usable' ? { ...plane, clipped: clippedOf(plane) } : plane

/** Whether any of these pixels of a plane is within `reach` columns and rows of a place. */
export function isClippedNear(plane: NormalisedPlane, x: number, y: number, reach: number): boolean {
  const { width } = plane
  return clippedOf(plane).some(
    (pixel) => Math.abs((pixel % width) - x) <= reach && Math.abs(Math.floor(pixel / width) - y) <= reach,
  )
}

/** Indices of the pixels, in order; empty nearly always. Pixels without data are none. */
export function clippedPixels(plane: NormalisedPlane): number[] {
  const { values, width, height } = plane
  const bright: number[] = []
  const holes: number[] = []
  for (let i = 0; i < values.length; i++) {
    const value = values[i]
    if (value > EQUAL_SIGMA) bright.push(i)
    else if (value < -HOLE_SIGMA) holes.push(i)
  }
  if (bright.length === 0) return []
  const clipped = new Set<number>()
  const flat = bright.filter((i) => isFlat(plane, i))
  if (flat.length > 0) growShoulders(plane, flat, clipped)
  for (const hole of holes) {
    const nearLight = around(hole, HOLE_REACH, width, height).some((i) => values[i] > LEVEL_SIGMA)
    if (nearLight) clipped.add(hole)
  }
  return [...clipped].sort((a, b) => a - b)
}

/** Whether a pixel is one of many of its level. In plain loops: every bright pixel of every cutout comes here. */
function isFlat({ values, width, height }: NormalisedPlane, pixel: number): boolean {
  const value = values[pixel]
  const within = value >= LEVEL_SIGMA ? LEVEL * value : 0
  const x = pixel % width
  const y = (pixel - x) / width
  // Most are told by their four neighbours: a pixel of a plateau has one of its level among them.
  const beside = isLevel(values[pixel - 1] - value, within) || isLevel(values[pixel + 1] - value, within)
  if (!beside && !isLevel(values[pixel - width] - value, within) && !isLevel(values[pixel + width] - value, within)) {
    return false
  }
  const left = Math.max(0, x - 2)
  const right = Math.min(width - 1, x + 2)
  const top = Math.min(height - 1, y + 2)
  let level = 0
  for (let row = Math.max(0, y - 2); row <= top; row++) {
    for (let i = row * width + left; i <= row * width + right; i++) {
      if (isLevel(values[i] - value, within)) level++
    }
  }
  return level >= PLATEAU_PIXELS
}

const isLevel = (apart: number, within: number): boolean => apart <= within && apart >= -within

/** Adds the plateaus that have an edge, with all that stands on them. */
function growShoulders(
  { values, width, height }: NormalisedPlane,
  flat: readonly number[],
  clipped: Set<number>,
): void {
  const left = new Set(flat)
  for (const seed of flat) {
    if (!left.has(seed)) continue
    const least = SHOULDER_SHARE * values[seed]
    const found = new Set([seed])
    for (const pixel of found) {
      left.delete(pixel)
      for (const i of around(pixel, 1, width, height)) if (values[i] >= least) found.add(i)
    }
    // On the flank of something brighter a few pixels may agree by chance.
    const level = flat.filter((pixel) => found.has(pixel)).length
    if (level >= LEVEL_SHARE * found.size && hasEdge(values, width, height, found))
      for (const pixel of found) clipped.add(pixel)
  }
}

function hasEdge(values: Float32Array, width: number, height: number, plateau: ReadonlySet<number>): boolean {
  let level = Number.POSITIVE_INFINITY
  for (const pixel of plateau) level = Math.min(level, values[pixel])
  const outside = new Set<number>()
  for (const pixel of plateau) {
    for (const i of around(pixel, EDGE_REACH, width, height)) if (!plateau.has(i)) outside.add(i)
  }
  let faint = 0
  for (const i of outside) if (values[i] < EDGE_SHARE * level) faint++
  return 2 * faint > outside.size
}

/** A pixel and those up to `reach` columns and rows from it. */
export function around(pixel: number, reach: number, width: number, height: number): number[] {
  const x = pixel % width
  const y = (pixel - x) / width
  const found: number[] = []
  for (let row = Math.max(0, y - reach); row <= Math.min(height - 1, y + reach); row++) {
    for (let column = Math.max(0, x - reach); column <= Math.min(width - 1, x + reach); column++) {
      found.push(row * width + column)
    }
  }
  return found
}
