/** From pixels to the mean brightness of rings between ellipses, held against arcs that cross them. */
import { selectMedian, selectRank } from '../selection'
import type { ProfileBasis, ProfileRows, RadialProfile } from './gaussian-profile'

const TABLE_STEPS = 8
/** Where the galaxy is bright its shape, not the sky, limits how well a row is known: this share of the light. */
const ROW_DOUBT = 0.005
/** Mean of a normal distribution cut above 2 sigma. */
const CUT_BIAS = 0.0553
/** Rows of which less than this share is seen are left to their neighbours. */
const LEAST_SEEN = 0.15
/** Within this radius, pixels, the median is taken: arcs do not come so near, and shape errors are larger than noise. */
const CORE = 2.5
/** Elsewhere this quantile of a row is the first guess, with what a normal distribution's lies below its mean. */
const LOW_QUANTILE = 0.35
const LOW_QUANTILE_SIGMA = 0.3853

/** Marks of pixels: counted, standing above the model, holding light whose colour is not the galaxy's, without data. */
export const COUNTED = 0
export const ABOVE = 1
export const FOREIGN = 2
export const MISSING = 3

/** Share of the foreign light that remains uncertain, its colour not being the same everywhere. */
const FOREIGN_DOUBT = 0.05

/** Light whose colour is not the galaxy's, as it is and smoothed so that its noise does not sort the pixels. */
export interface ForeignLight {
  values: Float32Array
  smooth: Float32Array
}

/** Pixels sorted by ring: `order` holds pixel numbers, ring k from starts[k] to starts[k + 1]. */
export interface SortedRings {
  order: Uint32Array
  starts: Uint32Array
}

export class Rings {
  readonly count: number
  private readonly ringOfStep: Uint8Array
  /** Space to work in, used again by every row and every candidate of the size: clearing it away took a fifth of the time. */
  private values = new Float64Array(0)
  private pixels = new Uint32Array(0)
  private ringOfPixel = new Uint8Array(0)

  constructor(readonly reach: number) {
    this.ringOfStep = new Uint8Array(Math.ceil(reach * TABLE_STEPS) + 1)
    let ring = 0
    let end = 0.6
    for (let step = 0; step < this.ringOfStep.length; step++) {
      while (step / TABLE_STEPS >= end) {
        ring++
        end += Math.max(0.6, 0.1 * end)
      }
      this.ringOfStep[step] = ring
    }
    this.count = ring + 1
  }

  sort(radii: Float32Array): SortedRings {
    const { ringOfStep, count, reach } = this
    const starts = new Uint32Array(count + 1)
    if (this.ringOfPixel.length < radii.length) this.ringOfPixel = new Uint8Array(radii.length)
    const rings = this.ringOfPixel
    for (let i = 0; i < radii.length; i++) {
      if (radii[i] >= reach) {
        rings[i] = 255
        continue
      }
      const ring = ringOfStep[(radii[i] * TABLE_STEPS) | 0]
      rings[i] = ring
      starts[ring + 1]++
    }
    for (let k = 0; k < count; k++) starts[k + 1] += starts[k]
    const next = starts.slice()
    const order = new Uint32Array(starts[count])
    for (let i = 0; i < radii.length; i++) if (rings[i] !== 255) order[next[rings[i]]++] = i
    return { order, starts }
  }

  /** At least so many places, with whatever stands in them. */
  space(count: number): { values: Float64Array; pixels: Uint32Array } {
    if (this.values.length < count) {
      this.values = new Float64Array(count)
      this.pixels = new Uint32Array(count)
    }
    return { values: this.values, pixels: this.pixels }
  }
}

let latest: Rings | null = null

/** The rings to this radius. Cutouts of a survey have one size, so the latest are kept. */
export function ringsFor(reach: number): Rings {
  if (latest?.reach !== reach) latest = new Rings(reach)
  return latest
}

/**
 * Three rows a ring: the mean of the pixels that count, held against what crosses them, and of those marked foreign the mean
 * of the half with more and of the half with less foreign light, with the mean of that light, which the fit may take off:
 * how brightness follows it along the ring tells how much of it the band holds.
 * @param values one band in units of its noise.
 * @param marks COUNTED, ABOVE, FOREIGN or MISSING, by pixel.
 * @param model what is known so far, null at first.
 * @param foreign light whose colour is not the galaxy's, null when colours are not known.
 */
