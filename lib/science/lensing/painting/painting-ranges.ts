/** What painted lenses are drawn from: ranges that a lead sees and may narrow, and the painting that is drawn of them. */
import type { SeededRandom } from '../seeded-random'

export type Range = readonly [low: number, high: number]

export interface PaintingRanges {
  /** Circularised. */
  einsteinRadiusArcsec: Range
  /** Standard deviation of the mass's axis ratio about the light's. */
  axisRatioScatter: number
  /** Standard deviation of the mass's position angle about the light's, degrees. */
  positionAngleScatterDeg: number
  shearStrength: Range
  /** Distance of the source from the line of sight to the lens, in Einstein radii. */
  sourceOffset: Range
  /** Half-light radius of the source. */
  sourceRadiusArcsec: Range
  sersicIndex: Range
  sourceAxisRatio: Range
  /**
   * Of the lensed light in the band where it stands out best, optimally weighted over pixels, against the sky's noise alone:
   * sqrt(sum light^2) / noise. The light of the galaxy in front hides some of it.
   */
  arcSignalToNoise: Range
}

/**
 * Einstein radii: what ground-based surveys resolve, up to a massive galaxy's (see usual-lenses.ts). Axis ratio and angle of the
 * mass follow the light within about 0.1 and 10 degrees: L. Koopmans et al., ApJ 649, 599 (2006), section 4. Shear of some
 * hundredths: C. Keeton, C. Kochanek & U. Seljak, ApJ 482, 604 (1997). The rest is our choice; of the signal-to-noise by eye, on the
 * demo survey: at 15 nothing is seen even with the galaxy's light taken off, from 100 on most see it at once.
 */
export const USUAL_RANGES: PaintingRanges = {
  einsteinRadiusArcsec: [0.6, 2.5],
  axisRatioScatter: 0.1,
  positionAngleScatterDeg: 10,
  shearStrength: [0, 0.08],
  sourceOffset: [0, 0.5],
  sourceRadiusArcsec: [0.1, 0.35],
  sersicIndex: [0.8, 2],
  sourceAxisRatio: [0.45, 1],
  arcSignalToNoise: [20, 200],
}

/** Beyond these nothing sensible is painted. */
export const RANGE_LIMITS: { readonly [Key in keyof PaintingRanges]: Range } = {
  einsteinRadiusArcsec: [0.2, 10],
  axisRatioScatter: [0, 0.5],
  positionAngleScatterDeg: [0, 90],
  shearStrength: [0, 0.3],
  sourceOffset: [0, 1],
  sourceRadiusArcsec: [0.03, 2],
  sersicIndex: [0.5, 4],
  sourceAxisRatio: [0.2, 1],
  arcSignalToNoise: [3, 1000],
}

/** Light of the galaxy that is painted over, as measured: what the mass follows. */
export interface MeasuredEllipse {
  /** Minor over major. */
  axisRatio: number
  /** From north through east. */
  positionAngleDeg: number
}

/** One lens to be painted. Offsets east and north of the galaxy's middle, position angles from north through east. */
export interface Painting {
  einsteinRadiusArcsec: number
  axisRatio: number
  positionAngleDeg: number
  shear: { strength: number; positionAngleDeg: number }
  source: {
    east: number
    north: number
    effectiveRadiusArcsec: number
    sersicIndex: number
    axisRatio: number
    positionAngleDeg: number
  }
  /** Magnitudes of the source, as of a star-forming galaxy at redshift 1 to 3. */
  colour: { gMinusR: number; rMinusI: number }
  arcSignalToNoise: number
}

const LEAST_AXIS_RATIO = 0.4

/** Einstein radius, offset and shape evenly in their ranges, signal-to-noise evenly in its logarithm. */
export function drawPainting(ranges: PaintingRanges, galaxy: MeasuredEllipse, random: SeededRandom): Painting {
  const einsteinRadiusArcsec = random.between(...ranges.einsteinRadiusArcsec)
  const axisRatio = galaxy.axisRatio + ranges.axisRatioScatter * random.normal()
  const positionAngleDeg = galaxy.positionAngleDeg + ranges.positionAngleScatterDeg * random.normal()
  const shear = { strength: random.between(...ranges.shearStrength), positionAngleDeg: random.between(0, 180) }
  const offset = einsteinRadiusArcsec * random.between(...ranges.sourceOffset)
  const direction = random.between(0, 2 * Math.PI)
  const [faint, bright] = ranges.arcSignalToNoise
  return {
    einsteinRadiusArcsec,
    axisRatio: Math.min(1, Math.max(LEAST_AXIS_RATIO, axisRatio)),
    positionAngleDeg: ((positionAngleDeg % 180) + 180) % 180,
    shear,
    source: {
      east: offset * Math.sin(direction),
      north: offset * Math.cos(direction),
      effectiveRadiusArcsec: random.between(...ranges.sourceRadiusArcsec),
      sersicIndex: random.between(...ranges.sersicIndex),
      axisRatio: random.between(...ranges.sourceAxisRatio),
      positionAngleDeg: random.between(0, 180),
    },
    colour: { gMinusR: random.between(-0.05, 0.35), rMinusI: random.between(-0.05, 0.25) },
    arcSignalToNoise: faint * (bright / faint) ** random.uniform(),
  }
}

/** What is wrong with ranges, a sentence each, by name; none when they can be drawn from. */
export function faultsOfRanges(ranges: PaintingRanges): { name: keyof PaintingRanges; reason: string }[] {
  return (Object.keys(RANGE_LIMITS) as (keyof PaintingRanges)[]).flatMap((name) => {
    const [least, most] = RANGE_LIMITS[name]
    const value = ranges[name]
    const [low, high] = typeof value === 'number' ? [value, value] : value
    if (!(low >= least && high <= most)) return [{ name, reason: `Lies between ${least} and ${most}.` }]
    if (low > high)
      return [{ name, reason: `From ${low} to ${high} is the wrong way round: the lower end comes first.` }]
    return []
  })
}
