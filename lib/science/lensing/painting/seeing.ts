/**
 * How wide a point is in a cutout: from its own stars where there are some, else what its header says, else a usual value for
 * the band; never wider than the sharpest thing that the picture shows.
 */
import type { FitsHeader } from '@/lib/science/fits/fits-types'
import { estimateNoise } from '@/lib/science/imaging/noise'

export interface Seeing {
  /** Full width at half maximum. */
  arcsec: number
  from: 'stars' | 'header' | 'usual' | 'core'
}

/** Common keywords for the width in arcsec; no standard has them. */
const KEYWORDS = ['PSF_FWHM', 'PSFFWHM', 'SEEING', 'FWHM']
const LIKELY_ARCSEC = [0.03, 5] as const

/** At 625 nm: a good site from the ground (common practice, no source). */
const USUAL_ARCSEC = 0.8
const USUAL_AT_NM = 625
/** Effective wavelengths of the usual broad bands in nm (common practice, no source). */
const WAVELENGTH_NM: Record<string, number> = { u: 360, g: 480, r: 625, i: 760, z: 890, y: 970 }

/** Seeing goes with wavelength to the power -1/5: D. Fried, JOSA 56, 1372 (1966), by the coherence length's 6/5. */
export const usualSeeingArcsec = (band: string): number =>
  USUAL_ARCSEC * ((WAVELENGTH_NM[band.toLowerCase()] ?? USUAL_AT_NM) / USUAL_AT_NM) ** -0.2

export interface PlaneToMeasure {
  band: string
  width: number
  height: number
  data: Float32Array
  pixelScaleArcsec: number
  header: FitsHeader
}

/** @param middle of the galaxy, pixels: it is no star. */
export function seeingOf(plane: PlaneToMeasure, middle: { x: number; y: number }): Seeing {
  const { pixelScaleArcsec: scale } = plane
  const stars = starWidthPixels(plane, middle)
  if (stars !== null) return { arcsec: stars * scale, from: 'stars' }
  const told = KEYWORDS.map((keyword) => plane.header[keyword]).find(
    (value): value is number => typeof value === 'number' && value >= LIKELY_ARCSEC[0] && value <= LIKELY_ARCSEC[1],
  )
  if (told !== undefined) return { arcsec: told, from: 'header' }
  const usual = usualSeeingArcsec(plane.band)
  const { background } = estimateNoise(plane.data, plane.width, plane.height)
  const core = widthAt(plane, background, middle.x, middle.y)
  if (core !== null && core.width * scale < usual) return { arcsec: core.width * scale, from: 'core' }
  return { arcsec: usual, from: 'usual' }
}

const LEAST_PEAK_SIGMA = 25
/** Pixels from the galaxy and from the edge within which nothing is taken for a star. */
const GALAXY_PIXELS = 10
const EDGE_PIXELS = 6
const MOST_ELLIPTICAL = 0.12
/** Stars are the sharpest things there are, and all alike. */
const ALIKE = 1.12
const LEAST_STARS = 2

/**
 * Full width at half maximum of the stars, pixels; null where fewer than two bright, round, sharp and alike things stand beside
 * the galaxy: one alone may be a small galaxy.
 */
export function starWidthPixels(
  { data, width, height }: Pick<PlaneToMeasure, 'data' | 'width' | 'height'>,
  middle: { x: number; y: number },
): number | null {
  const { background, sigma } = estimateNoise(data, width, height)
  if (!(sigma > 0)) return null
  const least = background + LEAST_PEAK_SIGMA * sigma
  const widths: number[] = []
  for (let y = EDGE_PIXELS; y < height - EDGE_PIXELS; y++) {
    for (let x = EDGE_PIXELS; x < width - EDGE_PIXELS; x++) {
      if (!(data[y * width + x] > least) || Math.hypot(x - middle.x, y - middle.y) < GALAXY_PIXELS) continue
      if (!isPeak(data, width, x, y)) continue
      const found = widthAt({ data, width, height }, background, x, y)
      if (found && found.ellipticity < MOST_ELLIPTICAL) widths.push(found.width)
    }
  }
  widths.sort((a, b) => a - b)
  const alike = widths.filter((value) => value <= ALIKE * widths[0])
  return alike.length >= LEAST_STARS ? alike[Math.floor((alike.length - 1) / 2)] : null
}

function isPeak(data: Float32Array, width: number, x: number, y: number): boolean {
  const value = data[y * width + x]
  for (let dy = -2; dy <= 2; dy++) {
    for (let dx = -2; dx <= 2; dx++) {
      if ((dx !== 0 || dy !== 0) && !(data[(y + dy) * width + x + dx] <= value)) return false
    }
  }
  return true
}

/** A Gaussian's is 2.3548 sigma. Under a window of the object's own width a Gaussian keeps half its variance. */
const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2)
const REACH_PIXELS = 8

/** Of a Gaussian nothing would be taken off, of a Moffat of beta 3.5 nine hundredths: real stars lie between. */
const WINGS = 1.045

/**
 * Width by moments under a round Gaussian window that takes the object's own width: G. Bernstein & M. Jarvis, AJ 123, 583 (2002),
 * section 3. Null where it does not settle. Right within 5 % for a Gaussian and for a Moffat of beta 3.5.
 */
function widthAt(
  { data, width, height }: Pick<PlaneToMeasure, 'data' | 'width' | 'height'>,
  background: number,
  startX: number,
  startY: number,
): { width: number; ellipticity: number } | null {
  let [x, y, variance] = [startX, startY, 2.5]
  let ellipticity = 0
  for (let round = 0; round < 40; round++) {
    let [total, sumX, sumY] = [0, 0, 0]
    let [xx, yy, xy] = [0, 0, 0]
    const [fromX, untilX] = [
      Math.max(0, Math.round(x) - REACH_PIXELS),
      Math.min(width - 1, Math.round(x) + REACH_PIXELS),
    ]
    const [fromY, untilY] = [
      Math.max(0, Math.round(y) - REACH_PIXELS),
      Math.min(height - 1, Math.round(y) + REACH_PIXELS),
    ]
    for (let row = fromY; row <= untilY; row++) {
      for (let column = fromX; column <= untilX; column++) {
        const value = data[row * width + column] - background
        if (value - value !== 0) continue
        const [dx, dy] = [column - x, row - y]
        const weighted = value * Math.exp(-(dx * dx + dy * dy) / (2 * variance))
        total += weighted
        sumX += weighted * dx
        sumY += weighted * dy
        xx += weighted * dx * dx
        yy += weighted * dy * dy
        xy += weighted * dx * dy
      }
    }
    if (!(total > 0)) return null
    x += (2 * sumX) / total
    y += (2 * sumY) / total
    if (Math.hypot(x - startX, y - startY) > 2) return null
    const next = (xx + yy) / total
    ellipticity = Math.hypot(xx - yy, 2 * xy) / (xx + yy)
    const step = next - variance
    variance = Math.min(REACH_PIXELS ** 2 / 4, Math.max(0.2, next))
    if (Math.abs(step) < 1e-4 * variance) {
      // Pixels add a twelfth to the variance.
      return { width: (FWHM_PER_SIGMA * Math.sqrt(Math.max(0.05, variance - 1 / 12))) / WINGS, ellipticity }
    }
  }
  return null
}
