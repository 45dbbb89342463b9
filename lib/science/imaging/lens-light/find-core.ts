/** Where the galaxy in the middle is, its brightness in each band, and the picture in which it stands out best. */
import type { NormalisedPlane } from '../normalise-planes'
import { smoothBinomial } from '../smooth'

export interface Core {
  x: number
  y: number
  /** Mean brightness within CORE_RADIUS, by band, in units of the noise. */
  brightness: number[]
}

export const CORE_RADIUS = 2.5
/** The search goes this far from the middle, as a share of the shorter side. */
const SEARCH_SHARE = 0.25

/** Weight of all shorter bands together: lens galaxies are red, their arcs blue. */
const LESS_RED = 0.3

/**
 * The brightest smoothed pixel near the middle, then the centroid round it. The further out, the brighter it must be:
 * cutouts are made round the candidate.
 * @returns null when there is no pixel with data near the middle.
 */
export function findCore(planes: NormalisedPlane[]): Core | null {
  const { width, height } = planes[0]
  const sum = new Float32Array(width * height)
  const last = planes.length - 1
  planes.forEach(({ values }, k) => {
    const weight = k === last ? 1 : LESS_RED / planes.length
    for (let i = 0; i < sum.length; i++) if (values[i] === values[i]) sum[i] += weight * values[i]
  })
  const smooth = smoothBinomial(sum, width, height)
  const reach = Math.max(2, SEARCH_SHARE * Math.min(width, height))
  const middleX = (width - 1) / 2
  const middleY = (height - 1) / 2
  let best = -1
  let most = 0
  for (let y = Math.max(0, Math.ceil(middleY - reach)); y <= Math.min(height - 1, middleY + reach); y++) {
    for (let x = Math.max(0, Math.ceil(middleX - reach)); x <= Math.min(width - 1, middleX + reach); x++) {
      const square = ((x - middleX) ** 2 + (y - middleY) ** 2) / (reach * reach)
      if (square > 1) continue
      const worth = smooth[y * width + x] * (1 - 0.75 * square)
      if (worth > most) {
        most = worth
        best = y * width + x
      }
    }
  }
  if (best < 0) return null
  const [x, y] = centroid(sum, width, height, best % width, Math.floor(best / width))
  return { x, y, brightness: planes.map((plane) => meanAround(plane, x, y)) }
}

/** Centroid under a round Gaussian window of 1.5 pixels that follows it. */
function centroid(values: Float32Array, width: number, height: number, x0: number, y0: number): [number, number] {
  let x = x0
  let y = y0
  for (let round = 0; round < 6; round++) {
    let total = 0
    let sumX = 0
    let sumY = 0
    for (let row = Math.max(0, Math.round(y) - 4); row <= Math.min(height - 1, Math.round(y) + 4); row++) {
      for (let column = Math.max(0, Math.round(x) - 4); column <= Math.min(width - 1, Math.round(x) + 4); column++) {
        const dx = column - x
        const dy = row - y
        const weight = Math.exp((dx * dx + dy * dy) / -4.5) * Math.max(0, values[row * width + column])
        total += weight
        sumX += weight * dx
        sumY += weight * dy
      }
    }
    if (!(total > 0)) break
    // Twice the shift: window and galaxy each pull half of the way.
    x += (1.6 * sumX) / total
    y += (1.6 * sumY) / total
    if (Math.hypot(x - x0, y - y0) > 3) return [x0, y0]
  }
  return [x, y]
}

function meanAround({ values, width, height }: NormalisedPlane, x: number, y: number): number {
  let sum = 0
  let count = 0
  const reach = Math.ceil(CORE_RADIUS)
  for (let row = Math.max(0, Math.round(y) - reach); row <= Math.min(height - 1, Math.round(y) + reach); row++) {
    for (
      let column = Math.max(0, Math.round(x) - reach);
      column <= Math.min(width - 1, Math.round(x) + reach);
      column++
    ) {
      const value = values[row * width + column]
      if (value !== value || Math.hypot(column - x, row - y) > CORE_RADIUS) continue
      sum += value
      count++
    }
  }
  return count > 0 ? sum / count : Number.NaN
}

/**
 * The planes together, weighted by the galaxy's own brightness in each, which gives it the best signal-to-noise; noise 1.
 * NaN where a plane that counts has no data.
 */
export function galaxyStack(planes: NormalisedPlane[], { brightness }: Core): Float32Array {
  const weights = brightness.map((value) => (value > 0 ? value : 0))
  const norm = Math.sqrt(weights.reduce((sum, weight) => sum + weight * weight, 0))
  const stack = new Float32Array(planes[0].values.length)
  planes.forEach(({ values }, k) => {
    const weight = norm > 0 ? weights[k] / norm : 0
    if (weight > 0) for (let i = 0; i < stack.length; i++) stack[i] += weight * values[i]
  })
  return stack
}
