/** One step of Gauss and Newton of the ellipses towards what the residual says. */
import { heldEllipticity, RADIUS, radiusDerivatives, type EllipseGeometry } from './ellipse-geometry'
import type { RadialProfile } from './gaussian-profile'
import { solveSymmetric } from './nnls'
import { ABOVE, FOREIGN, MISSING, type ForeignLight } from './profile-rows'

const PARAMETERS = 6

/** Standard deviations of the priors round the anchor. */
export interface GeometryPrior {
  centrePixels: number
  coreEllipticity: number
  outerEllipticity: number
}

/** Within this radius, pixels, all light is the galaxy's. */
const CORE_REACH = 4

/**
 * @param shapeDoubt share of the light by which even the right ellipses miss it.
 * @returns geometry nearer to the pixels; the same when they say nothing.
 */
export function improveGeometry(
  geometry: EllipseGeometry,
  profile: RadialProfile,
  values: Float32Array,
  excluded: Uint8Array,
  foreign: ForeignLight | null,
  width: number,
  height: number,
  reach: number,
  shapeDoubt: number,
  prior: GeometryPrior,
  anchor: EllipseGeometry = geometry,
): EllipseGeometry {
  const gram = new Float64Array(PARAMETERS * PARAMETERS)
  const moment = new Float64Array(PARAMETERS)
  const slopes = new Float64Array(PARAMETERS + 1)
  const bottom = Math.max(0, Math.ceil(geometry.y - reach))
  const top = Math.min(height - 1, Math.floor(geometry.y + reach))
  const left = Math.max(0, Math.ceil(geometry.x - reach))
  const right = Math.min(width - 1, Math.floor(geometry.x + reach))
  for (let row = bottom; row <= top; row++) {
    for (let column = left; column <= right; column++) {
      const i = row * width + column
      if (excluded[i] === MISSING || (excluded[i] === FOREIGN && foreign === null)) continue
      radiusDerivatives(geometry, column, row, slopes)
      const m = slopes[RADIUS]
      if (m > reach || (m > CORE_REACH && excluded[i] === ABOVE)) continue
      // The core alone says where the centre is: outside, neighbours would pull at it.
      if (m > CORE_REACH) slopes[0] = slopes[1] = 0
      const light = profile.at(m)
      const slope = profile.slopeAt(m)
      const taken = excluded[i] === FOREIGN && foreign !== null ? profile.foreignShare * foreign.values[i] : 0
      const residual = values[i] - light - profile.pedestal - taken
      const variance = 1 + (shapeDoubt * light) ** 2 + (0.3 * taken) ** 2
      const excess = residual / Math.sqrt(variance)
      // Huber's weights.
      const trust = Math.abs(excess) > 1.5 ? 1.5 / Math.abs(excess) : 1
      const weight = trust / variance
      const pull = weight * residual * slope
      const steep = weight * slope * slope
      for (let a = 0; a < PARAMETERS; a++) {
        moment[a] += pull * slopes[a]
        const scaled = steep * slopes[a]
        for (let b = 0; b <= a; b++) gram[a * PARAMETERS + b] += scaled * slopes[b]
      }
    }
  }
  const { centrePixels, coreEllipticity, outerEllipticity } = prior
  const widths = [centrePixels, centrePixels, coreEllipticity, coreEllipticity, outerEllipticity, outerEllipticity]
  const home = [anchor.x, anchor.y, ...anchor.core, ...anchor.outer]
  const here = [geometry.x, geometry.y, ...geometry.core, ...geometry.outer]
  widths.forEach((spread, a) => {
    gram[a * PARAMETERS + a] += 1 / (spread * spread)
    moment[a] += (home[a] - here[a]) / (spread * spread)
  })
  for (let a = 0; a < PARAMETERS; a++)
    for (let b = a + 1; b < PARAMETERS; b++) gram[a * PARAMETERS + b] = gram[b * PARAMETERS + a]
  const step = solveSymmetric(gram, moment)
  if (step === null) return geometry
  const calm = (value: number, most: number) => Math.max(-most, Math.min(most, value))
  return {
    x: geometry.x + calm(step[0], 0.5),
    y: geometry.y + calm(step[1], 0.5),
    core: heldEllipticity([geometry.core[0] + calm(step[2], 0.2), geometry.core[1] + calm(step[3], 0.2)]),
    outer: heldEllipticity([geometry.outer[0] + calm(step[4], 0.2), geometry.outer[1] + calm(step[5], 0.2)]),
    turnRadius: geometry.turnRadius,
  }
}
