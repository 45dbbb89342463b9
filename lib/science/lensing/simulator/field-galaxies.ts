/** Faint galaxies all over the sky: about 30 a square arcminute to i = 24.5, three times more two magnitudes deeper. */
import { sersicBrightness } from '../sersic'
import type { SeededRandom } from '../seeded-random'
import { distantBlueColour, magnitudesOf, quiescentColour } from './colours'
import { MARGIN, type Scene } from './scene'

const BRIGHTEST = 20.5
const FAINTEST = 25.8
/** Slope of the number counts, d log N / d m. */
const COUNT_SLOPE = 0.32
const PER_ARCMIN2_TO_24_5 = 30

/** Adds them, leaving the middle `clearRadiusArcsec` to the candidate itself except for the faintest. */
export function addFieldGalaxies(scene: Scene, clearRadiusArcsec: number, random: SeededRandom): void {
  const scale = scene.survey.pixelScaleArcsec
  const halfWidth = ((scene.width - MARGIN) * scale) / 2
  const halfHeight = ((scene.height - MARGIN) * scale) / 2
  const areaArcmin2 = (4 * halfWidth * halfHeight) / 3600
  const total = areaArcmin2 * PER_ARCMIN2_TO_24_5 * 10 ** (COUNT_SLOPE * (FAINTEST - 24.5))
  const count = random.poisson(total)
  for (let k = 0; k < count; k++) {
    const magnitude = drawMagnitude(random)
    const x = random.between(-halfWidth, halfWidth)
    const y = random.between(-halfHeight, halfHeight)
    const red = random.chance(magnitude < 23 ? 0.35 : 0.15)
    const colour = red ? quiescentColour(random.between(0.3, 0.8)) : distantBlueColour(random)
    const middling = { gMinusR: colour.gMinusR + 0.25, rMinusI: colour.rMinusI + 0.15 }
    const profile = {
      effectiveRadiusArcsec: 0.28 * 10 ** (-0.1 * (magnitude - 24)) * Math.exp(0.25 * random.normal()),
      index: red ? 3 : 1,
      axisRatio: random.between(0.35, 1),
      positionAngleDeg: random.between(0, 180),
      x,
      y,
    }
    if (Math.hypot(x, y) < clearRadiusArcsec && magnitude < 24.8) continue
    const magnitudes = magnitudesOf(scene.survey, magnitude, red ? colour : middling)
    scene.add(sersicBrightness(profile), magnitudes, { x, y, fine: 5, fineRadiusArcsec: 0.5 })
  }
}

/** Inverse of the cumulative counts between the two limits. */
function drawMagnitude(random: SeededRandom): number {
  const low = 10 ** (COUNT_SLOPE * BRIGHTEST)
  const high = 10 ** (COUNT_SLOPE * FAINTEST)
  return Math.log10(random.between(low, high)) / COUNT_SLOPE
}
