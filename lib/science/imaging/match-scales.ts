/** Brings bands of one candidate to one grid, by their pixel scales, so that they can be combined. */
import { estimateNoise } from './noise'
import type { BandPlane } from './normalise-planes'
import { resample } from './resample'

/** Scales that differ by less than this share are the same: at the edge of a 100-pixel cutout, half a pixel. */
const SAME_SCALE = 0.01

export interface MatchedPlanes {
  planes: BandPlane[]
  /** What was resampled, or why bands cannot be combined; null when nothing had to be done. */
  note: string | null
  /** Bands whose scale is known to differ and that could not be brought to the common grid. */
  unmatched: string[]
}

/**
 * Bands agree when they have one size and, where known, one scale. Others are resampled to the grid of the finest scale, its
 * middle on theirs, when both scales are known: cutouts are made round one position. Beyond its edge a band has no data.
 * A band without a scale that has the size of the common grid is taken to be on it.
 */
export function matchScales(planes: BandPlane[]): MatchedPlanes {
  const reference = planes.reduce<BandPlane | null>((best, plane) => {
    if (!known(plane)) return best
    return best === null || scaleOf(plane) < scaleOf(best) * (1 - SAME_SCALE) ? plane : best
  }, null)
  if (reference === null) return { planes, note: null, unmatched: [] }
  const changed: string[] = []
  const unmatched: string[] = []
  const matched = planes.map((plane) => {
    const sameSize = plane.width === reference.width && plane.height === reference.height
    if (!known(plane)) {
      if (!sameSize) unmatched.push(plane.band)
      return plane
    }
    const ratio = scaleOf(reference) / scaleOf(plane)
    if (sameSize && Math.abs(ratio - 1) <= SAME_SCALE) return plane
    changed.push(plane.band)
    return toGrid(plane, reference, Math.abs(ratio - 1) <= SAME_SCALE ? 1 : ratio)
  })
  const scale = Number(scaleOf(reference).toPrecision(3))
  const note =
    changed.length > 0 ? `Resampled to the ${scale} arcsec pixels of ${reference.band}: ${changed.join(', ')}.` : null
  return { planes: matched, note, unmatched }
}

function toGrid(plane: BandPlane, { width, height, pixelScaleArcsec }: BandPlane, ratio: number): BandPlane {
  const data = resample(plane.data, plane.width, plane.height, {
    width,
    height,
    x0: (plane.width - 1) / 2 - (ratio * (width - 1)) / 2,
    y0: (plane.height - 1) / 2 - (ratio * (height - 1)) / 2,
    xx: ratio,
    xy: 0,
    yx: 0,
    yy: ratio,
  })
  // Neighbours on the finer grid share their noise: each differs little from the next, but no pixel knows more than a share of
  // the light that one of the band's own knew. Measured there the noise would come out low and the band count for too much.
  const { background, sigma, finiteFraction } = plane.sky ?? estimateNoise(plane.data, plane.width, plane.height)
  const sky = { background: ratio * ratio * background, sigma: ratio * sigma, finiteFraction }
  return { ...plane, width, height, data, pixelScaleArcsec, sky }
}

const scaleOf = (plane: BandPlane): number => plane.pixelScaleArcsec ?? Number.NaN

const known = (plane: BandPlane): boolean => scaleOf(plane) > 0 && Number.isFinite(scaleOf(plane))