export function profileRows(
  basis: ProfileBasis,
  rings: Rings,
  { order, starts }: SortedRings,
  radii: Float32Array,
  values: Float32Array,
  marks: Uint8Array,
  model: RadialProfile | null,
  foreign: ForeignLight | null,
): ProfileRows {
  const ringCount = starts.length - 1
  const rows = emptyRows(basis, foreign === null ? ringCount : 3 * ringCount)
  const { values: work, pixels } = rings.space(order.length)
  for (let ring = 0; ring < ringCount; ring++) {
    const from = starts[ring]
    const to = starts[ring + 1]
    let seen = 0
    let modelSum = 0
    for (let k = from; k < to; k++) {
      const i = order[k]
      if (marks[i] !== COUNTED) continue
      const expected = model === null ? 0 : model.at(radii[i]) + model.pedestal
      modelSum += expected
      pixels[seen] = i
      work[seen++] = values[i] - expected
    }
    if (seen > 0 && seen >= LEAST_SEEN * (to - from)) {
      const radius = gaussianMeans(basis, pixels, 0, seen, radii, rows.means, ring)
      const centre = rowCentre(work, seen, radius, model === null)
      rows.brightness[ring] = modelSum / seen + centre.value
      rows.errors[ring] = Math.sqrt(1 / centre.kept + (ROW_DOUBT * rows.brightness[ring]) ** 2)
    }
    if (foreign === null) continue
    const split = splitForeign(order, from, to, marks, foreign.smooth, pixels)
    foreignRow(basis, pixels, 0, split.low, radii, values, foreign.values, rows, ringCount + ring)
    foreignRow(basis, pixels, split.low, split.all, radii, values, foreign.values, rows, 2 * ringCount + ring)
  }
  return rows
}

/** The foreign pixels of a ring into `pixels`, those with less than their mean of foreign light first. */
function splitForeign(
  order: Uint32Array,
  from: number,
  to: number,
  marks: Uint8Array,
  foreign: Float32Array,
  pixels: Uint32Array,
): { low: number; all: number } {
  let all = 0
  let sum = 0
  for (let k = from; k < to; k++) {
    if (marks[order[k]] !== FOREIGN) continue
    pixels[all++] = order[k]
    sum += foreign[order[k]]
  }
  let low = 0
  for (let k = 0; k < all; k++) {
    const pixel = pixels[k]
    if (foreign[pixel] * all >= sum) continue
    pixels[k] = pixels[low]
    pixels[low++] = pixel
  }
  return { low, all }
}

function foreignRow(
  basis: ProfileBasis,
  pixels: Uint32Array,
  from: number,
  to: number,
  radii: Float32Array,
  values: Float32Array,
  foreign: Float32Array,
  rows: ProfileRows,
  row: number,
): void {
  if (to === from) return
  let sum = 0
  let foreignSum = 0
  for (let k = from; k < to; k++) {
    sum += values[pixels[k]]
    foreignSum += foreign[pixels[k]]
  }
  const count = to - from
  rows.brightness[row] = sum / count
  rows.foreign[row] = foreignSum / count
  rows.errors[row] = Math.sqrt(
    1 / count + (ROW_DOUBT * rows.brightness[row]) ** 2 + (FOREIGN_DOUBT * rows.foreign[row]) ** 2,
  )
  gaussianMeans(basis, pixels, from, to, radii, rows.means, row)
}

function emptyRows(basis: ProfileBasis, count: number): ProfileRows {
  return {
    means: basis.widths.map(() => new Float64Array(count)),
    foreign: new Float64Array(count),
    brightness: new Float64Array(count),
    errors: new Float64Array(count).fill(Number.POSITIVE_INFINITY),
  }
}

function rowCentre(
  work: Float64Array,
  seen: number,
  radius: number,
  isFirst: boolean,
): { value: number; kept: number } {
  if (radius < CORE || seen < 8) return { value: selectMedian(work, seen), kept: seen }
  const rank = Math.floor(LOW_QUANTILE * (seen - 1) + 0.5)
  const low = selectRank(work, rank, seen) + LOW_QUANTILE_SIGMA
  if (isFirst) return { value: low, kept: seen }
  let sum = 0
  let kept = 0
  for (let k = 0; k < seen; k++) {
    const value = work[k]
    if (value > low + 2 || value < low - 5) continue
    sum += value
    kept++
  }
  return kept > 0 ? { value: sum / kept + CUT_BIAS, kept } : { value: low, kept: 1 }
}

/** Beyond this radius rows are so much narrower than the profile is curved that their mean radius stands for them. */
const FINE_RADIUS = 5

/** Means of the Gaussians over these pixels into their row; returns the mean radius. */
function gaussianMeans(
  { widths }: ProfileBasis,
  pixels: Uint32Array,
  from: number,
  to: number,
  radii: Float32Array,
  means: Float64Array[],
  row: number,
): number {
  let sum = 0
  for (let k = from; k < to; k++) sum += radii[pixels[k]]
  const radius = sum / (to - from)
  if (radius > FINE_RADIUS) {
    for (let w = 0; w < widths.length; w++) means[w][row] = Math.exp(-0.5 * (radius / widths[w]) ** 2)
    return radius
  }
  for (let k = from; k < to; k++) {
    const half = -0.5 * radii[pixels[k]] ** 2
    for (let w = 0; w < widths.length; w++) means[w][row] += Math.exp(half / (widths[w] * widths[w]))
  }
  for (let w = 0; w < widths.length; w++) means[w][row] /= to - from
  return radius
}
