/** What practice says of a painted stamp, made of what was painted. Pure; no network, no lead's text. */
import type { PaintingTruth } from '@/lib/science/lensing/painting/paint-lens'
import type { PaintedArc } from '@/lib/science/lensing/painting/arcs'

const DIRECTIONS = ['north', 'north-east', 'east', 'south-east', 'south', 'south-west', 'west', 'north-west'] as const

/** From this extent in position angle on, light is a ring; below the second it is an image and no arc. */
const RING_DEG = 300
const ARC_DEG = 60
/** From this extent on both ends are named. */
const LONG_DEG = 120

export const directionOf = (positionAngleDeg: number): string =>
  DIRECTIONS[Math.round((((positionAngleDeg % 360) + 360) % 360) / 45) % 8]

const COUNTS = ['no', 'one', 'two', 'three', 'four', 'five', 'six']
const arcsec = (value: number): string => `${value.toFixed(1)} arcsec`

/** Signal-to-noise of arcs that most see at once, and of those that few do (our choice, by eye). */
const BRIGHT = 100
const FAINT = 35

export function explainPainting(truth: PaintingTruth): string {
  const { arcSignalToNoise, einsteinRadiusArcsec } = truth
  const strength = arcSignalToNoise >= BRIGHT ? 'bright blue' : arcSignalToNoise < FAINT ? 'faint blue' : 'blue'
  const seen = `${article(strength)} ${shapeOf(truth, strength)}`
  return `${seen}, painted over a real galaxy. Einstein radius ${arcsec(einsteinRadiusArcsec)}.`
}

export const EXPLAIN_COPY =
  'A real galaxy of this campaign with nothing painted on it. The lead of the campaign took it for a sure non-lens.'

const article = (words: string): string => (/^[aeiou]/.test(words) ? 'An' : 'A')

function shapeOf({ arcs, einsteinRadiusArcsec }: PaintingTruth, strength: string): string {
  const [first, ...others] = arcs
  if (!first) return `${strength} source`
  if (first.lengthDeg >= RING_DEG) return `${strength} ring ${arcsec(first.radiusArcsec)} from the middle`
  const rest = others.filter(({ brightness }) => brightness >= 0.3)
  const kind = (arc: PaintedArc) => (arc.lengthDeg >= ARC_DEG ? 'arc' : 'image')
  if (rest.length === 0) return `${strength} ${kind(first)} ${placeOf(first)}`
  if (rest.length === 1) {
    // Brightness is conserved, so the farther one is named first: of two images the counter-image is the one within the ring.
    const [outer, inner] = [first, rest[0]].sort((a, b) => b.radiusArcsec - a.radiusArcsec)
    const isCounter = inner.radiusArcsec < einsteinRadiusArcsec && outer.radiusArcsec > einsteinRadiusArcsec
    const second = isCounter ? 'counter-image' : `second ${kind(inner)}`
    return `${strength} ${kind(outer)} ${placeOf(outer)} and a ${second} ${placeOf(inner)}`
  }
  const number = COUNTS[rest.length] ?? String(rest.length)
  return `${strength} ${kind(first)} ${placeOf(first)} and ${number} more round the galaxy`
}

/** An arc lies where its middle is; a long one reaches from one end to the other, north through east. */
function placeOf({ rays, positionAngleDeg, radiusArcsec, lengthDeg }: PaintedArc): string {
  const at = arcsec(radiusArcsec)
  const [first, middle, last] = [rays[0], rays[Math.floor(rays.length / 2)], rays.at(-1)].map((ray) =>
    directionOf(ray?.positionAngleDeg ?? positionAngleDeg),
  )
  if (lengthDeg < LONG_DEG || rays.length < 3) return `${at} to the ${middle}`
  return `${at} from the middle, from the ${first} by the ${middle} to the ${last}`
}
